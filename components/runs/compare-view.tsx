import Link from 'next/link';
import { framePicture } from '@/components/pictures/frame-data';
import { FrameMap } from '@/components/pictures/frame-map';
import { Tag } from '@/components/ui/chip';
import { PageHead, Panel, PanelHead } from '@/components/ui/panel';
import { figures, Table, Td, Th } from '@/components/ui/table';
import type { RunDetail, ShotDetail } from '@/lib/shared/api';
import { type Change, changeHeadline, changes } from '@/lib/shared/compare';
import { readingsOfRun, sharpnessFinding } from '@/lib/shared/findings';
import { withDoubt } from '@/lib/shared/numbers';
import { ruleValue } from './number-list';
import { withRunSharpness } from './run-pictures';

export interface Side {
  run: RunDetail;
  shot: ShotDetail | null;
}

/** Two runs of one unit: what the repair changed, each difference with its doubt. */
export function CompareView({ before, after }: { before: Side; after: Side }) {
  const { unit } = after.run;
  const all = changes(before.run.proposal?.rules ?? [], after.run.proposal?.rules ?? []);
  return (
    <>
      <PageHead
        label={
          <>
            <Link
              className="underline decoration-line underline-offset-3 hover:decoration-current"
              href={`/units/${unit.tag}`}
            >
              <Tag>{unit.tag}</Tag> {unit.maker} {unit.model}
            </Link>{' '}
            · before and after the repair
          </>
        }
        title={changeHeadline(all)}
      />
      <div className="grid items-start gap-3.5 lg:grid-cols-2">
        <Frame side={before} when="before" />
        <Frame side={after} when="after" />
      </div>
      <Panel aria-label="Changes">
        <PanelHead title="What changed" aside="a difference counts when it exceeds its doubt" />
        <ChangeTable all={all} />
      </Panel>
    </>
  );
}

function Frame({ side: { run, shot }, when }: { side: Side; when: 'before' | 'after' }) {
  const readings = readingsOfRun(run.results);
  const analysis = shot?.analysis ?? null;
  const stations = withRunSharpness(analysis?.plots.stations ?? [], readings);
  const frame = analysis && stations.length > 0 ? framePicture(stations, analysis) : null;
  return (
    <Panel aria-label={when === 'before' ? 'Before' : 'After'}>
      <p className="label mb-1">
        {when === 'before' ? 'Before' : 'After'}:{' '}
        <Link
          className="underline decoration-line underline-offset-3 hover:decoration-current"
          href={`/units/${run.unit.tag}/runs/${run.id}`}
        >
          {run.title}
        </Link>
        , {run.done === 1 ? 'one shot' : `${run.done} shots`}
      </p>
      <PanelHead title={sharpnessFinding(readings)?.title ?? 'Sharpness over the frame'} />
      {frame ? <FrameMap frame={frame} /> : <p className="text-ink-2">Nothing to draw.</p>}
    </Panel>
  );
}

const marks: Record<Change['verdict'], string> = { better: '▲', worse: '▼', same: '=' };
const words: Record<Change['verdict'], string> = {
  better: 'better',
  worse: 'worse',
  same: 'no difference beyond the doubt',
};

function ChangeTable({ all }: { all: readonly Change[] }) {
  if (all.length === 0)
    return <p className="text-ink-2">The two runs have no result in common yet.</p>;
  const order: Change['verdict'][] = ['worse', 'better', 'same'];
  const sorted = order.flatMap((verdict) => all.filter((change) => change.verdict === verdict));
  return (
    <Table>
      <thead>
        <tr>
          <Th>Result</Th>
          <Th className={figures}>Before</Th>
          <Th className={figures}>After</Th>
          <Th className={figures}>Change</Th>
          <Th>Verdict</Th>
        </tr>
      </thead>
      <tbody>
        {sorted.map((change) => (
          <tr key={change.rule.ruleId}>
            <Td className="font-semibold">{change.rule.label}</Td>
            <Td className={`${figures} whitespace-nowrap`}>{ruleValue(change.earlier)}</Td>
            <Td className={`${figures} whitespace-nowrap`}>{ruleValue(change.rule)}</Td>
            <Td className={`${figures} whitespace-nowrap`}>
              {change.by > 0 ? '+' : ''}
              {withDoubt(change.by, change.expanded, change.rule.unit)}
            </Td>
            <Td className={change.verdict === 'same' ? 'text-ink-2' : 'font-semibold'}>
              <span
                aria-hidden="true"
                className={`mr-2 inline-block w-3 text-[11px] ${change.verdict === 'worse' ? 'text-light-ink' : ''}`}
              >
                {marks[change.verdict]}
              </span>
              {words[change.verdict]}
            </Td>
          </tr>
        ))}
      </tbody>
    </Table>
  );
}
