'use client';

import { Button } from '@/components/ui/button';
import { Panel, PanelHead } from '@/components/ui/panel';
import { Moment } from '@/components/units/moment';
import { call, sentenceOf } from '@/lib/client/api';
import { useChange, useSessions } from '@/lib/client/queries';
import type { SessionRow } from '@/lib/shared/api';
import { deviceOf } from './device';

/** Where one is signed in; a session that is ended is refused with its next request. */
export function SessionsPanel({ first }: { first: SessionRow[] }) {
  const sessions = useSessions(first);
  const end = useChange((id: string) => call(`/api/sessions/${id}`, 'DELETE'), ['sessions']);
  return (
    <Panel aria-label="My sessions">
      <PanelHead
        title={
          sessions.length === 1 ? 'Signed in here only' : `Signed in at ${sessions.length} places`
        }
      />
      <ul>
        {sessions.map((session) => (
          <li
            key={session.id}
            className="flex flex-wrap items-center justify-between gap-x-4 gap-y-1 border-line-2 border-t py-2.5 first:border-0"
          >
            <span title={session.userAgent}>
              <b>{deviceOf(session.userAgent)}</b>
              <span className="label block">
                since <Moment at={session.startedAt} />, last used <Moment at={session.seenAt} />
              </span>
            </span>
            {session.current ? (
              <span className="label">this one</span>
            ) : (
              <Button
                variant="quiet"
                size="small"
                busy={end.isPending && end.variables === session.id}
                onClick={() => end.mutate(session.id)}
              >
                End it
              </Button>
            )}
          </li>
        ))}
      </ul>
      {end.isError ? (
        <p role="alert" className="mt-2 font-medium text-light-ink">
          {sentenceOf(end.error)}
        </p>
      ) : null}
    </Panel>
  );
}
