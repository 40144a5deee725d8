import type { RunRow, UnitDetail } from '@/lib/shared/api';
import type { UnitState } from '@/lib/shared/words';

/** The one thing to do next with a unit, and why; `key` does it. */
export type NextStep = { words: string } & (
  | { do: 'move'; label: string; key: string; to: UnitState }
  | { do: 'open'; label: string; key: string; href: string }
  | { do: 'run'; label: string; key: string }
  | { do: 'publish'; label: string; key: string }
  | { do: 'wait' }
);

export const newestAfter = (runs: readonly RunRow[]) =>
  runs
    .filter((run) => run.phase === 'after')
    .sort((a, b) => b.startedAt.localeCompare(a.startedAt))[0];

const wait = (words: string): NextStep => ({ do: 'wait', words });

export function nextStep(unit: UnitDetail): NextStep {
  const { may } = unit;
  const can = (state: UnitState) => may.moveTo.includes(state);
  switch (unit.state) {
    case 'received':
    case 'returned':
      return can('on-the-bench')
        ? {
            do: 'move',
            to: 'on-the-bench',
            label: 'Begin on the bench',
            key: 'b',
            words:
              'Shoot a run before the repair if it still takes pictures: it shows what changed.',
          }
        : wait('It waits for someone at the bench.');
    case 'on-the-bench':
      return may.test
        ? {
            do: 'run',
            label: 'Start a test run',
            key: 'r',
            words: 'When it works again, photograph the target and let the pictures be measured.',
          }
        : wait('Someone is working on it.');
    case 'testing':
      return testing(unit);
    case 'awaiting-grade':
      if (may.sign) {
        const href = `/grading/${unit.tag}`;
        return { do: 'open', label: 'Grade it', key: 'g', href, words: 'The bench work is done.' };
      }
      return wait(unit.signRefusal ?? 'It waits for a second person to look and sign.');
    case 'graded':
      return may.publish
        ? {
            do: 'publish',
            label: 'Publish the report',
            key: 'p',
            words: 'The grade is signed. Publishing makes the report that a buyer reads.',
          }
        : wait('Signed. A grader publishes the report.');
    case 'published':
      return can('sold')
        ? {
            do: 'move',
            to: 'sold',
            label: 'Mark as sold',
            key: 'b',
            words: 'The report stands. When the camera is sold, say so here.',
          }
        : wait('The report stands.');
    case 'sold':
      return can('returned')
        ? {
            do: 'move',
            to: 'returned',
            label: 'It came back',
            key: 'b',
            words: 'Sold. Should it come back, its history goes on here.',
          }
        : wait('Sold.');
    case 'scrapped':
      return wait('Scrapped. Its record stays.');
  }
}

function testing(unit: UnitDetail): NextStep {
  const run = newestAfter(unit.runs);
  if (!run)
    return unit.may.test
      ? {
          do: 'run',
          label: 'Start a test run',
          key: 'r',
          words: 'A grade needs a run after the repair.',
        }
      : wait('It is being tested.');
  if (run.done === 0 || !unit.may.send) {
    const href = `/units/${unit.tag}/runs/${run.id}`;
    return {
      do: 'open',
      label: 'Open the test run',
      key: 'r',
      href,
      words: run.done === 0 ? 'Drop the card’s pictures onto the run.' : 'It is being tested.',
    };
  }
  return {
    do: 'move',
    to: 'awaiting-grade',
    label: 'Send to grading',
    key: 'g',
    words: `${run.done} shots are measured. Sending it on holds the evidence still.`,
  };
}
