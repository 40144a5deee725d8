import type { Plots } from '@/analysis/result';
import { DataTable, Picture } from './data-table';
import { round, signedText } from './draw';

/** Darker than the centre by this much is drawn as the darkest grey. */
const darkest = -2;

/** Light over the frame against its centre, as greys; figures in EV where they matter. */
export function ShadingMap({
  shading,
  aspect = 4 / 3,
  table = true,
  className,
}: {
  shading: NonNullable<Plots['shading']>;
  /** Width over height of the frame. */
  aspect?: number;
  table?: boolean;
  className?: string;
}) {
  const { columns, rows, ev } = shading;
  const height = round(400 / aspect);
  const cell = { width: 400 / columns, height: height / rows };
  return (
    <Picture className={className} table={table ? <ShadingTable shading={shading} /> : null}>
      <svg
        viewBox={`0 0 400 ${height}`}
        role="img"
        aria-label={spoken(shading)}
        className="block h-auto w-full max-w-[480px] overflow-hidden rounded-well"
        shapeRendering="crispEdges"
      >
        {ev.map((value, index) => {
          const column = index % columns;
          const row = Math.floor(index / columns);
          return (
            <rect
              key={`${column} ${row}`}
              x={round(column * cell.width)}
              y={round(row * cell.height)}
              width={round(cell.width + 0.3)}
              height={round(cell.height + 0.3)}
              fill={greyOf(value)}
            />
          );
        })}
        {named(shading).map(({ name, value, x, y }) => (
          <text
            key={name}
            x={round(16 + x * 368)}
            y={round(y === 0 ? 26 : y === 1 ? height - 14 : height / 2 + 6)}
            textAnchor={x === 0 ? 'start' : x === 1 ? 'end' : 'middle'}
            fontSize={16}
            fontWeight={640}
            fill={value < -1.25 ? '#fff' : '#161616'}
          >
            {signedText(value, 2)}
          </text>
        ))}
      </svg>
    </Picture>
  );
}

/** Encoded so that one step in EV is one step to the eye: light at the centre is a light grey. */
function greyOf(ev: number): string {
  const share = Math.min(1.1, Math.max(0, 1 - ev / darkest));
  const code = Math.round(70 + share * 145);
  return `rgb(${code} ${code} ${code})`;
}

function named({ columns, rows, ev }: NonNullable<Plots['shading']>) {
  const at = (x: number, y: number) =>
    ev[Math.round(y * (rows - 1)) * columns + Math.round(x * (columns - 1))] ?? 0;
  return [
    { name: 'Upper left', x: 0, y: 0 },
    { name: 'Upper right', x: 1, y: 0 },
    { name: 'Middle', x: 0.5, y: 0.5 },
    { name: 'Lower left', x: 0, y: 1 },
    { name: 'Lower right', x: 1, y: 1 },
  ].map((place) => ({ ...place, value: at(place.x, place.y) }));
}

function ShadingTable({ shading }: { shading: NonNullable<Plots['shading']> }) {
  return (
    <DataTable
      caption="Light against the centre, in EV"
      head={['Place', 'EV']}
      rows={named(shading).map(({ name, value }) => [name, signedText(value, 2)])}
    />
  );
}

function spoken(shading: NonNullable<Plots['shading']>): string {
  const corners = named(shading)
    .filter(({ name }) => name !== 'Middle')
    .map(({ name, value }) => `${name.toLowerCase()} ${signedText(value, 2)} EV`);
  return `Light in the corners against the centre: ${corners.join(', ')}`;
}
