import { numberText } from '@/lib/shared/numbers';
import { DataTable, Picture } from './data-table';

/** ISO 12232: 18 % grey belongs at 461/1000 of full scale, 118 of 255. */
const midGrey = 118 / 255;
const percent = (share: number) => `${Math.round(share * 1e4) / 100}%`;

/** Luminance codes over the whole frame, with the place where mid grey belongs. As wide as its place. */
export function Histogram({
  bins,
  height = 120,
  table = true,
  className,
}: {
  /** Shares that add to 1. */
  bins: readonly number[];
  height?: number;
  table?: boolean;
  className?: string;
}) {
  const floor = height - 20;
  return (
    <Picture className={className} table={table ? <BinTable bins={bins} /> : null}>
      <svg width="100%" height={height} role="img" aria-label={spoken(bins)} className="block">
        <svg
          aria-hidden="true"
          y={22}
          width="100%"
          height={floor - 22}
          viewBox={`0 0 ${bins.length} 1`}
          preserveAspectRatio="none"
        >
          <path d={barsPath(bins)} fill="var(--ink-2)" />
        </svg>
        <line
          x1={percent(midGrey)}
          x2={percent(midGrey)}
          y1={2}
          y2={floor}
          stroke="var(--light)"
          strokeWidth={1.75}
        />
        <svg aria-hidden="true" x={percent(midGrey)} overflow="visible">
          <text x={6} y={11} fontSize={11.5} fontWeight={620} fill="var(--light-ink)">
            mid grey belongs here
          </text>
        </svg>
        <line x1="0" x2="100%" y1={floor} y2={floor} stroke="var(--edge)" strokeWidth={1} />
        <g fontSize={11} fill="var(--ink-3)">
          <text x="0" y={height - 5}>
            black
          </text>
          <text x="100%" y={height - 5} textAnchor="end">
            white
          </text>
        </g>
      </svg>
    </Picture>
  );
}

function barsPath(bins: readonly number[]): string {
  const tallest = tallestOf(bins);
  return bins
    .map((share, bin) => {
      const tall = Math.round(Math.min(1, share / tallest) * 1e3) / 1e3;
      return tall > 0 ? `M${bin} 1v-${tall}h.86v${tall}Z` : '';
    })
    .join('');
}

/** A plain background makes one bin tower over all others: the scale leaves it to stand at the top rather than flatten the rest. */
function tallestOf(bins: readonly number[]): number {
  const sorted = [...bins].sort((a, b) => b - a);
  const [first = 0, second = 0] = sorted;
  return Math.max(Math.min(first, second * 1.6), Number.MIN_VALUE);
}

function BinTable({ bins }: { bins: readonly number[] }) {
  const groups = Array.from({ length: 16 }, (_, group) => {
    const from = Math.floor((group * bins.length) / 16);
    const to = Math.floor(((group + 1) * bins.length) / 16);
    const share = bins.slice(from, to).reduce((sum, bin) => sum + bin, 0);
    return [
      `${Math.round((from * 256) / bins.length)}–${Math.round((to * 256) / bins.length) - 1}`,
      numberText(share * 100, 1),
    ];
  });
  return (
    <DataTable
      caption="Share of the frame by code of luminance, 0 black to 255 white"
      head={['Codes', 'Share, %']}
      rows={groups}
    />
  );
}

function spoken(bins: readonly number[]): string {
  const total = bins.reduce((sum, bin) => sum + bin, 0) || 1;
  const below = bins.slice(0, Math.round(midGrey * bins.length)).reduce((sum, bin) => sum + bin, 0);
  return `Histogram of luminance: ${Math.round((below / total) * 100)} % of the frame is darker than code 118, where mid grey belongs`;
}
