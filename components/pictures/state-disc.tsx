import type { RuleOutcome } from '@/lib/shared/report';

export type Shown = RuleOutcome['standing'];

export const standingWords: Readonly<Record<Shown, string>> = {
  within: 'clearly within',
  doubt: 'in doubt',
  outside: 'clearly outside',
  untested: 'not tested',
};

/** The shape of a standing inside a drawing: full disc, half disc, open ring; a dotted ring where nothing was tested. */
export function StandingShape({
  standing,
  x = 0,
  y = 0,
  r,
}: {
  standing: Shown;
  x?: number;
  y?: number;
  r: number;
}) {
  if (standing === 'within') return <circle cx={x} cy={y} r={r} fill="var(--ink)" />;
  if (standing === 'doubt') {
    return (
      <>
        <circle
          cx={x}
          cy={y}
          r={r - 0.75}
          fill="var(--sheet)"
          stroke="var(--ink)"
          strokeWidth={1.5}
        />
        <path d={`M${x} ${y - r}A${r} ${r} 0 0 1 ${x} ${y + r}Z`} fill="var(--ink)" />
      </>
    );
  }
  if (standing === 'outside') {
    return (
      <circle
        cx={x}
        cy={y}
        r={r - 1.25}
        fill="var(--sheet)"
        stroke="var(--light)"
        strokeWidth={2.5}
      />
    );
  }
  return (
    <circle
      cx={x}
      cy={y}
      r={r - 0.75}
      fill="none"
      stroke="var(--edge)"
      strokeWidth={1.5}
      strokeDasharray="2 2.4"
    />
  );
}

/** A rule's state beside its words. The words say it too, so it is silent unless `label` is wanted. */
export function StateDisc({
  standing,
  size = 16,
  label = false,
  className,
}: {
  standing: Shown;
  size?: number;
  label?: boolean;
  className?: string;
}) {
  return (
    <svg
      viewBox="-9 -9 18 18"
      width={size}
      height={size}
      className={className}
      role="img"
      aria-label={label ? standingWords[standing] : undefined}
      aria-hidden={label ? undefined : true}
    >
      <StandingShape standing={standing} r={7} />
    </svg>
  );
}
