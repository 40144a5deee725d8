'use client';

import Link from 'next/link';
import { RunFindings } from '@/components/runs/run-findings';
import { Crops } from '@/components/shots/crops';
import { Tag } from '@/components/ui/chip';
import { PageHead, Panel, PanelHead } from '@/components/ui/panel';
import { ChecksPanel } from '@/components/units/checks-panel';
import { useProposal, useUnit } from '@/lib/client/queries';
import type { Proposal, RunDetail, ShotDetail, UnitDetail } from '@/lib/shared/api';
import { RuleList } from './rule-list';
import { SignPanel } from './sign-panel';
import { WorkSummary } from './work-summary';

/** The grader's desk: the decision beside its reasons, the pictures and the work under them. */
export function Desk({
  first,
  firstProposal,
  run,
  shot,
}: {
  first: UnitDetail;
  firstProposal: Proposal | null;
  run: RunDetail | null;
  shot: ShotDetail | null;
}) {
  const unit = useUnit(first);
  const proposal = useProposal(first.tag, firstProposal);
  const crops = shot?.analysis?.crops ?? [];
  return (
    <>
      <PageHead
        label={
          <>
            <Link
              className="underline decoration-line underline-offset-3 hover:decoration-current"
              href="/grading"
            >
              Grading
            </Link>{' '}
            · <Tag>{unit.tag}</Tag>
            {run ? (
              <>
                {' '}
                ·{' '}
                <Link
                  className="underline decoration-line underline-offset-3 hover:decoration-current"
                  href={`/units/${unit.tag}/runs/${run.id}`}
                >
                  {run.title}
                </Link>
                , {run.done} shots
              </>
            ) : null}
          </>
        }
        title={`${unit.maker} ${unit.model}`}
      />
      <div className="grid items-start gap-3.5 lg:grid-cols-[minmax(0,1fr)_minmax(0,1.3fr)]">
        <div className="grid grid-cols-[minmax(0,1fr)] gap-3.5">
          <SignPanel unit={unit} proposal={proposal} />
          <WorkSummary unit={unit} />
          <ChecksPanel unit={{ ...unit, may: { ...unit.may, check: false } }} />
        </div>
        <Panel aria-label="Rules">
          <PanelHead
            title={proposal ? 'Rule by rule' : 'No rules are met yet'}
            aside={
              proposal ? `${proposal.schemeName}, version ${proposal.schemeVersion}` : undefined
            }
          />
          <RuleList rules={proposal?.rules ?? []} />
        </Panel>
      </div>
      {run ? <RunFindings run={run} shot={shot} graded /> : null}
      {crops.length > 0 ? <Crops crops={crops} /> : null}
    </>
  );
}
