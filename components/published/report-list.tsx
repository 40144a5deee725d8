'use client';

import Link from 'next/link';
import { Tag } from '@/components/ui/chip';
import { Panel } from '@/components/ui/panel';
import { EmptyState } from '@/components/ui/states';
import { day } from '@/lib/client/format';
import { useReports } from '@/lib/client/queries';
import { useRowKeys } from '@/lib/client/rows';
import type { ReportRow } from '@/lib/shared/api';
import { WithdrawDialog } from './withdraw-dialog';

/** What buyers can read, the newest first; a withdrawn report stays, and says so. */
export function ReportList({ first, mayWithdraw }: { first: ReportRow[]; mayWithdraw: boolean }) {
  const reports = useReports(first);
  useRowKeys('report');
  if (reports.length === 0)
    return (
      <Panel>
        <EmptyState title="Nothing is published yet">
          A report appears here when a graded unit is published. It then has its own address, which
          a buyer opens without an account.
        </EmptyState>
      </Panel>
    );
  return (
    <Panel aria-label="Reports">
      <ul>
        {reports.map((report) => (
          <li
            key={report.slug}
            className="grid grid-cols-[48px_minmax(0,1fr)] items-center gap-x-4 gap-y-1 border-line-2 border-t py-3 first:border-0 md:grid-cols-[56px_minmax(0,1.2fr)_minmax(0,1fr)_120px]"
          >
            <span className="font-[680] text-[28px] leading-none">
              <span className="sr-only">Grade </span>
              {report.letter === 'Parts' ? (
                <span className="text-[15px]">Parts</span>
              ) : (
                report.letter
              )}
            </span>
            <span className="min-w-0">
              <Link
                href={`/r/${report.slug}`}
                data-row
                className="inline-block min-h-6 py-0.5 font-semibold underline decoration-line underline-offset-3 hover:decoration-current"
              >
                {report.maker} {report.model}
              </Link>
              <span className="block">
                <Link href={`/units/${report.tag}`} className="inline-block min-h-6 no-underline">
                  <Tag className="text-ink-2">{report.tag}</Tag>
                </Link>
              </span>
            </span>
            <span className="text-[14px] text-ink-2 max-md:col-start-2">
              {report.withdrawnAt
                ? `Withdrawn ${day(report.withdrawnAt)}`
                : `Stands, version ${report.version}`}
              <span className="block">Published {day(report.publishedAt)}</span>
            </span>
            <span className="md:text-right max-md:col-start-2">
              {mayWithdraw && !report.withdrawnAt ? <WithdrawDialog report={report} /> : null}
            </span>
          </li>
        ))}
      </ul>
    </Panel>
  );
}
