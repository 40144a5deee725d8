'use client';

import { useRouter } from 'next/navigation';
import { Button, ButtonLink } from '@/components/ui/button';
import { useToast } from '@/components/ui/toast';
import { call, sentenceOf } from '@/lib/client/api';
import { useChange } from '@/lib/client/queries';
import { useShortcuts } from '@/lib/client/shortcuts';
import type { RunDetail } from '@/lib/shared/api';

/** The run's one primary action, once there is something to grade. */
export function SendToGrading({ run, waiting }: { run: RunDetail; waiting: boolean }) {
  const router = useRouter();
  const say = useToast();
  const { tag, state } = run.unit;
  const send = useChange(
    () => call(`/api/units/${tag}/state`, 'POST', { to: 'awaiting-grade' }),
    ['unit', 'units', 'grading', 'run'],
  );
  const offered = state === 'testing' && run.phase === 'after' && run.mayUpload;
  const ready = offered && !waiting && run.proposal !== null;
  const go = () => {
    if (!ready || send.isPending) return;
    send.mutate(undefined, {
      onSuccess: () => {
        say(`${tag} awaits its grade.`);
        router.push(`/units/${tag}`);
        router.refresh();
      },
      onError: (error) => say(sentenceOf(error), 'want'),
    });
  };
  useShortcuts(offered ? [{ key: 'g', label: 'Send to grading', run: go }] : []);
  if (state === 'awaiting-grade')
    return (
      <ButtonLink href={`/units/${tag}`} variant="quiet">
        Awaits its grade
      </ButtonLink>
    );
  if (!offered) return null;
  return (
    <Button hint="G" disabled={!ready} busy={send.isPending} onClick={go}>
      Send to grading
    </Button>
  );
}
