import { cn } from './cn';

/** How far long work has come: `value` 0…1, or null while that can't be told. */
export function Progress({
  value,
  label,
  note,
  quiet = false,
  className,
}: {
  value: number | null;
  /** What is under way: "7 of 18 analysed". */
  label: string;
  /** At its right: "about 9 s". */
  note?: string;
  /** Only the bar; the label is spoken. */
  quiet?: boolean;
  className?: string;
}) {
  const percent = value === null ? undefined : Math.round(Math.min(1, Math.max(0, value)) * 100);
  return (
    <div className={cn('min-w-0', className)}>
      {quiet ? null : (
        <div className="label mb-1.5 flex justify-between gap-3">
          <span>{label}</span>
          {note ? <span>{note}</span> : null}
        </div>
      )}
      <div
        role="progressbar"
        aria-label={label}
        aria-valuemin={0}
        aria-valuemax={100}
        aria-valuenow={percent}
        className="h-1.5 overflow-hidden rounded-full bg-line"
      >
        <div
          className={cn(
            'h-full bg-ink transition-[width]',
            percent === undefined && 'w-1/3 motion-safe:animate-pulse',
          )}
          style={percent === undefined ? undefined : { width: `${percent}%` }}
        />
      </div>
    </div>
  );
}
