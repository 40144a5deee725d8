'use client';

import { useRouter } from 'next/navigation';
import { Button, ButtonLink } from '@/components/ui/button';
import { Panel } from '@/components/ui/panel';
import { useToast } from '@/components/ui/toast';
import { call, sentenceOf } from '@/lib/client/api';
import { useChange } from '@/lib/client/queries';
import { useShortcuts } from '@/lib/client/shortcuts';
import type { UnitDetail } from '@/lib/shared/api';
import { type UnitState, unitStateWords } from '@/lib/shared/words';
import { MoveDialog } from './move-dialog';
import { nextStep } from './next-step';
import { StateChip } from './state-chip';

/** Where the unit stands and the one thing to do next. */
export function NextStepPanel({ unit, onNewRun }: { unit: UnitDetail; onNewRun: () => void }) {
  const router = useRouter();
  const say = useToast();
  const step = nextStep(unit);
  const move = useChange(
    ({ to, note }: { to: UnitState; note?: string }) =>
      call<UnitDetail>(`/api/units/${unit.tag}/state`, 'POST', { to, note }),
    ['unit', 'units', 'grading'],
  );
  const publish = useChange(
    () => call(`/api/units/${unit.tag}/report`, 'POST', {}),
    ['unit', 'units', 'reports'],
  );
  const news = (words: string) => {
    say(words);
    router.refresh();
  };
  const go = (to: UnitState, note?: string) =>
    move.mutate({ to, note }, { onSuccess: () => news(`${unit.tag}: ${unitStateWords[to]}.`) });
  const act = () => {
    if (move.isPending || publish.isPending) return;
    if (step.do === 'move') go(step.to);
    if (step.do === 'open') router.push(step.href);
    if (step.do === 'run') onNewRun();
    if (step.do === 'publish')
      publish.mutate(undefined, { onSuccess: () => news('The report is published.') });
  };
  useShortcuts(step.do === 'wait' ? [] : [{ key: step.key, label: step.label, run: act }]);
  const error = move.error ?? publish.error;
  return (
    <Panel aria-label="Next step" className="grid gap-3">
      <div className="flex flex-wrap items-center justify-between gap-3">
        <StateChip state={unit.state} />
        <MoveDialog unit={unit} busy={move.isPending} onMove={go} />
      </div>
      <p className="text-[17px] text-pretty leading-snug">{step.words}</p>
      <div className="flex flex-wrap gap-2.5">
        {step.do === 'wait' ? null : step.do === 'open' ? (
          <ButtonLink href={step.href} variant="ink" size="bench" hint={step.key.toUpperCase()}>
            {step.label}
          </ButtonLink>
        ) : (
          <Button
            size="bench"
            hint={step.key.toUpperCase()}
            busy={move.isPending || publish.isPending}
            onClick={act}
          >
            {step.label}
          </Button>
        )}
        {unit.report ? (
          <ButtonLink href={`/r/${unit.report.slug}`} size="bench">
            Open the report
          </ButtonLink>
        ) : null}
      </div>
      {error ? (
        <p role="alert" className="font-medium text-light-ink">
          {sentenceOf(error)}
        </p>
      ) : null}
    </Panel>
  );
}
