import Image from 'next/image';
import { placeName } from '@/components/pictures/draw';
import { Panel, PanelHead } from '@/components/ui/panel';
import type { ShotDetail } from '@/lib/shared/api';

/** Pieces of the picture, one of its pixels to one of the screen's; each opens alone, so that keys reach a row that scrolls. */
export function Crops({ crops }: { crops: NonNullable<ShotDetail['analysis']>['crops'] }) {
  // A station's circle differs by a pixel or two from place to place; the wells don't.
  const side = {
    width: Math.min(...crops.map((crop) => crop.width)),
    height: Math.min(...crops.map((crop) => crop.height)),
  };
  return (
    <Panel aria-label="Crops">
      <PanelHead title="Pixel for pixel" aside="100 %" />
      <ul className="flex gap-3 max-sm:overflow-x-auto sm:flex-wrap">
        {crops.map((crop) => (
          <li key={crop.station} className="shrink-0 sm:max-w-full">
            <a
              href={crop.url}
              className="grid place-content-center overflow-hidden rounded-well bg-well focus-visible:rounded-well"
              style={side}
            >
              <Image
                src={crop.url}
                alt={`${placeName(crop.station)} at 100 %`}
                width={crop.width}
                height={crop.height}
                unoptimized
                className="max-w-none [image-rendering:pixelated]"
              />
            </a>
            <span className="label mt-1 block">{placeName(crop.station)}</span>
          </li>
        ))}
      </ul>
    </Panel>
  );
}
