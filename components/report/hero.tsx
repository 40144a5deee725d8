import type { ReportContent } from '@/lib/shared/report';
import { GradeDial } from '../pictures/grade-dial';
import { countOf, dayInWords, Fact } from './parts';

const letterMeans: Record<ReportContent['grade']['letter'], string> = {
  A: 'does all that its model can',
  B: 'good, with a weakness stated below',
  C: 'usable, with weaknesses stated below',
  Parts: 'for parts only',
};

/** The grade, the sentence, and who stands behind it. */
export function Hero({ content }: { content: ReportContent }) {
  const { unit, grade, capture, shop } = content;
  return (
    <section className="rounded-panel bg-sheet p-7 max-sm:p-5 print:rounded-none print:p-0">
      <div className="grid items-center gap-7 max-sm:gap-4 sm:grid-cols-[1fr_236px]">
        <div className="min-w-0">
          <p className="label">
            {unit.maker} {unit.model} · {unit.modelClass}
          </p>
          <h1 className="mt-2">{content.headline}</h1>
          <p className="mt-3.5 max-w-[32em] text-pretty text-[21px]/[1.35] max-sm:text-[18px]">
            {content.summary}
          </p>
        </div>
        <figure className="justify-self-center text-center max-sm:order-first">
          <GradeDial letter={grade.letter} rules={content.rules} size={224} />
          <figcaption className="label text-balance">
            Grade {grade.letter === 'Parts' ? 'Parts only' : grade.letter}:{' '}
            {letterMeans[grade.letter]}
          </figcaption>
        </figure>
      </div>
      <dl className="mt-6 grid grid-cols-2 gap-4 sm:grid-cols-4">
        <Fact label="Tested">
          {dayInWords(capture.testedOn)}, {countOf(capture.shots, 'shot')}
        </Fact>
        <Fact label="Unit">
          <span className="mono">{unit.tag}</span>
          <span className="block text-ink-2">
            serial ends <span className="mono">{unit.serialEnding}</span>
          </span>
        </Fact>
        <Fact label="Graded by">
          {grade.signedByBenchWorker
            ? 'the person who repaired it; the shop allows this'
            : 'a second person, not the repairer'}
        </Fact>
        <Fact label="Shop">{shop.name}</Fact>
      </dl>
      {grade.overridden ? <Overridden grade={grade} /> : null}
    </section>
  );
}

function Overridden({ grade }: { grade: ReportContent['grade'] }) {
  return (
    <p className="mt-5 rounded-well bg-panel px-4 py-3 print:px-0">
      <b>The grader decided otherwise than the rules proposed.</b>{' '}
      {grade.reason ? `The reason: ${grade.reason}` : null}
    </p>
  );
}
