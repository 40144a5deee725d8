import { decimalsOf, numberText, withDoubt } from '@/lib/shared/numbers';
import type { RuleOutcome } from '@/lib/shared/report';
import { type Shown, StandingShape, standingWords } from './state-disc';

export interface ScaleData {
  label: string;
  unit: string;
  value: number | null;
  expanded: number | null;
  limits: RuleOutcome['limits'];
  scale: { min: number; max: number };
  peers: readonly number[];
  standing: Shown;
}

const margin = 2.5;

/**
 * A quantity on its scale: the grades' limits as ticks, the peers as a rug, the value as its disc, the doubt as a bar.
 * As wide as its place; places are in percent, so that words and discs keep their size.
 */
export function ScaleLine({ data, className }: { data: ScaleData; className?: string }) {
  const { value, expanded, limits, peers, standing } = data;
  const at = placing(data.scale);
  const colour = standing === 'outside' ? 'var(--light)' : 'var(--ink)';
  return (
    <svg
      width="100%"
      height={40}
      role="img"
      aria-label={spoken(data)}
      className={`block overflow-visible ${className ?? ''}`}
    >
      <line x1="0" x2="100%" y1={17} y2={17} stroke="var(--line)" strokeWidth={1.5} />
      <g stroke="var(--edge)" strokeWidth={1.5}>
        {ticks(limits).map(({ letters, limit }) => (
          <line key={`${letters}${limit}`} x1={at(limit)} x2={at(limit)} y1={10} y2={24} />
        ))}
      </g>
      <g textAnchor="middle" fontSize={11} fill="var(--ink-3)">
        {ticks(limits).map(({ letters, limit }) => (
          <text key={`${letters}${limit}`} x={at(limit)} y={36}>
            {letters}
          </text>
        ))}
      </g>
      <g stroke="var(--edge)" strokeOpacity={0.7}>
        {[...new Set(peers)].map((peer) => (
          <line key={peer} x1={at(peer)} x2={at(peer)} y1={13} y2={21} />
        ))}
      </g>
      {value === null ? null : (
        <>
          {expanded ? (
            <line
              x1={at(value - expanded)}
              x2={at(value + expanded)}
              y1={17}
              y2={17}
              stroke={colour}
              strokeWidth={5}
              strokeLinecap="round"
              opacity={0.38}
            />
          ) : null}
          <svg aria-hidden="true" x={at(value)} y={17} overflow="visible">
            <StandingShape standing={standing} r={6.5} />
          </svg>
        </>
      )}
    </svg>
  );
}

/** Values beyond the scale stand at its end. */
function placing({ min, max }: { min: number; max: number }) {
  const span = max - min || 1;
  return (value: number) => {
    const share = Math.min(1, Math.max(0, (value - min) / span));
    return `${Math.round((margin + share * (100 - 2 * margin)) * 100) / 100}%`;
  };
}

/** Limits that fall together share a tick. */
function ticks(limits: RuleOutcome['limits']): { letters: string; limit: number }[] {
  const byLimit = new Map<number, string>();
  for (const { letter, low, high } of limits) {
    for (const limit of [low, high]) {
      if (limit !== null)
        byLimit.set(limit, [byLimit.get(limit), letter].filter(Boolean).join(', '));
    }
  }
  return [...byLimit].map(([limit, letters]) => ({ limit, letters }));
}

function spoken({ label, unit, value, expanded, limits, peers, standing }: ScaleData): string {
  const reading = value === null ? 'not tested' : withDoubt(value, expanded ?? 0, unit);
  const within = limits.map(({ letter, low, high }) => {
    const ends = [
      low === null ? null : `from ${numberText(low, tidy(low))}`,
      high === null ? null : `up to ${numberText(high, tidy(high))}`,
    ];
    return `${letter} ${ends.filter(Boolean).join(' ')}`;
  });
  const range = peers.length
    ? `; ${peers.length} other cameras of this model between ${numberText(Math.min(...peers), decimalsOf(expanded ?? 0, 2))} and ${numberText(Math.max(...peers), decimalsOf(expanded ?? 0, 2))}`
    : '';
  return `${label}: ${reading}, ${standingWords[standing]}. Limits: ${within.join('; ')}${range}`;
}

const tidy = (value: number) => Math.min(3, (String(value).split('.')[1] ?? '').length);
