import type { ReactNode } from 'react';
import { AbPlane } from '@/components/pictures/ab-plane';
import { placeName } from '@/components/pictures/draw';
import { framePicture } from '@/components/pictures/frame-data';
import { FrameMap } from '@/components/pictures/frame-map';
import { Histogram } from '@/components/pictures/histogram';
import { MtfCurves } from '@/components/pictures/mtf-curves';
import {
  colourPoints,
  peersInTheMiddle,
  tellingCurves,
  withRunSharpness,
} from '@/components/runs/run-pictures';
import { cn } from '@/components/ui/cn';
import { Panel, PanelHead } from '@/components/ui/panel';
import type { RunDetail, ShotDetail } from '@/lib/shared/api';
import {
  colourFinding,
  edgeFinding,
  exposureFinding,
  type Finding,
  fringeFinding,
  readingsOfRun,
  sharpnessFinding,
} from '@/lib/shared/findings';
import { GradeSoFar } from './grade-so-far';
import { NumberList } from './number-list';

/** The run's means as findings, drawn on the newest measured shot of the target. */
export function RunFindings({
  run,
  shot,
  graded = false,
}: {
  run: RunDetail;
  shot: ShotDetail | null;
  /** The page shows the grade and its rules itself. */
  graded?: boolean;
}) {
  const readings = readingsOfRun(run.results);
  const sharpness = sharpnessFinding(readings);
  const analysis = shot?.analysis ?? null;
  const stations = withRunSharpness(analysis?.plots.stations ?? [], readings);
  const frame =
    analysis && stations.length > 0
      ? framePicture(stations, analysis, peersInTheMiddle(run.results))
      : null;
  const curves = tellingCurves(stations).map((curve) => ({
    ...curve,
    label: placeName(curve.id).toLowerCase(),
  }));
  const colours = analysis?.plots.colours;
  const fringes = fringeFinding(readings);
  return (
    <div
      className={cn(
        'grid items-start gap-3.5 lg:grid-cols-[minmax(0,1.25fr)_minmax(0,1fr)]',
        graded || '2xl:grid-cols-[minmax(0,1.25fr)_minmax(0,1fr)_minmax(0,1fr)]',
      )}
    >
      <div className="grid gap-3.5">
        <FindingPanel finding={sharpness} otherwise="Sharpness over the frame">
          {frame ? <FrameMap frame={frame} /> : <NoPicture />}
          {fringes ? (
            <p className="mt-3 text-pretty text-ink-2">
              <b className="text-ink">{fringes.title}.</b> {fringes.detail}
            </p>
          ) : null}
        </FindingPanel>
        <FindingPanel finding={edgeFinding(readings)} otherwise="Edges">
          {curves.length > 0 ? <MtfCurves curves={curves} /> : <NoPicture />}
        </FindingPanel>
      </div>
      <div className="grid gap-3.5">
        <FindingPanel finding={exposureFinding(readings)} otherwise="Exposure">
          {analysis ? <Histogram bins={analysis.plots.histogram} /> : <NoPicture />}
        </FindingPanel>
        {graded ? null : <GradeSoFar proposal={run.proposal} />}
        <FindingPanel finding={colourFinding(readings)} otherwise="Colours">
          {colours?.length ? <AbPlane colours={colourPoints(colours)} /> : <NoPicture />}
        </FindingPanel>
      </div>
      {graded ? null : (
        <Panel aria-label="Numbers" className="lg:max-2xl:col-span-2">
          <PanelHead
            title="Numbers"
            aside={`${counted(run.done, 'shot')} · ${counted(run.peers.units, 'other')} of this model`}
          />
          {run.proposal ? <NumberList rules={run.proposal.rules} /> : <NoPicture />}
        </Panel>
      )}
    </div>
  );
}

const counted = (count: number, word: string) => `${count} ${word}${count === 1 ? '' : 's'}`;

function FindingPanel({
  finding,
  otherwise,
  children,
}: {
  finding: Finding | null;
  otherwise: string;
  children: ReactNode;
}) {
  return (
    <Panel aria-label={otherwise}>
      <PanelHead title={finding?.title ?? otherwise} className="mb-1" />
      {finding?.detail ? <p className="mb-3 text-pretty text-ink-2">{finding.detail}</p> : null}
      {children}
    </Panel>
  );
}

function NoPicture() {
  return <p className="text-ink-2">Appears with the first measured shot of the target.</p>;
}
