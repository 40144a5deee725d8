import Image from 'next/image';
import { placeName } from '@/components/pictures/draw';
import { Panel, PanelHead } from '@/components/ui/panel';
import type { ShotDetail } from '@/lib/shared/api';

/** Pieces of the picture, one of its pixels to one of the screen's. */
export function Crops({ crops }: { crops: NonNullable<ShotDetail['analysis']>['crops'] }) {
  return (
    <Panel aria-label="Crops">
      <PanelHead title="Pixel for pixel" aside="100 %" />
      <ul className="flex gap-3 max-sm:overflow-x-auto sm:flex-wrap">
        {crops.map((crop) => (
          <li key={crop.station} className="max-sm:shrink-0 sm:max-w-full">
            <span className="block overflow-hidden rounded-well bg-well">
              <Image
                src={crop.url}
                alt={`${placeName(crop.station)} at 100 %`}
                width={crop.width}
                height={crop.height}
                unoptimized
                className="max-w-none [image-rendering:pixelated]"
              />
            </span>
            <span className="label mt-1 block">{placeName(crop.station)}</span>
          </li>
        ))}
      </ul>
    </Panel>
  );
}
