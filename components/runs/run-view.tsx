'use client';

import { useQueryClient } from '@tanstack/react-query';
import Link from 'next/link';
import { useRouter } from 'next/navigation';
import { ButtonLink } from '@/components/ui/button';
import { Tag } from '@/components/ui/chip';
import { PageHead, Panel } from '@/components/ui/panel';
import { useRun, useShot } from '@/lib/client/queries';
import { useShortcuts } from '@/lib/client/shortcuts';
import { useRunEvents, withShot } from '@/lib/client/use-run-events';
import { useUploads } from '@/lib/client/use-uploads';
import type { RunDetail, ShotDetail, ShotRow } from '@/lib/shared/api';
import { DropZone, PickButton } from './drop-zone';
import { HowToShoot } from './how-to-shoot';
import { newestTarget } from './newest-target';
import { RunFindings } from './run-findings';
import { RunToolbar } from './run-toolbar';
import { SendToGrading } from './send-to-grading';
import { ShotStrip } from './shot-strip';
import { UploadList } from './upload-list';

/** A test run: pictures go in at the top, findings grow below while they are measured. */
export function RunView({
  first,
  firstShot,
  siblings,
  comparable,
}: {
  first: RunDetail;
  firstShot: ShotDetail | null;
  siblings: { id: string; title: string }[];
  /** There is a measured run from before the repair and one from after it. */
  comparable: boolean;
}) {
  const client = useQueryClient();
  const router = useRouter();
  const poll = useRunEvents(first.id);
  const run = useRun(first, poll);
  const added = (shot: ShotRow) =>
    client.setQueryData<RunDetail>(['run', run.id], (known) => known && withShot(known, shot));
  const { uploads, busy, queue } = useUploads(run.id, added);
  const shown = newestTarget(run.shotList);
  const shot = useShot(shown?.id ?? null, firstShot ?? undefined).data ?? null;
  const empty = run.shots === 0 && uploads.length === 0;
  const pick = (files: File[]) => queue.add(files);
  const compareAt = `/units/${run.unit.tag}/compare`;
  useShortcuts(
    comparable
      ? [{ key: 'c', label: 'Compare before and after', run: () => router.push(compareAt) }]
      : [],
  );
  return (
    <>
      <PageHead
        label={
          <>
            <Link
              className="underline decoration-line underline-offset-3 hover:decoration-current"
              href={`/units/${run.unit.tag}`}
            >
              <Tag>{run.unit.tag}</Tag> {run.unit.maker} {run.unit.model}
            </Link>{' '}
            · {run.phase === 'before' ? 'before' : 'after'} the repair
          </>
        }
        title={run.title}
        actions={
          <>
            {comparable ? (
              <ButtonLink href={compareAt} hint="C">
                {run.phase === 'after' ? 'Compare with before' : 'Compare with after'}
              </ButtonLink>
            ) : null}
            <SendToGrading run={run} waiting={run.shots > run.done + run.failed || busy} />
          </>
        }
      />
      <DropZone disabled={!run.mayUpload} onFiles={pick}>
        {empty ? null : <RunToolbar run={run} siblings={siblings} pick={pick} />}
        <UploadList uploads={uploads} busy={busy} queue={queue} />
        {empty ? (
          <HowToShoot action={run.mayUpload ? <PickButton primary onFiles={pick} /> : null} />
        ) : (
          <ShotStrip tag={run.unit.tag} runId={run.id} shots={run.shotList} />
        )}
      </DropZone>
      {run.results.length > 0 ? <RunFindings run={run} shot={shown ? shot : null} /> : null}
      {run.results.length === 0 && run.shots > 0 ? <NothingYet /> : null}
    </>
  );
}

function NothingYet() {
  return (
    <Panel>
      <p className="text-ink-2">
        Findings appear here, one after the other, with the first measured shot of the target.
      </p>
    </Panel>
  );
}
