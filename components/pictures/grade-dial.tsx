import type { Letter } from '@/lib/shared/words';
import { around } from './draw';
import { type Shown, StandingShape, standingWords } from './state-disc';

/** The grade inside a circle of discs, one a rule, as the target's own discs stand in a circle. */
export function GradeDial({
  letter,
  rules,
  size = 220,
  className,
}: {
  /** null while nothing is measured. */
  letter: Letter | null;
  rules: readonly { label: string; standing: Shown }[];
  size?: number;
  className?: string;
}) {
  const places = around(Math.max(rules.length, 1), 110, 92);
  const r = Math.min(9.5, (92 * Math.PI) / Math.max(rules.length, 1) - 2);
  return (
    <svg
      viewBox="0 0 220 220"
      width={size}
      height={size}
      role="img"
      aria-label={spoken(letter, rules)}
      className={className}
    >
      {rules.map((rule, index) => (
        <g key={`${rule.label}-${places[index]?.x}-${places[index]?.y}`}>
          <title>{`${rule.label}: ${standingWords[rule.standing]}`}</title>
          <StandingShape standing={rule.standing} x={places[index]?.x} y={places[index]?.y} r={r} />
        </g>
      ))}
      <Inscription letter={letter} />
    </svg>
  );
}

function Inscription({ letter }: { letter: Letter | null }) {
  const text = letter ?? '–';
  const long = text.length > 1;
  return (
    <text
      x={110}
      y={long ? 122 : 148}
      textAnchor="middle"
      fontSize={long ? 38 : 108}
      fontWeight={680}
      fill="var(--ink)"
      className="font-stretch-[115%]"
    >
      {text}
    </text>
  );
}

function spoken(letter: Letter | null, rules: readonly { standing: Shown }[]): string {
  const counts = (['within', 'doubt', 'outside', 'untested'] as const)
    .map(
      (standing) => [rules.filter((rule) => rule.standing === standing).length, standing] as const,
    )
    .filter(([count]) => count > 0)
    .map(([count, standing]) => `${count} ${standingWords[standing]}`);
  const rulesSay = counts.length ? `: of ${rules.length} rules ${counts.join(', ')}` : '';
  return `${letter ? `Grade ${letter}` : 'No grade yet'}${rulesSay}`;
}
