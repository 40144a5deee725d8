import type { Target } from '@/analysis/target/target';

/** The printed target drawn from its own data, with its border of bare paper. The code, ruler and slip are only outlined. */
export function TargetDrawing({ target, className }: { target: Target; className?: string }) {
  const { width, height, station, ring } = target;
  const border = 22;
  const places = [
    { ...box(target.ruler), words: 'ruler' },
    { ...box({ ...target.qr, width: target.qr.side, height: target.qr.side }), words: 'code' },
    {
      ...box({ ...target.unitSlip, width: target.unitSlip.side, height: target.unitSlip.side }),
      words: 'slip',
    },
  ];
  return (
    <svg
      viewBox={`${-width / 2 - border} ${-height / 2 - border} ${width + 2 * border} ${height + 2 * border}`}
      role="img"
      aria-label={`The ${target.name.replace('x', ' to ')} target: thirteen stations, five rings, two circles of discs`}
      className={className}
    >
      <rect
        x={-width / 2 - border}
        y={-height / 2 - border}
        width={width + 2 * border}
        height={height + 2 * border}
        fill="#fff"
      />
      <rect
        x={-width / 2}
        y={-height / 2}
        width={width}
        height={height}
        fill={grey(target.background.reflectance)}
      />
      {target.stations.map(({ id, x, y }) => (
        <g key={id} transform={`translate(${x} ${y})`}>
          <circle r={station.padRadius} fill={grey(station.pad.reflectance)} />
          <rect
            x={-station.squareSide / 2}
            y={-station.squareSide / 2}
            width={station.squareSide}
            height={station.squareSide}
            transform={`rotate(${station.rotationDegrees})`}
            fill={grey(station.square.reflectance)}
          />
        </g>
      ))}
      {target.rings.map(({ id, x, y }) => (
        <g key={id} transform={`translate(${x} ${y})`}>
          <circle r={ring.discRadius} fill={grey(ring.light.reflectance)} />
          <circle r={Math.max(...ring.outer)} fill={grey(ring.dark.reflectance)} />
          <circle r={Math.min(...ring.outer)} fill={grey(ring.light.reflectance)} />
          <circle r={ring.dotRadius} fill={grey(ring.dark.reflectance)} />
        </g>
      ))}
      {target.discs.map(({ id, x, y, radius, srgb8 }) => (
        <circle key={id} cx={x} cy={y} r={radius} fill={`rgb(${srgb8.join(' ')})`} />
      ))}
      {places.map(({ words, x, y, width: across, height: down }) => (
        <g key={words}>
          <rect x={x} y={y} width={across} height={down} fill="#eee" fillOpacity={0.9} rx={4} />
          <text
            x={x + across / 2}
            y={y + down / 2}
            textAnchor="middle"
            dominantBaseline="central"
            fontSize={24}
            fill="#333"
          >
            {words}
          </text>
        </g>
      ))}
    </svg>
  );
}

const box = ({ x, y, width, height }: { x: number; y: number; width: number; height: number }) => ({
  x: x - width / 2,
  y: y - height / 2,
  width,
  height,
});

/** A neutral reflectance as an sRGB grey (IEC 61966-2-1). */
function grey(reflectance: number): string {
  const code = 255 * (1.055 * reflectance ** (1 / 2.4) - 0.055);
  return `rgb(${[code, code, code].map((v) => v.toFixed(1)).join(' ')})`;
}
