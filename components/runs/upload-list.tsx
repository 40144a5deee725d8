'use client';

import { useEffect, useRef, useState } from 'react';
import { Button } from '@/components/ui/button';
import { Progress } from '@/components/ui/progress';
import { secondsLeft } from '@/lib/client/files';
import { about, bytes } from '@/lib/client/format';
import type { Upload, UploadQueue } from '@/lib/client/uploads';

/** How far the files have come, each and all; what was refused says why and stays until it is cleared. */
export function UploadList({
  uploads,
  busy,
  queue,
}: {
  uploads: readonly Upload[];
  busy: boolean;
  queue: UploadQueue;
}) {
  const counted = uploads.filter((u) => u.stage !== 'refused' && u.stage !== 'failed');
  const total = counted.reduce((sum, u) => sum + u.bytes, 0);
  const sent = counted.reduce((sum, u) => sum + u.sent, 0);
  const left = useTimeLeft(busy, sent, total);
  const open = uploads.filter((u) => u.stage !== 'done');
  const done = uploads.filter((u) => u.stage === 'done').length;
  const known = uploads.filter((u) => u.known).length;
  if (open.length === 0) return null;
  return (
    <section aria-label="Uploads" className="mb-4 grid gap-2">
      {busy ? (
        <Progress
          value={total === 0 ? 0 : sent / total}
          label={`${done} of ${counted.length} files sent, ${bytes(sent)} of ${bytes(total)}`}
          note={left === null ? undefined : about(left)}
        />
      ) : null}
      {known > 0 && busy ? (
        <p className="label">{known} were here already and are not sent again.</p>
      ) : null}
      <ul className="grid gap-x-6 sm:grid-cols-2">
        {open.slice(0, 12).map((upload) => (
          <UploadRow key={upload.id} upload={upload} onRetry={() => queue.retry(upload.id)} />
        ))}
      </ul>
      {open.length > 12 ? <p className="label">and {open.length - 12} more files</p> : null}
      {busy ? null : (
        <div>
          <Button variant="quiet" size="small" onClick={() => queue.clear()}>
            Clear the list
          </Button>
        </div>
      )}
    </section>
  );
}

function UploadRow({ upload, onRetry }: { upload: Upload; onRetry: () => void }) {
  const { name, stage, message, sent, bytes: size } = upload;
  const wrong = stage === 'refused' || stage === 'failed';
  return (
    <li className="border-line-2 border-t py-2">
      <div className="flex items-baseline justify-between gap-3">
        <span className="min-w-0 truncate font-mono text-[13px]">{name}</span>
        <span className="label shrink-0">{wrong ? 'not taken' : words[stage]}</span>
      </div>
      {stage === 'sending' ? (
        <Progress
          quiet
          value={sent / Math.max(1, size)}
          label={`${name} sent`}
          className="mt-1.5"
        />
      ) : null}
      {wrong ? (
        <p
          role="alert"
          className="mt-0.5 flex items-baseline justify-between gap-3 text-[14px] text-light-ink"
        >
          {message}
          {stage === 'failed' ? (
            <Button variant="quiet" size="small" onClick={onRetry}>
              Try again
            </Button>
          ) : null}
        </p>
      ) : null}
    </li>
  );
}

const words: Record<Upload['stage'], string> = {
  waiting: 'waits',
  reading: 'reading',
  sending: 'sending',
  done: 'sent',
  refused: 'not taken',
  failed: 'not taken',
};

/** Seconds left at the pace since sending began. */
function useTimeLeft(busy: boolean, sent: number, total: number): number | null {
  const began = useRef<number | null>(null);
  const [left, setLeft] = useState<number | null>(null);
  useEffect(() => {
    if (!busy) began.current = null;
    else began.current ??= performance.now();
    setLeft(
      began.current === null ? null : secondsLeft(sent, total, performance.now() - began.current),
    );
  }, [busy, sent, total]);
  return left;
}
