import { gap, numberText } from '@/lib/shared/numbers';
import type { FramePicture } from '@/lib/shared/report';
import { DataTable, Picture } from './data-table';
import { arcPath, placeName, round } from './draw';
import { hairFactor, lengthOf } from './frame-data';

const drawnWidth = 1200;

/**
 * Results on the frame itself: each station a ring whose arc carries sharpness against the middle's, and two hairs that
 * carry the displacement of red (ends in a disc) and blue (ends in a ring), exaggerated by a factor stated below.
 */
export function FrameMap({
  frame,
  table = true,
  longest = frame,
  className,
}: {
  frame: FramePicture;
  table?: boolean;
  /** The picture whose hairs set the factor, where two stand side by side; else its own. */
  longest?: FramePicture;
  className?: string;
}) {
  const scale = drawnWidth / frame.width;
  const height = round(frame.height * scale);
  const radius = ringRadius(frame) * scale;
  const factor = hairFactor(longest, (radius * 0.92) / scale);
  const placed = frame.stations.map((station) => ({
    ...station,
    x: round(station.x * scale),
    y: round(station.y * scale),
    share: station.mtf50 === null ? null : station.mtf50 / closedAt(frame),
  }));
  return (
    <Picture
      className={className}
      note={frameNote(frame, factor)}
      table={table ? <FrameTable frame={frame} /> : null}
    >
      <svg
        viewBox={`0 0 ${drawnWidth} ${height}`}
        role="img"
        aria-label={spoken(frame)}
        fontWeight={640}
        textAnchor="middle"
        className="block h-auto w-full text-[28px] max-sm:text-[42px]"
      >
        <rect width={drawnWidth} height={height} rx={22} fill="var(--well)" />
        <Rings stations={placed} radius={radius} />
        <Hairs stations={placed} radius={radius} by={factor * scale} />
        <Shares stations={placed} radius={radius} height={height} />
      </svg>
    </Picture>
  );
}

/** The factor of the hairs and what closes a ring, for a heading or a note. */
export function frameNote(
  frame: FramePicture,
  factor = hairFactor(frame, ringRadius(frame) * 0.92),
) {
  const alone = middleOf(frame) === null && frame.fullCircleMeans === 'peers';
  const closed = `Closed ring: as sharp as ${alone ? 'other cameras of this model' : `the middle${besidePeers(frame)}`}`;
  const hairs = frame.stations.some(({ red, blue }) => red || blue)
    ? ` · hairs: red (disc) and blue (ring) displacement, drawn ${factor} times too long`
    : '';
  return `${closed}${hairs}`;
}

const middleOf = (frame: FramePicture) =>
  frame.stations.find((station) => station.id === 'C')?.mtf50 ?? null;

/** What closes a ring, cy/px: the middle, so that the shares are those of the headline; without it what the picture says. */
const closedAt = (frame: FramePicture) => middleOf(frame) || frame.fullCircle;

/** How the middle compares with the peers', where they are known. */
function besidePeers(frame: FramePicture): string {
  const middle = middleOf(frame);
  if (middle === null || frame.fullCircleMeans !== 'peers') return '';
  const off = Math.round((middle / frame.fullCircle - 1) * 100);
  if (Math.abs(off) <= 2) return ', which is as sharp as in other cameras of this model';
  return `, which is ${Math.abs(off)}${gap}% ${off > 0 ? 'sharper' : 'softer'} than in other cameras of this model`;
}

/** Frame pixels. Fits between neighbours and, as nearly as it can, between station and edge. */
function ringRadius({ width, stations }: FramePicture): number {
  let nearest = Number.POSITIVE_INFINITY;
  for (const [index, a] of stations.entries()) {
    for (const b of stations.slice(index + 1)) {
      nearest = Math.min(nearest, Math.hypot(a.x - b.x, a.y - b.y));
    }
  }
  return Math.min(width * 0.045, nearest * 0.24);
}

type Station = FramePicture['stations'][number] & { share: number | null };

