import type { ReactElement } from 'react';
import type { ReportContent } from '@/lib/shared/report';
import { Missing } from './missing';
import { ReportDocument } from './report-document';
import type { ReportStanding } from './report-page';

type ToMarkup = (element: ReactElement) => string;

/** The report as one HTML file. The renderer is passed in: Next's server bundle refuses to hold react-dom/server. */
export function renderReport(
  toMarkup: ToMarkup,
  input: { content: ReportContent; standing: ReportStanding; css: string; origin: string },
): string {
  return `<!doctype html>${toMarkup(<ReportDocument {...input} />)}`;
}

export function renderMissing(toMarkup: ToMarkup, css: string): string {
  return `<!doctype html>${toMarkup(<Missing css={css} />)}`;
}
