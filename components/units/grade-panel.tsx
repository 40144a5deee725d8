import Link from 'next/link';
import { Panel, PanelHead } from '@/components/ui/panel';
import { day } from '@/lib/client/format';
import type { UnitDetail } from '@/lib/shared/api';

const letterWords = { A: 'Graded A', B: 'Graded B', C: 'Graded C', Parts: 'For parts only' };

/** The signed grade and the report that stands on it; nothing until there is one. */
export function GradePanel({ unit }: { unit: UnitDetail }) {
  const { gradeSigned: grade, report } = unit;
  if (!grade && !report) return null;
  return (
    <Panel aria-label="Grade and report">
      {grade ? (
        <>
          <PanelHead title={letterWords[grade.letter]} aside={day(grade.at)} />
          <p className="text-ink-2">
            Signed by {grade.by}
            {grade.letter === grade.proposed
              ? ', as the measurements propose.'
              : `; the measurements propose ${grade.proposed}.`}
          </p>
          {grade.reason ? <p className="mt-2">{grade.reason}</p> : null}
        </>
      ) : null}
      {report ? (
        <p className="mt-3">
          <Link
            className="underline decoration-line underline-offset-3 hover:decoration-current"
            href={`/r/${report.slug}`}
          >
            Report, version {report.version}
          </Link>
          <span className="text-ink-2">
            , published {day(report.publishedAt)}
            {report.withdrawnAt ? `, withdrawn ${day(report.withdrawnAt)}` : ' and standing'}
          </span>
        </p>
      ) : null}
    </Panel>
  );
}
