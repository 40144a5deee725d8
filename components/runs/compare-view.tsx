import Link from 'next/link';
import { framePicture, lengthOf } from '@/components/pictures/frame-data';
import { FrameMap } from '@/components/pictures/frame-map';
import { Tag } from '@/components/ui/chip';
import { PageHead, Panel, PanelHead } from '@/components/ui/panel';
import { figures, Table, Td, Th } from '@/components/ui/table';
import type { RunDetail, ShotDetail } from '@/lib/shared/api';
import { type Change, changeHeadline, changes } from '@/lib/shared/compare';
import { readingsOfRun, sharpnessFinding } from '@/lib/shared/findings';
import { withDoubt } from '@/lib/shared/numbers';
import type { FramePicture } from '@/lib/shared/report';
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
        <Frame side={before} other={after} when="before" />
        <Frame side={after} other={before} when="after" />
      </div>
      <Panel aria-label="Changes">
        <PanelHead title="What changed" aside="a difference counts when it exceeds its doubt" />
        <ChangeTable all={all} />
      </Panel>
    </>
  );
}

function frameOf({ run, shot }: Side): FramePicture | null {
  const analysis = shot?.analysis ?? null;
  const stations = withRunSharpness(analysis?.plots.stations ?? [], readingsOfRun(run.results));
  return analysis && stations.length > 0 ? framePicture(stations, analysis) : null;
}

/** Of two pictures the one with the longest hair: both are drawn by the factor that suits it. */
function longerOf(a: FramePicture, b: FramePicture | null): FramePicture {
  const reach = ({ stations }: FramePicture) =>
    Math.max(0, ...stations.flatMap(({ red, blue }) => [lengthOf(red), lengthOf(blue)]));
  return b && reach(b) > reach(a) ? b : a;
}

function Frame({ side, other, when }: { side: Side; other: Side; when: 'before' | 'after' }) {
  const { run } = side;
  const readings = readingsOfRun(run.results);
  const frame = frameOf(side);
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
      {frame ? (
        <FrameMap frame={frame} longest={longerOf(frame, frameOf(other))} />
      ) : (
        <p className="text-ink-2">Nothing to draw.</p>
      )}
    </Panel>
  );
}

const marks: Record<Change['verdict'], string> = { better: '▲', worse: '▼', same: '=' };
const words: Record<Change['verdict'], string> = {
  better: 'better',
  worse: 'worse',
  same: 'no difference beyond the doubt',
};

function changeText({ by, expanded, rule }: Change): string {
  const text = withDoubt(by, expanded, rule.unit);
  return by > 0 && Number.parseFloat(text) > 0 ? `+${text}` : text;
}

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
            <Td className={`${figures} whitespace-nowrap`}>{changeText(change)}</Td>
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
