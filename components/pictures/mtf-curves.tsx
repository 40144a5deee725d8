import { numberText } from '@/lib/shared/numbers';
import { DataTable, Picture } from './data-table';
import { linePath, valueAt } from './draw';
import { placeLabels } from './labels';

export interface Curve {
  label: string;
  weak: boolean;
  /** Cycles per pixel. */
  frequency: readonly number[];
  /** 1 at frequency 0. */
  response: readonly number[];
}

const width = 360;
const height = 210;
const area = { left: 34, right: 350, top: 12, bottom: 178 };
const highest = 0.5;
/** A sharpened edge goes above 1; the scale shows up to this. */
const ceilingOf = (curves: readonly Curve[]) =>
  Math.max(1, ...curves.flatMap((curve) => [...curve.response])) > 1.02 ? 1.25 : 1;
const xOf = (frequency: number) =>
  area.left + ((area.right - area.left) * Math.min(frequency, highest)) / highest;

/** Spatial frequency response at named places, each curve named where it runs; the 50 % line is where mtf50 is read. */
export function MtfCurves({
  curves,
  table = true,
  className,
}: {
  curves: readonly Curve[];
  table?: boolean;
  className?: string;
}) {
  const ceiling = ceilingOf(curves);
  const yOf = (response: number) =>
    area.bottom - ((area.bottom - area.top) * Math.min(Math.max(response, 0), ceiling)) / ceiling;
  const lines = curves.map((curve) => ({ label: curve.label, points: pointsOf(curve, yOf) }));
  const labels = placeLabels(lines, area, 12);
  return (
    <Picture className={className} table={table ? <CurveTable curves={curves} /> : null}>
      <svg
        viewBox={`0 0 ${width} ${height}`}
        role="img"
        aria-label={spoken(curves)}
        className="block h-auto w-full max-w-[480px]"
      >
        <Axes yOf={yOf} />
        {curves.map((curve, index) => (
          <path
            key={curve.label}
            d={linePath(lines[index]?.points ?? [])}
            fill="none"
            stroke={strokeOf(curve, index)}
            strokeWidth={2.2}
            strokeDasharray={index > 1 && !curve.weak ? '4 4' : undefined}
          />
        ))}
        {curves.map((curve, index) => (
          <text
            key={curve.label}
            x={labels[index]?.x}
            y={labels[index]?.y}
            textAnchor={labels[index]?.anchor}
            fontSize={12}
            fontWeight={620}
            fill={curve.weak ? 'var(--light-ink)' : index > 1 ? 'var(--ink-3)' : 'var(--ink)'}
          >
            {curve.label}
          </text>
        ))}
      </svg>
    </Picture>
  );
}

const strokeOf = (curve: Curve, index: number) =>
  curve.weak ? 'var(--light)' : index > 1 ? 'var(--edge)' : 'var(--ink)';

function pointsOf(curve: Curve, yOf: (response: number) => number) {
  return curve.frequency
    .map((frequency, index) => [frequency, curve.response[index] ?? 0] as const)
    .filter(([frequency]) => frequency <= highest)
    .map(([frequency, response]) => [xOf(frequency), yOf(response)] as const);
}

function Axes({ yOf }: { yOf: (response: number) => number }) {
  return (
    <g fontSize={11} fill="var(--ink-3)">
      {[0, 0.5, 1].map((response) => (
        <g key={response}>
          <line
            x1={area.left}
            x2={area.right}
            y1={yOf(response)}
            y2={yOf(response)}
            stroke={response === 0.5 ? 'var(--edge)' : 'var(--line)'}
            strokeWidth={1}
            strokeDasharray={response === 0.5 ? '2 3' : undefined}
          />
          <text x={area.left - 6} y={yOf(response) + 4} textAnchor="end">
            {response * 100}
          </text>
        </g>
      ))}
      <text x={area.left} y={area.bottom + 17} textAnchor="middle">
        0
      </text>
      <text x={xOf(0.25)} y={area.bottom + 17} textAnchor="middle">
        0.25
      </text>
      <text x={area.right} y={area.bottom + 17} textAnchor="end">
        cycles per pixel 0.5
      </text>
    </g>
  );
}

/** Where the curve falls to one half, by straight lines between its samples. */
function halfAt(curve: Curve): number | null {
  for (let i = 1; i < curve.response.length; i += 1) {
    const [y0, y1] = [curve.response[i - 1] ?? 1, curve.response[i] ?? 0];
    const [x0, x1] = [curve.frequency[i - 1] ?? 0, curve.frequency[i] ?? 0];
    if (y0 >= 0.5 && y1 < 0.5) return x0 + ((x1 - x0) * (y0 - 0.5)) / (y0 - y1);
  }
  return null;
}

function CurveTable({ curves }: { curves: readonly Curve[] }) {
  const rows = [0.05, 0.1, 0.15, 0.2, 0.25, 0.3, 0.35, 0.4, 0.45, 0.5].map((frequency) => [
    numberText(frequency, 2),
    ...curves.map((curve) => {
      const response = valueAt(curve.frequency, curve.response, frequency);
      return response === null ? '–' : numberText(response * 100, 0);
    }),
  ]);
  return (
    <DataTable
      caption="Response in percent by spatial frequency in cycles per pixel"
      head={['cy/px', ...curves.map((curve) => `${curve.label}, %`)]}
      rows={rows}
    />
  );
}

function spoken(curves: readonly Curve[]): string {
  const halves = curves.map((curve) => {
    const half = halfAt(curve);
    return half === null
      ? `${curve.label} stays above half`
      : `${curve.label} falls to half at ${numberText(half, 3)} cycles per pixel`;
  });
  return `Edge response: ${halves.join('; ')}`;
}
