import { sharpnessFinding } from '@/lib/shared/findings';
import type { FramePicture, ReportContent } from '@/lib/shared/report';
import { FrameMap } from '../pictures/frame-map';
import { MtfCurves } from '../pictures/mtf-curves';
import { Section } from './parts';

type Picture = ReportContent['pictures'][number];

/** The frame with its stations, the curves, and the unit's own pictures at 100 %. */
export function Sharpness({ content, base }: { content: ReportContent; base: string }) {
  const { frame, curves } = content;
  const crops = content.pictures.filter(({ name }) => name !== 'view');
  if (!frame && curves.length === 0 && crops.length === 0) return null;
  return (
    <Section
      id="sharpness"
      title={frame ? headlineOf(frame) : 'Sharpness'}
      lead={
        frame
          ? 'Each ring is one place in the picture: the further it closes, the sharper the camera draws there. The hairs show how far red and blue are displaced.'
          : 'The target was not found in enough shots to draw sharpness over the frame.'
      }
    >
      <div className="grid items-start gap-7 sm:grid-cols-[1.3fr_1fr]">
        {frame ? <FrameMap frame={frame} /> : null}
        <div className="grid min-w-0 gap-5">
          {curves.length ? <MtfCurves curves={curves} /> : null}
          <Crops pictures={crops} base={base} />
        </div>
      </div>
    </Section>
  );
}

function headlineOf(frame: FramePicture): string {
  const finding = sharpnessFinding(
    frame.stations.flatMap(({ id, mtf50 }) =>
      mtf50 === null ? [] : [{ name: 'sharpness.mtf50', zone: id, value: mtf50, expanded: 0 }],
    ),
  );
  return finding?.title ?? 'Sharpness over the frame';
}

/** Shown at the size they were cut, so that one pixel of the photograph is one of the page. */
function Crops({ pictures, base }: { pictures: Picture[]; base: string }) {
  if (pictures.length === 0) return null;
  return (
    <div>
      <div className="grid grid-cols-2 items-start gap-3">
        {pictures.map((picture) => (
          <OwnPicture
            key={picture.name}
            picture={picture}
            base={base}
            className="print:max-w-[170px]"
          />
        ))}
      </div>
      <p className="label mt-2 print:hidden">
        From this camera’s own shots, at 100 %: one pixel is one pixel.
      </p>
    </div>
  );
}

/** A picture of this unit on the grey it is judged on, with its size kept free while it loads. */
export function OwnPicture({
  picture,
  base,
  className,
}: {
  picture: Picture;
  base: string;
  className?: string;
}) {
  return (
    <figure className={className}>
      <img
        src={`${base}/pictures/${picture.name}`}
        width={picture.width}
        height={picture.height}
        alt={picture.alt}
        loading="lazy"
        decoding="async"
        className="h-auto max-w-full rounded-lg bg-well"
      />
      <figcaption className="mt-1 text-[12.5px] text-ink-2">{picture.label}</figcaption>
    </figure>
  );
}
