import type { ReactNode } from 'react';
import type { ReportContent } from '@/lib/shared/report';
import { countOf, dayInWords, Fact, Section } from './parts';
import type { ReportStanding } from './report-page';
import { OwnPicture } from './sharpness';

/** How the shots were taken. */
export function Capture({
  content: { capture, analysisVersion, cautions, pictures },
  base,
}: {
  content: ReportContent;
  base: string;
}) {
  const view = pictures.find(({ name }) => name === 'view');
  return (
    <div className="grid items-stretch gap-4 sm:grid-cols-2 print:gap-8">
      <Section title="How it was shot">
        <dl className="grid gap-3 print:grid-cols-2 print:gap-1">
          <Fact label="When">{dayInWords(capture.testedOn)}</Fact>
          <Fact label="Shots">
            {countOf(capture.shots, 'shot')}, of them {capture.targetShots} of the target
          </Fact>
          <Fact label="Settings">{capture.settings}</Fact>
          <Fact label="Target">{capture.print}</Fact>
          <Fact label="Measured by">Mendlight analysis, version {analysisVersion}</Fact>
        </dl>
      </Section>
      <Section title="Known limits and cautions">
        {cautions.length === 0 ? <p className="text-ink-2">None are stated.</p> : null}
        <ul className="grid gap-2 text-ink-2 print:gap-0.5">
          {cautions.map((caution) => (
            <li key={caution}>{caution}</li>
          ))}
        </ul>
        {view ? <OwnPicture picture={view} base={base} className="mt-5 print:hidden" /> : null}
      </Section>
    </div>
  );
}

/** What a buyer can compare: the camera in hand, the frozen data, the original files. */
export function Checking({
  content,
  standing: { sha256, versions },
  base,
}: {
  content: ReportContent;
  standing: ReportStanding;
  base: string;
}) {
  const { unit, originals, version, publishedAt } = content;
  return (
    <Section
      id="check"
      title="How to check this report"
      lead="Compare these with the camera in your hand and with the data behind this page."
    >
      <ol className="grid gap-3 print:gap-1">
        <Step title="The camera">
          Its serial number must end in <b className="mono">{unit.serialEnding}</b>, and its tag is{' '}
          <b className="mono">{unit.tag}</b>.
        </Step>
        <Step title="The data">
          This page shows version {version}, published {dayInWords(publishedAt)}, and nothing but{' '}
          <a href={`${base}/report.json`} className="underline underline-offset-2">
            its data
          </a>
          . The file’s SHA-256 is <Hash text={sha256} />
        </Step>
        {versions.length > 1 ? <Versions versions={versions} /> : null}
        <Step title="The photographs">
          The seller keeps the original files; ask for one and compare its SHA-256.
          <details className="mt-1 print:hidden">
            <summary className="label inline-flex min-h-6 items-center underline decoration-line underline-offset-3">
              {countOf(originals.length, 'original file')}
            </summary>
            <ul className="mt-1 grid gap-1.5 text-[13px]">
              {originals.map(({ name, sha256: hash, bytes }) => (
                <li key={hash}>
                  {name}, {bytes.toLocaleString('en-GB')} bytes: <Hash text={hash} />
                </li>
              ))}
            </ul>
          </details>
        </Step>
      </ol>
    </Section>
  );
}

function Versions({ versions }: { versions: ReportStanding['versions'] }) {
  return (
    <Step title="The versions">
      This unit’s report was published {versions.length} times; the last one stands.
      <ul className="mt-1 grid gap-1 text-[13px]">
        {versions.map(({ version, publishedAt, sha256 }) => (
          <li key={version}>
            Version {version}, {dayInWords(publishedAt)}: <Hash text={sha256} />
          </li>
        ))}
      </ul>
    </Step>
  );
}

function Step({ title, children }: { title: string; children: ReactNode }) {
  return (
    <li className="grid gap-x-4 sm:grid-cols-[130px_1fr]">
      <b>{title}</b>
      <div className="min-w-0 text-ink-2">{children}</div>
    </li>
  );
}

function Hash({ text }: { text: string }) {
  return <span className="mono break-all text-ink">{text}</span>;
}
