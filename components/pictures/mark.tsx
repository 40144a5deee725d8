import { around } from './draw';

/** The target's two circles of discs, one disc alight. */
export function Mark({ size = 28, className }: { size?: number; className?: string }) {
  return (
    <svg viewBox="0 0 100 100" width={size} height={size} aria-hidden="true" className={className}>
      {around(12, 50, 40).map(({ x, y, index }) => (
        <circle
          key={index}
          cx={x}
          cy={y}
          r={7.4}
          fill={index === 1 ? 'var(--light)' : 'currentColor'}
        />
      ))}
      {around(6, 50, 18).map(({ x, y, index }) => (
        <circle key={index} cx={x} cy={y} r={5} fill="currentColor" opacity={0.45} />
      ))}
    </svg>
  );
}

/** The mark with the name beside it. */
export function Wordmark({ size = 28 }: { size?: number }) {
  return (
    <span className="inline-flex items-center gap-2.5">
      <Mark size={size} />
      <b className="font-stretch-[112%]">Mendlight</b>
    </span>
  );
}