/** One path for all arcs of a kind: a station is some thirty bytes in the page. */
function Rings({ stations, radius }: { stations: readonly Station[]; radius: number }) {
  const arcs = (weak: boolean) =>
    stations
      .filter((station) => station.weak === weak)
      .map(({ x, y, share }) => (share === null ? '' : arcPath(x, y, radius, share)))
      .join('');
  return (
    <g fill="none" strokeWidth={round(radius * 0.24)}>
      <path
        d={stations.map(({ x, y }) => `${arcPath(x, y, radius, 1)}Z`).join('')}
        stroke="#a8a8a8"
        strokeOpacity={0.55}
      />
      <path d={arcs(false)} stroke="#ffffff" />
      <path d={arcs(true)} stroke="#ff8a57" />
    </g>
  );
}

/** Red and blue displacement with a dark casing, so that they show on the grey; a round cap on nothing draws a disc. */
function Hairs({
  stations,
  radius,
  by,
}: {
  stations: readonly Station[];
  radius: number;
  by: number;
}) {
  const ends = (channel: 'red' | 'blue') =>
    stations.flatMap(({ x, y, [channel]: to }) =>
      to ? [{ from: `M${x} ${y}`, at: `${round(x + to.x * by)} ${round(y + to.y * by)}` }] : [],
    );
  const lines = (channel: 'red' | 'blue') =>
    ends(channel)
      .map(({ from, at }) => `${from}L${at}`)
      .join('');
  const dots = (channel: 'red' | 'blue') =>
    ends(channel)
      .map(({ at }) => `M${at}h0`)
      .join('');
  const width = (share: number) => round(radius * share);
  return (
    <g fill="none" strokeLinecap="round" strokeWidth={width(0.15)}>
      <path
        d={lines('red') + lines('blue')}
        stroke="#2b2b2b"
        strokeOpacity={0.55}
        strokeWidth={width(0.22)}
      />
      <path d={lines('red')} stroke="#ff5a5f" />
      <path d={lines('blue')} stroke="#8fb2ff" />
      <path d={dots('red')} stroke="#ff5a5f" strokeWidth={width(0.32)} />
      <path d={dots('blue')} stroke="#8fb2ff" strokeWidth={width(0.36)} />
      <path d={dots('blue')} stroke="#2b2b2b" strokeWidth={width(0.16)} />
    </g>
  );
}

/** The share of a full circle in figures, under its ring or, in the lower part of the frame, above it. */
function Shares({
  stations,
  radius,
  height,
}: {
  stations: readonly Station[];
  radius: number;
  height: number;
}) {
  const away = radius * 1.36;
  return (
    <g fill="#ffffff" stroke="var(--well)" strokeWidth={6} paintOrder="stroke">
      {stations.map(({ id, x, y, share, weak }) => {
        const above = y > height * 0.62;
        return (
          <text
            key={id}
            x={x}
            y={round(above ? y - away : y + away)}
            dominantBaseline={above ? undefined : 'hanging'}
            fill={weak ? '#ffc9b0' : undefined}
          >
            {share === null ? '–' : `${Math.round(share * 100)}${gap}%`}
          </text>
        );
      })}
    </g>
  );
}

function FrameTable({ frame }: { frame: FramePicture }) {
  const px = (point: { x: number; y: number } | null) =>
    point ? `${numberText(point.x, 2)}, ${numberText(point.y, 2)}` : '–';
  return (
    <DataTable
      caption="Sharpness and colour displacement by place in the picture; displacement is right, down"
      head={['Place', 'Sharpness, cy/px', 'Share, %', 'Red, px', 'Blue, px']}
      rows={frame.stations.map((station) => [
        placeName(station.id),
        station.mtf50 === null ? '–' : numberText(station.mtf50, 3),
        station.mtf50 === null ? '–' : numberText((station.mtf50 / closedAt(frame)) * 100, 0),
        px(station.red),
        px(station.blue),
      ])}
    />
  );
}

function spoken(frame: FramePicture): string {
  const measured = frame.stations.filter((station) => station.mtf50 !== null);
  const shares = measured.map(
    (station) =>
      `${placeName(station.id).toLowerCase()} ${Math.round(((station.mtf50 ?? 0) / closedAt(frame)) * 100)} %`,
  );
  const longest = Math.max(
    0,
    ...frame.stations.flatMap(({ red, blue }) => [lengthOf(red), lengthOf(blue)]),
  );
  const fringes = longest ? `; red and blue displaced by up to ${longest.toFixed(2)} pixels` : '';
  return `Sharpness over the frame: ${shares.join(', ')}${fringes}`;
}
