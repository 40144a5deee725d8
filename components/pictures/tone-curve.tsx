import { numberText } from '@/lib/shared/numbers';
import { DataTable, Picture } from './data-table';
import { linePath, round, signedText } from './draw';

export interface TonePoint {
  /** As printed, 0…1. */
  reflectance: number;
  /** Mean code, 0…1 of full scale. */
  code: number;
  /** false: clipped or otherwise left out of the fit. */
  used: boolean;
}

const width = 300;
const height = 230;
const area = { left: 36, right: 288, top: 12, bottom: 194 };
const stops = { low: -3, high: 3 };
const midGrey = { reflectance: 0.18, code: 118 };

const xOf = (reflectance: number) => {
  const ev = Math.log2(Math.max(reflectance, 1e-4) / midGrey.reflectance);
  const share =
    (Math.min(stops.high, Math.max(stops.low, ev)) - stops.low) / (stops.high - stops.low);
  return area.left + (area.right - area.left) * share;
};
const yOf = (code: number) =>
  area.bottom - (area.bottom - area.top) * Math.min(1, Math.max(0, code));

/** What the camera made of each printed grey: code against reflectance in stops about mid grey. */
export function ToneCurve({
  tone,
  table = true,
  className,
}: {
  tone: readonly TonePoint[];
  table?: boolean;
  className?: string;
}) {
  const sorted = [...tone].sort((a, b) => a.reflectance - b.reflectance);
  const points = sorted.map((point) => [xOf(point.reflectance), yOf(point.code)] as const);
  return (
    <Picture className={className} table={table ? <ToneTable tone={sorted} /> : null}>
      <svg
        viewBox={`0 0 ${width} ${height}`}
        role="img"
        aria-label={spoken(sorted)}
        className="block h-auto w-full max-w-[420px]"
      >
        <Axes />
        <path d={linePath(points)} fill="none" stroke="var(--ink)" strokeWidth={2.2} />
        {sorted.map(({ reflectance, code, used }) => (
          <circle
            key={`${reflectance} ${code}`}
            cx={round(xOf(reflectance))}
            cy={round(yOf(code))}
            r={4.5}
            fill={used ? 'var(--ink)' : 'var(--sheet)'}
            stroke="var(--ink)"
            strokeWidth={1.5}
          />
        ))}
      </svg>
    </Picture>
  );
}

function Axes() {
  const x = xOf(midGrey.reflectance);
  const y = yOf(midGrey.code / 255);
  return (
    <g fontSize={11} fill="var(--ink-3)">
      {[0, 255].map((code) => (
        <g key={code}>
          <line
            x1={area.left}
            x2={area.right}
            y1={yOf(code / 255)}
            y2={yOf(code / 255)}
            stroke="var(--line)"
          />
          <text x={area.left - 6} y={yOf(code / 255) + 4} textAnchor="end">
            {code}
          </text>
        </g>
      ))}
      <path
        d={`M${area.left} ${round(y)}H${round(x)}V${area.bottom}`}
        fill="none"
        stroke="var(--light)"
        strokeWidth={1.4}
        strokeDasharray="2 3"
      />
      <circle
        cx={round(x)}
        cy={round(y)}
        r={7}
        fill="none"
        stroke="var(--light)"
        strokeWidth={1.75}
      />
      <text
        x={area.left - 6}
        y={round(y) + 4}
        textAnchor="end"
        fill="var(--light-ink)"
        fontWeight={620}
      >
        118
      </text>
      <text x={round(x) + 7} y={area.bottom - 8} fill="var(--light-ink)" fontWeight={620}>
        mid grey belongs here
      </text>
      {[-3, -2, -1, 0, 1, 2].map((ev) => (
        <text
          key={ev}
          x={xOf(midGrey.reflectance * 2 ** ev)}
          y={area.bottom + 17}
          textAnchor="middle"
        >
          {signedText(ev, 0)}
        </text>
      ))}
      <text x={area.right} y={area.bottom + 31} textAnchor="end">
        stops from mid grey, as printed
      </text>
    </g>
  );
}

function ToneTable({ tone }: { tone: readonly TonePoint[] }) {
  return (
    <DataTable
      caption="Each grey disc: reflectance as printed and the mean code that the camera gave it"
      head={['Reflectance, %', 'Code', 'In the fit']}
      rows={tone.map(({ reflectance, code, used }) => [
        numberText(reflectance * 100, 1),
        numberText(code * 255, 0),
        used ? 'yes' : 'no',
      ])}
    />
  );
}

function spoken(tone: readonly TonePoint[]): string {
  const nearest = tone.reduce<TonePoint | null>(
    (best, point) =>
      best && Math.abs(best.reflectance - 0.18) <= Math.abs(point.reflectance - 0.18)
        ? best
        : point,
    null,
  );
  const grey = nearest
    ? `: the ${numberText(nearest.reflectance * 100, 0)} % grey came out at code ${numberText(nearest.code * 255, 0)}; 18 % belongs at 118`
    : '';
  return `Tone response of ${tone.length} greys${grey}`;
}
