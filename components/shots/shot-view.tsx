'use client';

import Link from 'next/link';
import { useRouter } from 'next/navigation';
import { useState } from 'react';
import { RegistrationOverlay } from '@/components/pictures/registration-overlay';
import { Button, ButtonLink } from '@/components/ui/button';
import { Tag } from '@/components/ui/chip';
import { PageHead, Panel, PanelHead } from '@/components/ui/panel';
import { Progress } from '@/components/ui/progress';
import { EmptyState, ErrorState } from '@/components/ui/states';
import { useShot } from '@/lib/client/queries';
import { useShortcuts } from '@/lib/client/shortcuts';
import { useRunEvents } from '@/lib/client/use-run-events';
import type { ShotDetail } from '@/lib/shared/api';
import { AnalysesPanel } from './analyses-panel';
import { CapturePanel } from './capture-panel';
import { Crops } from './crops';
import { MetricTables } from './metric-tables';
import { ShotPictures } from './shot-pictures';

/** One photograph and everything that was read from it. */
export function ShotView({ first }: { first: ShotDetail }) {
  const shot = useShot(first.id, first).data ?? first;
  useRunEvents(first.runId);
  const { analysis } = shot;
  return (
    <>
      <PageHead
        label={
          <>
            <Link
              className="underline decoration-line underline-offset-3 hover:decoration-current"
              href={`/units/${shot.unit.tag}`}
            >
              <Tag>{shot.unit.tag}</Tag> {shot.unit.maker} {shot.unit.model}
            </Link>{' '}
            ·{' '}
            <Link
              className="underline decoration-line underline-offset-3 hover:decoration-current"
              href={runPath(shot)}
            >
              {shot.runTitle}
            </Link>
          </>
        }
        title={<span className="break-all">{shot.name}</span>}
        actions={<Neighbours shot={shot} />}
      />
      {shot.state === 'failed' ? (
        <ErrorState title="This shot could not be measured">
          {shot.error ?? 'The measuring stopped without saying why. Analyse it again.'}
        </ErrorState>
      ) : null}
      <div className="grid items-start gap-3.5 lg:grid-cols-[minmax(0,1.7fr)_minmax(0,1fr)]">
        <div className="grid grid-cols-[minmax(0,1fr)] gap-3.5">
          <PicturePanel shot={shot} />
        </div>
        <div className="grid grid-cols-[minmax(0,1fr)] gap-3.5">
          {analysis?.warnings.length ? <Warnings warnings={analysis.warnings} /> : null}
          {analysis ? <CapturePanel capture={analysis.capture} /> : null}
          <AnalysesPanel shot={shot} />
        </div>
      </div>
      {analysis ? (
        <>
          <ShotPictures analysis={analysis} />
          {analysis.crops.length > 0 ? <Crops crops={analysis.crops} /> : null}
          <MetricTables metrics={analysis.metrics} />
        </>
      ) : null}
    </>
  );
}

const runPath = (shot: ShotDetail) => `/units/${shot.unit.tag}/runs/${shot.runId}`;
const shotPath = (shot: ShotDetail, id: string) => `${runPath(shot)}/shots/${id}`;

function Neighbours({ shot }: { shot: ShotDetail }) {
  const router = useRouter();
  const { previous, next } = shot;
  const go = (id: string | null) => {
    if (id) router.push(shotPath(shot, id));
  };
  useShortcuts([
    { key: 'ArrowLeft', label: 'Shot before', run: () => go(previous) },
    { key: 'ArrowRight', label: 'Next shot', run: () => go(next) },
    { key: 'Escape', label: 'Back to the run', run: () => router.push(runPath(shot)) },
  ]);
  return (
    <>
      {previous ? (
        <ButtonLink href={shotPath(shot, previous)} hint="←">
          Before
        </ButtonLink>
      ) : null}
      {next ? (
        <ButtonLink href={shotPath(shot, next)} hint="→">
          Next
        </ButtonLink>
      ) : null}
    </>
  );
}

function PicturePanel({ shot }: { shot: ShotDetail }) {
  const [marks, setMarks] = useState(true);
  const { analysis, view } = shot;
  const found = Boolean(analysis?.registration);
  useShortcuts(
    found ? [{ key: 'm', label: 'Show or hide the marks', run: () => setMarks(!marks) }] : [],
  );
  return (
    <Panel aria-label="Picture">
      <PanelHead
        title={
          found ? 'The target was found' : analysis ? 'A picture without the target' : 'Picture'
        }
        aside={
          found ? (
            <Button
              variant="quiet"
              size="small"
              hint="M"
              aria-pressed={marks}
              onClick={() => setMarks(!marks)}
            >
              {marks ? 'Hide the marks' : 'Show the marks'}
            </Button>
          ) : null
        }
      />
      {analysis && view ? (
        <RegistrationOverlay
          width={analysis.width}
          height={analysis.height}
          src={view}
          alt={`${shot.name} as analysed`}
          plots={analysis.plots}
          registration={analysis.registration}
          marks={marks}
        />
      ) : (
        <Waiting shot={shot} />
      )}
    </Panel>
  );
}

function Waiting({ shot }: { shot: ShotDetail }) {
  if (shot.state === 'failed')
    return (
      <EmptyState title="No picture to show" className="py-8">
        What could not be read is kept as it came; its hash stands beside.
      </EmptyState>
    );
  return (
    <div className="grid aspect-4/3 place-items-center rounded-well bg-well p-8">
      <div className="w-full max-w-xs rounded-well bg-panel p-4">
        <Progress
          value={shot.state === 'queued' ? null : shot.progress}
          label={shot.state === 'queued' ? 'Waits for its turn' : 'Being measured'}
        />
      </div>
    </div>
  );
}

function Warnings({ warnings }: { warnings: NonNullable<ShotDetail['analysis']>['warnings'] }) {
  return (
    <section aria-label="Warnings" className="rounded-panel bg-light-soft p-5 max-sm:p-4">
      <h2 className="mb-2">
        {warnings.length === 1 ? 'One thing to know' : `${warnings.length} things to know`}
      </h2>
      <ul className="grid list-disc gap-1.5 pl-5">
        {warnings.map((warning) => (
          <li key={`${warning.code} ${warning.zone}`}>{warning.message}</li>
        ))}
      </ul>
    </section>
  );
}
