'use client';

import { useEffect, useState, useSyncExternalStore } from 'react';
import type { ShotRow } from '@/lib/shared/api';
import { uploadStepsFor } from './upload-steps';
import { type Upload, UploadQueue } from './uploads';

const none: readonly Upload[] = [];

/** The uploads of one run, and how much of them is left. */
export function useUploads(runId: string, added: (shot: ShotRow) => void) {
  const [queue] = useState(() => new UploadQueue(uploadStepsFor(runId), added));
  const uploads = useSyncExternalStore(queue.subscribe, queue.snapshot, () => none);
  const busy = uploads.some((u) => ['waiting', 'reading', 'sending'].includes(u.stage));
  useEffect(() => {
    if (!busy) return;
    const ask = (event: BeforeUnloadEvent) => event.preventDefault();
    window.addEventListener('beforeunload', ask);
    return () => window.removeEventListener('beforeunload', ask);
  }, [busy]);
  return { uploads, busy, queue };
}
