import type { ReportPoint } from '@/lib/shared/report';
import { StateDisc } from '../pictures/state-disc';
import { Section } from './parts';

/** Good and less good side by side, each in a line that says what it means for pictures. */
export function Points({ good, weak }: { good: ReportPoint[]; weak: ReportPoint[] }) {
  return (
    <div className="grid gap-4 sm:grid-cols-2 print:gap-8">
      <Section title="Good">
        <PointList points={good} none="Nothing stands out above its kind; see the measurements." />
      </Section>
      <Section title={weak.length ? 'Less good, and what to do' : 'Less good'}>
        <PointList points={weak} none="No weakness was found in what was tested." />
        {weak.length > 0 && weak.length < 3 ? (
          <p className="mt-4 text-ink-2">
            Everything else measured lies well within an A’s limits.
          </p>
        ) : null}
      </Section>
    </div>
  );
}

function PointList({ points, none }: { points: ReportPoint[]; none: string }) {
  if (points.length === 0) return <p className="text-ink-2">{none}</p>;
  return (
    <ul className="-mt-2">
      {points.map((point) => (
        <li
          key={point.title}
          className="grid grid-cols-[22px_1fr] gap-2.5 border-line-2 border-t py-3 first:border-0 last:pb-0 print:py-1.5"
        >
          <StateDisc standing={point.standing} size={18} label className="mt-0.5" />
          <p className="min-w-0">
            <b>{point.title}</b> <span className="text-ink-2">{point.text}</span>
          </p>
        </li>
      ))}
    </ul>
  );
}
