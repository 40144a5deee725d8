'use client';

import { useState } from 'react';
import { Tag } from '@/components/ui/chip';
import { PageHead } from '@/components/ui/panel';
import { day } from '@/lib/client/format';
import { useUnit } from '@/lib/client/queries';
import type { UnitDetail } from '@/lib/shared/api';
import { unitStateWords } from '@/lib/shared/words';
import { Cautions } from './cautions';
import { ChecksPanel } from './checks-panel';
import { FactsPanel } from './facts-panel';
import { GradePanel } from './grade-panel';
import { LogPanel } from './log-panel';
import { NewRunDialog } from './new-run-dialog';
import { NextStepPanel } from './next-step-panel';
import { RunsPanel } from './runs-panel';
import { Timeline } from './timeline';

/** One camera: what it is, what was done to it, and what to do next. */
export function UnitView({ first, currency }: { first: UnitDetail; currency: string }) {
  const unit = useUnit(first);
  const [newRun, setNewRun] = useState(false);
  const open = () => setNewRun(true);
  return (
    <>
      <PageHead
        label={
          <>
            <Tag>{unit.tag}</Tag> · {unitStateWords[unit.state].toLowerCase()} since{' '}
            {day(unit.changes.at(-1)?.at ?? unit.receivedAt)}
          </>
        }
        title={`${unit.maker} ${unit.model}`}
      />
      <div className="grid items-start gap-3.5 lg:grid-cols-[minmax(0,1.25fr)_minmax(0,1fr)] lg:max-2xl:grid-rows-[auto_1fr] 2xl:grid-cols-[minmax(0,1.2fr)_minmax(0,1fr)_minmax(0,0.8fr)]">
        <div className="grid content-start gap-3.5">
          <NextStepPanel unit={unit} onNewRun={open} />
          {unit.may.log ? <Cautions /> : null}
          <LogPanel unit={unit} currency={currency} />
        </div>
        <div className="grid content-start gap-3.5 lg:max-2xl:row-span-2">
          <GradePanel unit={unit} />
          <RunsPanel unit={unit} onNewRun={open} />
          <ChecksPanel unit={unit} />
        </div>
        <div className="grid content-start gap-3.5 xl:max-2xl:grid-cols-[minmax(0,1.3fr)_minmax(0,1fr)]">
          <FactsPanel unit={unit} currency={currency} />
          <Timeline changes={unit.changes} />
        </div>
      </div>
      <NewRunDialog unit={unit} open={newRun} onOpenChange={setNewRun} />
    </>
  );
}
