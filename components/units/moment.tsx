'use client';

import { useSyncExternalStore } from 'react';

const format = (iso: string, timeZone?: string) =>
  new Intl.DateTimeFormat('en-GB', {
    day: 'numeric',
    month: 'short',
    year: 'numeric',
    hour: '2-digit',
    minute: '2-digit',
    timeZone,
  }).format(new Date(iso));

const never = () => () => undefined;

/** A time to the minute where the reader is; in UTC until the browser has taken over. */
export function Moment({ at }: { at: string }) {
  const local = useSyncExternalStore(
    never,
    () => true,
    () => false,
  );
  return (
    <time dateTime={at} title={at} className="whitespace-nowrap tabular-nums">
      {local ? format(at) : format(at, 'UTC')}
    </time>
  );
}
