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
      <table className="mt-1 w-full border-collapse text-left text-[13px] tabular-nums">
        <caption className="sr-only">{caption}</caption>
        <thead>
          <tr>
            {head.map((title, column) => (
              <th
                key={title}
                scope="col"
                className={`label border-line border-b py-1 pr-3 ${column ? 'text-right' : ''}`}
              >
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
                  <td key={head[column]} className="border-line-2 border-b py-1 pr-3 text-right">
                    {cell}
                  </td>
                ) : (
                  <th
                    key={head[column]}
                    scope="row"
                    className="border-line-2 border-b py-1 pr-3 font-medium"
                  >
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
