import type { ReactNode } from 'react';
import { EmptyState } from '@/components/ui/states';

const steps = [
  'Print the target, lay it flat, and light it evenly from both sides. No flash.',
  'Camera on a tripod, square on, the target filling the frame’s height as nearly as it can.',
  'Lowest sensitivity, self-timer of two seconds, automatic exposure with no compensation.',
  'Three shots without touching anything: their spread is the doubt of the result.',
];

/** An empty run teaches how its first pictures are made. */
export function HowToShoot({ action }: { action: ReactNode }) {
  return (
    <EmptyState title="Drop the card’s pictures here" action={action} className="py-8">
      <ol className="list-decimal pl-5 text-left">
        {steps.map((step) => (
          <li key={step} className="py-0.5">
            {step}
          </li>
        ))}
      </ol>
      <p className="mt-3">
        <a
          className="underline decoration-line underline-offset-3 hover:decoration-current"
          href="/api/targets/pdf?shape=4x3&paper=A3"
        >
          Target for 4 : 3 frames
        </a>
        {' · '}
        <a
          className="underline decoration-line underline-offset-3 hover:decoration-current"
          href="/api/targets/pdf?shape=3x2&paper=A3"
        >
          for 3 : 2 frames
        </a>{' '}
        (A3, PDF)
      </p>
    </EmptyState>
  );
}
