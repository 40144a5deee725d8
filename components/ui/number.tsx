import { withDoubt } from '@/lib/shared/numbers';
import { cn } from './cn';

/** A measured value with its doubt (expanded uncertainty) and unit; never breaks over a line. */
export function Measured({
  value,
  expanded = 0,
  unit,
  decimals,
  className,
}: {
  value: number;
  expanded?: number;
  unit: string;
  /** Most decimals shown; the doubt may ask for fewer. */
  decimals: number;
  className?: string;
}) {
  return (
    <span className={cn('whitespace-nowrap tabular-nums', className)}>
      {withDoubt(value, expanded, unit, decimals)}
    </span>
  );
}
