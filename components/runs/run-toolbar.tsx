'use client';

import { Progress } from '@/components/ui/progress';
import { Steps } from '@/components/ui/steps';
import type { RunDetail } from '@/lib/shared/api';
import { PickButton } from './drop-zone';

/** Over the strip: the unit's other runs, how far the measuring has come, and the way to more pictures. */
export function RunToolbar({
  run,
  siblings,
  pick,
}: {
  run: RunDetail;
  siblings: { id: string; title: string }[];
  pick: (files: File[]) => void;
}) {
  return (
    <div className="mb-4 flex flex-wrap items-center justify-between gap-x-6 gap-y-3">
      {siblings.length > 1 ? (
        <Steps
          label="Runs of this unit"
          steps={siblings.map(({ id, title }) => ({
            label: title,
            href: `/units/${run.unit.tag}/runs/${id}`,
            state: id === run.id ? 'on' : 'open',
          }))}
        />
      ) : (
        <h2>{headline(run.shots)}</h2>
      )}
      <div className="flex flex-wrap items-center gap-x-5 gap-y-2">
        <Measuring run={run} />
        {run.mayUpload ? <PickButton onFiles={pick} /> : null}
      </div>
    </div>
  );
}

function headline(shots: number): string {
  if (shots === 0) return 'Pictures are coming in';
  return shots === 1 ? 'One shot' : `${shots} shots`;
}

function Measuring({ run }: { run: RunDetail }) {
  const failed = run.failed ? `${run.failed} not measured` : undefined;
  if (run.shots === run.done + run.failed)
    return (
      <span className="label">{[`${run.done} analysed`, failed].filter(Boolean).join(', ')}</span>
    );
  return (
    <Progress
      className="w-[230px]"
      value={progressOf(run)}
      label={`${run.done} of ${run.shots} analysed`}
      note={failed}
    />
  );
}

/** Shots that are over count whole, the one being measured by its part. */
function progressOf(run: RunDetail): number {
  const parts = run.shotList.map((shot) =>
    shot.state === 'done' || shot.state === 'failed' ? 1 : shot.progress,
  );
  return parts.reduce((sum, part) => sum + part, 0) / Math.max(1, run.shots);
}
