import { FrameMap } from '../pictures/frame-map';
import { ScaleLine } from '../pictures/scale-line';
import { Chip } from '../ui/chip';
import { Sheet } from '../ui/panel';
import { exampleFrame, exampleScales } from './example';

/** What a report looks like, with invented numbers and saying so. */
export function ExampleSection() {
  return (
    <Sheet id="example" className="grid gap-6">
      <div>
        <Chip>Example with invented numbers</Chip>
        <h2 className="mt-2.5">Sharp in the middle, the lower right corner is the weakest</h2>
        <p className="mt-1.5 max-w-text text-ink-2">
          Results are drawn on the picture itself. Each ring is one place of the printed target: the
          further it closes, the sharper the camera draws there.
        </p>
      </div>
      <div className="grid items-start gap-7 lg:grid-cols-[1.25fr_1fr]">
        <FrameMap frame={exampleFrame} />
        <div>
          {exampleScales.map((scale) => (
            <div
              key={scale.label}
              className="border-line-2 border-t py-3 first:border-0 first:pt-0"
            >
              <div className="flex flex-wrap items-baseline justify-between gap-x-4">
                <b>{scale.label}</b>
                <span className="whitespace-nowrap font-[640]">{scale.text}</span>
              </div>
              <ScaleLine data={scale} />
              <div className="text-[12.5px] text-ink-3">following {scale.source}</div>
            </div>
          ))}
          <p className="mt-3 text-[13.5px] text-ink-2">
            The disc is the result, the bar its doubt, the small strokes other cameras of the model;
            letters mark where each grade ends. Full disc: clearly within. Half: in doubt. Open
            ring: clearly outside.
          </p>
        </div>
      </div>
    </Sheet>
  );
}
