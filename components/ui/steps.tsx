import Link from 'next/link';
import { cn } from './cn';

export interface Step {
  label: string;
  href?: string;
  state: 'done' | 'on' | 'open';
}

/** Where we are in a row of steps, or which of several views is shown. */
export function Steps({ steps, label }: { steps: Step[]; label: string }) {
  return (
    <nav aria-label={label}>
      <ol className="flex flex-wrap items-center gap-1.5">
        {steps.map((step) => (
          <li key={step.label}>
            <StepItem step={step} />
          </li>
        ))}
      </ol>
    </nav>
  );
}

function StepItem({ step }: { step: Step }) {
  const className = cn(
    'inline-flex min-h-8 items-center rounded-full px-3 py-1 text-[13.5px] no-underline focus-visible:rounded-full',
    step.state === 'on' && 'bg-ink font-semibold text-sheet',
    step.state === 'done' && 'text-ink',
    step.state === 'open' && 'text-ink-2',
    step.href && step.state !== 'on' && 'hover:bg-line-2',
  );
  const words = (
    <>
      {step.label}
      {step.state === 'done' ? <span className="sr-only">, done</span> : null}
    </>
  );
  const current = step.state === 'on' ? 'step' : undefined;
  return step.href ? (
    <Link href={step.href} className={className} aria-current={current}>
      {words}
    </Link>
  ) : (
    <span className={className} aria-current={current}>
      {words}
    </span>
  );
}
