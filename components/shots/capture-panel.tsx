import type { Capture } from '@/analysis/image';
import { signedText } from '@/components/pictures/draw';
import { Panel, PanelHead } from '@/components/ui/panel';
import { day, exposureTime } from '@/lib/client/format';
import { gap } from '@/lib/shared/numbers';

const programWords: Record<string, string> = {
  manual: 'manual exposure',
  program: 'programme automatic',
  'aperture-priority': 'aperture priority',
  'shutter-priority': 'shutter priority',
};

/** How the shot was taken, as a person would say it. */
export function CapturePanel({ capture }: { capture: Capture }) {
  const settings = settingsOf(capture);
  const camera = [capture.make, capture.model].filter(Boolean).join(' ');
  const facts: [string, string | null][] = [
    ['Camera', camera === '' ? null : camera],
    ['Serial in the file', capture.serial],
    ['Taken', capture.takenAt ? takenWords(capture.takenAt) : null],
    ['Mode', capture.program ? (programWords[capture.program] ?? capture.program) : null],
    ['Flash', capture.flash === null ? null : capture.flash ? 'fired' : 'did not fire'],
    ['Written by', capture.software],
  ];
  const known = facts.filter(([, value]) => value);
  return (
    <Panel aria-label="How it was taken">
      <PanelHead title={settings === '' ? 'The file says little of how it was taken' : settings} />
      <dl className="grid grid-cols-[112px_minmax(0,1fr)] gap-x-4 gap-y-1.5">
        {known.map(([label, value]) => (
          <div key={label} className="contents">
            <dt className="label pt-[3px]">{label}</dt>
            <dd>{value}</dd>
          </div>
        ))}
      </dl>
    </Panel>
  );
}

/** "14 Mar 2026, 09:30": the camera's own clock, whose zone the file rarely names. */
function takenWords(takenAt: string): string {
  const [date, time] = takenAt.split('T');
  return date && time ? `${day(`${date}T00:00:00Z`)}, ${time.slice(0, 5)}` : takenAt;
}

/** "1/125 s at f/5.6, ISO 100, 35 mm, −0.3 EV". */
export function settingsOf(capture: Capture): string {
  const { exposureTime: time, fNumber, iso, focalLength, exposureBias } = capture;
  const aperture = fNumber ? `f/${Number(fNumber.toFixed(1))}` : null;
  const light =
    time && aperture
      ? `${exposureTime(time)} at ${aperture}`
      : time
        ? exposureTime(time)
        : aperture;
  return [
    light,
    iso ? `ISO ${iso}` : null,
    focalLength ? `${Number(focalLength.toFixed(1))}${gap}mm` : null,
    exposureBias ? `${signedText(exposureBias, 1)}${gap}EV` : null,
  ]
    .filter(Boolean)
    .join(', ');
}
