import type { ReactNode } from 'react';

/** A picture and, folded under it, the same numbers as a table. */
export function Picture({
  children,
  table,
  note,
  className,
}: {
  children: ReactNode;
  table?: ReactNode;
  note?: ReactNode;
  className?: string;
}) {
  return (
    <figure className={className}>
      {children}
      {note ? <figcaption className="label mt-2">{note}</figcaption> : null}
      {table}
    </figure>
  );
}

/** The numbers behind a picture, for whoever can't or won't read the drawing. */
export function DataTable({
  caption,
  head,
  rows,
  summary = 'The numbers',
}: {
  caption: string;
  head: readonly string[];
  /** Each row's first cell names it. */
  rows: readonly (readonly string[])[];
  summary?: string;
}) {
  return (
    <details className="mt-2 print:hidden">
      <summary className="label inline-flex min-h-6 items-center gap-1 underline decoration-line underline-offset-3 hover:decoration-current">
        {summary}
      </summary>
      <table className="mt-1 w-full border-collapse text-left text-[13px] tabular-nums [&_tbody_th]:font-medium [&_td]:border-line-2 [&_td]:border-b [&_td]:py-1 [&_td]:pl-3 [&_td]:text-right [&_th]:border-line-2 [&_th]:border-b [&_th]:py-1 [&_thead_th]:align-bottom [&_thead_th+th]:pl-3 [&_thead_th+th]:text-right">
        <caption className="sr-only">{caption}</caption>
        <thead className="label">
          <tr>
            {head.map((title) => (
              <th key={title} scope="col">
                {title}
              </th>
            ))}
          </tr>
        </thead>
        <tbody>
          {rows.map((row) => (
            <tr key={row.join('|')}>
              {row.map((cell, column) =>
                column ? (
                  <td key={head[column]}>{cell}</td>
                ) : (
                  <th key={head[column]} scope="row">
                    {cell}
                  </th>
                ),
              )}
            </tr>
          ))}
        </tbody>
      </table>
    </details>
  );
}
