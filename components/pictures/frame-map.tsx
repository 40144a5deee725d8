import { numberText } from '@/lib/shared/numbers';
import type { FramePicture } from '@/lib/shared/report';
import { DataTable, Picture } from './data-table';
import { arcPath, placeName, round } from './draw';
import { hairFactor, lengthOf } from './frame-data';

const drawnWidth = 1200;

/**
 * Results on the frame itself: each station a ring whose arc carries sharpness against `fullCircle`, and two hairs that
 * carry the displacement of red (ends in a disc) and blue (ends in a ring), exaggerated by a factor stated below.
 */
export function FrameMap({
  frame,
  table = true,
  className,
}: {
  frame: FramePicture;
  table?: boolean;
  className?: string;
}) {
  const scale = drawnWidth / frame.width;
  const height = round(frame.height * scale);
  const radius = ringRadius(frame) * scale;
  const factor = hairFactor(frame, (radius * 0.92) / scale);
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
        {frame.stations.map((station) => (
          <Station
            key={station.id}
            station={station}
            share={station.mtf50 === null ? null : station.mtf50 / frame.fullCircle}
            x={round(station.x * scale)}
            y={round(station.y * scale)}
            radius={radius}
            hair={factor * scale}
            height={height}
          />
        ))}
      </svg>
    </Picture>
  );
}

/** The factor of the hairs and what closes a ring, for a heading or a note. */
export function frameNote(
  frame: FramePicture,
  factor = hairFactor(frame, ringRadius(frame) * 0.92),
) {
  const closed =
    frame.fullCircleMeans === 'peers'
      ? 'Closed ring: as sharp as other cameras of this model'
      : 'Closed ring: as sharp as the middle';
  const hairs = frame.stations.some(({ red, blue }) => red || blue)
    ? ` · hairs: red (disc) and blue (ring) displacement, drawn ${factor} times too long`
    : '';
  return `${closed}${hairs}`;
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

function Station({
  station,
  share,
  x,
  y,
  radius,
  hair,
  height,
}: {
  station: FramePicture['stations'][number];
  share: number | null;
  x: number;
  y: number;
  radius: number;
  hair: number;
  height: number;
}) {
  const width = radius * 0.24;
  const above = y > height * 0.7;
  const colour = station.weak ? '#ff8a57' : '#ffffff';
  return (
    <g>
      <circle
        cx={x}
        cy={y}
        r={round(radius)}
        fill="none"
        stroke="#a8a8a8"
        strokeOpacity={0.55}
        strokeWidth={round(width)}
      />
      {share === null ? null : (
        <path
          d={arcPath(x, y, radius, share)}
          fill="none"
          stroke={colour}
          strokeWidth={round(width)}
        />
      )}
      <Hair x={x} y={y} to={station.red} by={hair} colour="#ff5a5f" radius={radius} end="disc" />
      <Hair x={x} y={y} to={station.blue} by={hair} colour="#8fb2ff" radius={radius} end="ring" />
      <text
        x={x}
        y={round(above ? y - radius - width * 1.5 : y + radius + width * 1.5)}
        dominantBaseline={above ? undefined : 'hanging'}
        fill={station.weak ? '#ffc9b0' : '#ffffff'}
        stroke="var(--well)"
        strokeWidth={6}
        paintOrder="stroke"
      >
        {share === null ? '–' : `${Math.round(share * 100)}\u2009%`}
      </text>
    </g>
  );
}

function Hair({
  x,
  y,
  to,
  by,
  colour,
  radius,
  end,
}: {
  x: number;
  y: number;
  to: { x: number; y: number } | null;
  by: number;
  colour: string;
  radius: number;
  end: 'disc' | 'ring';
}) {
  if (!to) return null;
  const endX = round(x + to.x * by);
  const endY = round(y + to.y * by);
  const width = round(radius * 0.13);
  return (
    <g stroke={colour} strokeWidth={width} strokeLinecap="round">
      <path d={`M${x} ${y}L${endX} ${endY}`} stroke="#2b2b2b" strokeWidth={round(width * 1.8)} />
      <path d={`M${x} ${y}L${endX} ${endY}`} />
      <circle
        cx={endX}
        cy={endY}
        r={round(radius * (end === 'disc' ? 0.15 : 0.13))}
        fill={end === 'disc' ? colour : '#2b2b2b'}
        strokeWidth={end === 'disc' ? 0 : round(width * 0.8)}
      />
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
        station.mtf50 === null ? '–' : numberText((station.mtf50 / frame.fullCircle) * 100, 0),
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
      `${placeName(station.id).toLowerCase()} ${Math.round(((station.mtf50 ?? 0) / frame.fullCircle) * 100)} %`,
  );
  const longest = Math.max(
    0,
    ...frame.stations.flatMap(({ red, blue }) => [lengthOf(red), lengthOf(blue)]),
  );
  const fringes = longest ? `; red and blue displaced by up to ${longest.toFixed(2)} pixels` : '';
  return `Sharpness over the frame: ${shares.join(', ')}${fringes}`;
}
