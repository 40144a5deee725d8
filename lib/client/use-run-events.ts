'use client';

import { useQueryClient } from '@tanstack/react-query';
import { useEffect, useState } from 'react';
import type { RunDetail, ShotRow } from '@/lib/shared/api';

/** Puts a shot in its place in a run, and counts anew. */
export function withShot(run: RunDetail, shot: ShotRow): RunDetail {
  const known = run.shotList.some((s) => s.id === shot.id);
  const shotList = known
    ? run.shotList.map((s) => (s.id === shot.id ? shot : s))
    : [...run.shotList, shot];
  const count = (state: ShotRow['state']) => shotList.filter((s) => s.state === state).length;
  return {
    ...run,
    shotList,
    shots: shotList.length,
    done: count('done'),
    failed: count('failed'),
  };
}

/** After this many breaks in a row the page asks instead of listening. */
const patience = 3;

/** Listens to a run's events and keeps the query cache true. Returns whether the page must poll instead. */
export function useRunEvents(runId: string): boolean {
  const client = useQueryClient();
  const [poll, setPoll] = useState(false);
  useEffect(() => {
    const source = new EventSource(`/api/runs/${runId}/events`);
    let breaks = 0;
    source.onopen = () => {
      breaks = 0;
    };
    source.addEventListener('shot', (event: MessageEvent<string>) => {
      const shot = JSON.parse(event.data) as ShotRow;
      client.setQueryData<RunDetail>(['run', runId], (run) => run && withShot(run, shot));
      if (shot.state === 'done' || shot.state === 'failed')
        void client.invalidateQueries({ queryKey: ['shot', shot.id] });
    });
    source.addEventListener('run', () => {
      void client.invalidateQueries({ queryKey: ['run', runId] });
    });
    source.onerror = () => {
      breaks++;
      if (breaks < patience && source.readyState !== EventSource.CLOSED) return;
      source.close();
      setPoll(true);
    };
    return () => source.close();
  }, [runId, client]);
  return poll;
}
