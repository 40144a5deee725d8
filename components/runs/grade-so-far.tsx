import { GradeDial } from '@/components/pictures/grade-dial';
import { Panel, PanelHead } from '@/components/ui/panel';
import type { Proposal } from '@/lib/shared/api';
import { doubtSentence, gradeFinding } from '@/lib/shared/findings';

/** The grade as it stands, what forces it, and what would settle the doubts. */
export function GradeSoFar({ proposal }: { proposal: Proposal | null }) {
  const { title, detail } = gradeFinding(proposal);
  const doubts = proposal?.rules.filter((rule) => rule.standing === 'doubt') ?? [];
  return (
    <Panel aria-label="Grade so far">
      <PanelHead
        title={title}
        aside={proposal ? `${proposal.schemeName}, version ${proposal.schemeVersion}` : undefined}
      />
      <div className="flex flex-wrap items-center gap-x-6 gap-y-3">
        {proposal ? <GradeDial letter={proposal.letter} rules={proposal.rules} size={150} /> : null}
        <div className="grid min-w-[200px] flex-1 gap-2 text-pretty text-ink-2">
          <p>{detail}</p>
          {doubts.slice(0, 3).map((rule) => (
            <p key={rule.ruleId}>{doubtSentence(rule)}</p>
          ))}
          {doubts.length > 3 ? <p>{doubts.length - 3} more rules are in doubt.</p> : null}
          {proposal && proposal.untested > 0 ? (
            <p>
              {proposal.untested === 1
                ? 'One rule is not tested yet; it never passes by itself.'
                : `${proposal.untested} rules are not tested yet; they never pass by themselves.`}
            </p>
          ) : null}
        </div>
      </div>
    </Panel>
  );
}
