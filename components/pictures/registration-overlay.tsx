import type { Plots, RegistrationSummary } from '@/analysis/result';
import { numberText } from '@/lib/shared/numbers';
import { cn } from '../ui/cn';
import { DataTable, Picture } from './data-table';
import { linePath, placeName, round } from './draw';

/** The photograph on its grey ground, with what was found in it drawn over: the field's outline, rings, stations and discs. */
export function RegistrationOverlay({
  width,
  height,
  src,
  alt,
  plots,
  registration = null,
  marks = true,
  table = true,
  className,
}: {
  /** Of the analysed photograph; the plots' coordinates are in its pixels. */
  width: number;
  height: number;
  src: string;
  alt: string;
  plots: Pick<Plots, 'outline' | 'stations' | 'discs'>;
  registration?: RegistrationSummary | null;
  marks?: boolean;
  table?: boolean;
  className?: string;
}) {
  const unit = Math.max(width, height) / 1000;
  return (
    <Picture
      className={className}
      table={table && registration ? <RingTable registration={registration} /> : null}
    >
      <svg
        viewBox={`0 0 ${width} ${height}`}
        role="img"
        aria-label={spoken(alt, plots, registration)}
        className={cn('block h-auto w-full rounded-well bg-well')}
      >
        <image href={src || undefined} width={width} height={height} preserveAspectRatio="none" />
        {marks ? (
          <g fill="none" strokeLinejoin="round">
            <Marks plots={plots} registration={registration} unit={unit} stroke="#000000" px={3} />
            <Marks
              plots={plots}
              registration={registration}
              unit={unit}
              stroke="#ffffff"
              px={1.25}
            />
          </g>
        ) : null}
      </svg>
    </Picture>
  );
}

/** Drawn twice, dark under light, so that it shows on any picture without a colour of its own. */
function Marks({
  plots: { outline, stations, discs },
  registration,
  unit,
  stroke,
  px,
}: {
  plots: Pick<Plots, 'outline' | 'stations' | 'discs'>;
  registration: RegistrationSummary | null;
  unit: number;
  stroke: string;
  px: number;
}) {
  const cornersPath = (corners: readonly { x: number; y: number }[]) =>
    `${linePath(corners.map(({ x, y }) => [x, y] as const))}Z`;
  return (
    <g stroke={stroke} strokeOpacity={stroke === '#000000' ? 0.55 : 0.95} strokeWidth={px}>
      {outline?.length ? <path d={cornersPath(outline)} vectorEffect="non-scaling-stroke" /> : null}
      {discs?.map(({ id, x, y, radius }) => (
        <circle
          key={id}
          cx={round(x)}
          cy={round(y)}
          r={round(radius)}
          strokeOpacity={0.5}
          vectorEffect="non-scaling-stroke"
        />
      ))}
      {stations?.map(({ id, corners }) => (
        <path key={id} d={cornersPath(corners)} vectorEffect="non-scaling-stroke" />
      ))}
      {Object.entries(registration?.rings ?? {}).map(([id, [x, y]]) => (
        <g key={id}>
          <circle
            cx={round(x)}
            cy={round(y)}
            r={round(unit * 14)}
            vectorEffect="non-scaling-stroke"
          />
          <path
            vectorEffect="non-scaling-stroke"
            d={`M${round(x - unit * 22)} ${round(y)}H${round(x + unit * 22)}M${round(x)} ${round(y - unit * 22)}V${round(y + unit * 22)}`}
          />
        </g>
      ))}
    </g>
  );
}

function RingTable({ registration }: { registration: RegistrationSummary }) {
  const rings = Object.entries(registration.rings).map(([id, [x, y]]) => [
    id,
    `${numberText(x, 1)}, ${numberText(y, 1)}`,
  ]);
  return (
    <DataTable
      caption="How the target was found"
      head={['What', 'Pixels from the upper left']}
      rows={[
        ...rings,
        ['Distance of the found corners from the model', numberText(registration.residual, 3)],
        ['Rotation, degrees clockwise', numberText(registration.rotation, 2)],
        ['Share of the frame, %', numberText(registration.coverage * 100, 0)],
      ]}
    />
  );
}

function spoken(
  alt: string,
  { stations, discs }: Pick<Plots, 'stations' | 'discs'>,
  registration: RegistrationSummary | null,
): string {
  if (!registration) return `${alt}. The target is not marked in it.`;
  const places = stations?.map(({ id }) => placeName(id).toLowerCase()).join(', ');
  return `${alt}. Found in it: the target ${registration.target}, ${stations?.length ?? 0} stations (${places}) and ${discs?.length ?? 0} discs`;
}
