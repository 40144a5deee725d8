'use client';

import { useRouter } from 'next/navigation';
import { Button, ButtonLink } from '@/components/ui/button';
import { useToast } from '@/components/ui/toast';
import { nextStep } from '@/components/units/next-step';
import { call, sentenceOf } from '@/lib/client/api';
import { day } from '@/lib/client/format';
import { useChange } from '@/lib/client/queries';
import { useShortcuts } from '@/lib/client/shortcuts';
import type { ReportRow, UnitDetail } from '@/lib/shared/api';
import { letterWords } from './letter-words';

/** After signing: publish, then the report. Before it, for whoever may not sign: why not. */
export function PublishPanel({ unit }: { unit: UnitDetail }) {
  const router = useRouter();
  const say = useToast();
  const publish = useChange(
    () => call<ReportRow>(`/api/units/${unit.tag}/report`, 'POST', {}),
    ['unit', 'units', 'reports'],
  );
  const go = () => {
    if (publish.isPending) return;
    publish.mutate(undefined, {
      onSuccess: () => {
        say('The report is published.');
        router.refresh();
      },
    });
  };
  useShortcuts(unit.may.publish ? [{ key: 'p', label: 'Publish the report', run: go }] : []);
  const { gradeSigned: grade, report } = unit;
  return (
    <>
      {grade ? (
        <p>
          Signed {letterWords[grade.letter]} by {grade.by} on {day(grade.at)}.
          {grade.reason ? ` ${grade.reason}` : ''}
        </p>
      ) : (
        <p role="note" className="rounded-well bg-light-soft px-3.5 py-2.5 font-medium">
          {unit.signRefusal ?? nextStep(unit).words}
        </p>
      )}
      <div className="flex flex-wrap gap-2.5">
        {unit.may.publish ? (
          <Button size="bench" hint="P" busy={publish.isPending} onClick={go}>
            Publish the report
          </Button>
        ) : null}
        {report ? (
          <ButtonLink
            href={`/r/${report.slug}`}
            size="bench"
            variant={unit.may.publish ? 'quiet' : 'ink'}
          >
            Open the report
          </ButtonLink>
        ) : null}
        <ButtonLink href={`/units/${unit.tag}`} size="bench">
          The unit
        </ButtonLink>
      </div>
      {publish.isError ? (
        <p role="alert" className="font-medium text-light-ink">
          {sentenceOf(publish.error)}
        </p>
      ) : null}
    </>
  );
}
