import type { Plots } from '@/analysis/result';
import { DataTable, Picture } from '@/components/pictures/data-table';
import { linePath } from '@/components/pictures/draw';

const channels = [
  { name: 'red', colour: 'var(--red)', dash: undefined },
  { name: 'green', colour: 'var(--green)', dash: '7 3' },
  { name: 'blue', colour: 'var(--blue)', dash: '2 3' },
] as const;
const width = 400;
const height = 130;
const floor = 108;

/** Codes of each channel over the whole frame; each line also has its own dash, so that colour alone tells nothing. */
export function ChannelHistogram({ plots }: { plots: Pick<Plots, 'histogramByChannel'> }) {
  const histogram = plots.histogramByChannel;
  const highest = Math.max(...channels.flatMap(({ name }) => histogram[name]), Number.MIN_VALUE);
  const bins = histogram.green.length;
  const pointsOf = (shares: readonly number[]) =>
    shares.map(
      (share, i) => [((i + 0.5) * width) / bins, floor - (share / highest) * (floor - 10)] as const,
    );
  return (
    <Picture
      table={
        <DataTable
          caption="Share of pixels by code and channel"
          head={['Codes from', 'Red, %', 'Green, %', 'Blue, %']}
          rows={histogram.green.map((_, i) => [
            String(Math.round((i * 256) / bins)),
            ...channels.map(({ name }) => ((histogram[name][i] ?? 0) * 100).toFixed(2)),
          ])}
        />
      }
    >
      <svg
        viewBox={`0 0 ${width} ${height}`}
        role="img"
        aria-label="Histogram by channel: red solid, green dashed, blue dotted"
        className="block h-auto w-full"
      >
        <path d={`M0 ${floor}H${width}`} stroke="var(--line)" />
        {channels.map(({ name, colour, dash }) => (
          <path
            key={name}
            d={linePath(pointsOf(histogram[name]))}
            fill="none"
            stroke={colour}
            strokeWidth={2}
            strokeDasharray={dash}
            strokeLinejoin="round"
          />
        ))}
        <text x={0} y={height - 6} fontSize={11} fill="var(--ink-3)">
          black
        </text>
        <text x={width} y={height - 6} fontSize={11} textAnchor="end" fill="var(--ink-3)">
          white
        </text>
      </svg>
    </Picture>
  );
}
