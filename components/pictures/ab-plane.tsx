import { numberText } from '@/lib/shared/numbers';
import type { ReportContent } from '@/lib/shared/report';
import { DataTable, Picture } from './data-table';
import { round } from './draw';

export type ColourPoint = ReportContent['colours'][number];

const size = 280;
const centre = size / 2;

/** Colours in the a*b* plane: from the target's reference (end of the line) to what the camera made of it (the disc, in its own colour). */
export function AbPlane({
  colours,
  table = true,
  className,
}: {
  colours: readonly ColourPoint[];
  table?: boolean;
  className?: string;
}) {
  const reach = reachOf(colours);
  const scale = (centre - 26) / reach;
  const x = (a: number) => round(centre + a * scale);
  const y = (b: number) => round(centre - b * scale);
  const hues = colours.filter((colour) => colour.id.startsWith('hue'));
  const chroma = mean(hues.map(({ reference: [, a, b] }) => Math.hypot(a, b)));
  return (
    <Picture className={className} table={table ? <ColourTable colours={colours} /> : null}>
      <svg
        viewBox={`0 0 ${size} ${size}`}
        role="img"
        aria-label={spoken(colours)}
        className="mx-auto block h-auto w-full max-w-[340px]"
      >
        <path
          d={`M10 ${centre}H${size - 10}M${centre} 10V${size - 10}`}
          stroke="var(--line)"
          fill="none"
        />
        {chroma > 0 ? (
          <circle
            cx={centre}
            cy={centre}
            r={round(chroma * scale)}
            fill="none"
            stroke="var(--edge)"
            strokeWidth={1.2}
            strokeDasharray="2 3"
          />
        ) : null}
        <g fontSize={11} fill="var(--ink-3)">
          <text x={size - 10} y={centre - 5} textAnchor="end">
            a* red
          </text>
          <text x={10} y={centre - 5}>
            green
          </text>
          <text x={centre + 12} y={13}>
            b* yellow
          </text>
          <text x={centre + 12} y={size - 6}>
            blue
          </text>
        </g>
        <g strokeWidth={2.5} strokeLinecap="round">
          {colours.map(({ id, reference, measured, rgb }) => (
            <path
              key={id}
              d={`M${x(reference[1])} ${y(reference[2])}L${x(measured[1])} ${y(measured[2])}`}
              stroke={hex(rgb)}
            />
          ))}
        </g>
        <g stroke="var(--edge)" strokeWidth={0.75}>
          {colours.map(({ id, measured, rgb }) => (
            <circle key={id} cx={x(measured[1])} cy={y(measured[2])} r={6.5} fill={hex(rgb)} />
          ))}
        </g>
      </svg>
    </Picture>
  );
}

function hex(rgb: readonly number[]): string {
  const two = (value: number) => Math.round(value).toString(16).padStart(2, '0');
  return `#${rgb.map(two).join('')}`;
}

/** The widest chroma drawn, in round tens. */
function reachOf(colours: readonly ColourPoint[]): number {
  const widest = Math.max(
    20,
    ...colours.flatMap(({ reference, measured }) => [
      Math.abs(reference[1]),
      Math.abs(reference[2]),
      Math.abs(measured[1]),
      Math.abs(measured[2]),
    ]),
  );
  return Math.ceil(widest / 10) * 10;
}

const mean = (values: readonly number[]) =>
  values.length ? values.reduce((sum, value) => sum + value, 0) / values.length : 0;

function ColourTable({ colours }: { colours: readonly ColourPoint[] }) {
  const lab = (values: readonly number[]) => values.map((value) => numberText(value, 0)).join(', ');
  return (
    <DataTable
      caption="Each colour disc: reference and measured CIELAB (D50) and their difference, CIEDE2000"
      head={['Disc', 'Reference L*, a*, b*', 'Measured L*, a*, b*', 'ΔE00']}
      rows={colours.map(({ id, reference, measured, deltaE2000 }) => [
        id,
        lab(reference),
        lab(measured),
        numberText(deltaE2000, 1),
      ])}
    />
  );
}

function spoken(colours: readonly ColourPoint[]): string {
  const errors = colours.map(({ deltaE2000 }) => deltaE2000);
  const worst = colours.reduce<ColourPoint | null>(
    (worse, colour) => (worse && worse.deltaE2000 >= colour.deltaE2000 ? worse : colour),
    null,
  );
  const chroma = (pick: (colour: ColourPoint) => readonly number[]) =>
    mean(colours.map((colour) => Math.hypot(pick(colour)[1] ?? 0, pick(colour)[2] ?? 0)));
  const reference = chroma((colour) => colour.reference);
  const strength = reference
    ? `; colours ${Math.round((chroma((colour) => colour.measured) / reference) * 100)} % as strong as the target’s`
    : '';
  return `${colours.length} colours in the a*b* plane, mean difference ${numberText(mean(errors), 1)} ΔE00${
    worst ? `, largest ${numberText(worst.deltaE2000, 1)} at ${worst.id}` : ''
  }${strength}`;
}
