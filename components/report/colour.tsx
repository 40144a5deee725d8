import { colourFinding, exposureFinding, type Reading } from '@/lib/shared/findings';
import type { ReportContent } from '@/lib/shared/report';
import { AbPlane } from '../pictures/ab-plane';
import { Histogram } from '../pictures/histogram';
import { ToneCurve } from '../pictures/tone-curve';
import { Section } from './parts';

/** Colours in the plane, and how light the camera made its pictures. */
export function ColourAndTone({ content }: { content: ReportContent }) {
  const { colours, tone, histogram, measurements } = content;
  const readings: Reading[] = measurements;
  if (colours.length === 0 && tone.length === 0 && histogram.length === 0) return null;
  return (
    <div className="grid items-stretch gap-4 sm:grid-cols-2 print:gap-8">
      {colours.length ? (
        <Section
          title={colourFinding(readings)?.title ?? 'Colours'}
          lead="Each line runs from the colour as printed to the colour as photographed. Further out is stronger."
        >
          <AbPlane colours={colours} className="print:mx-auto print:w-[230px]" />
        </Section>
      ) : null}
      {tone.length || histogram.length ? (
        <Section
          title={exposureFinding(readings)?.title ?? 'Tone'}
          lead="An 18 % grey belongs at code 118 of 255. Each disc is one printed grey."
        >
          <div className="grid gap-4 print:grid-cols-2">
            {tone.length ? <ToneCurve tone={tone} /> : null}
            {histogram.length ? <Histogram bins={histogram} height={104} /> : null}
          </div>
        </Section>
      ) : null}
    </div>
  );
}
