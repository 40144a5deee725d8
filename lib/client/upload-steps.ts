import type { ShotRow } from '@/lib/shared/api';
import { ApiError, call, problemOf } from './api';
import { hashFile } from './hash';
import type { UploadSteps } from './uploads';

const original = (sha256: string) => `/api/uploads/${sha256}`;

async function known(sha256: string): Promise<boolean> {
  const response = await fetch(original(sha256), { method: 'HEAD' }).catch(() => {
    throw new ApiError(0, 'The connection broke.');
  });
  if (response.ok) return true;
  if (response.status === 404) return false;
  throw problemOf(response.status, '');
}

/** XMLHttpRequest, because fetch does not tell how much of a body has gone. */
function put(
  sha256: string,
  file: File,
  progress: (sent: number) => void,
  signal: AbortSignal,
): Promise<void> {
  return new Promise((resolve, reject) => {
    const request = new XMLHttpRequest();
    const stop = () => request.abort();
    signal.addEventListener('abort', stop, { once: true });
    request.open('PUT', original(sha256));
    request.setRequestHeader('content-type', 'application/octet-stream');
    request.upload.onprogress = (event) => progress(event.loaded);
    request.onload = () =>
      request.status < 300 ? resolve() : reject(problemOf(request.status, request.responseText));
    request.onerror = () => reject(new ApiError(0, 'The connection broke. Try again.'));
    request.onabort = () => reject(new ApiError(0, 'Stopped.'));
    request.onloadend = () => signal.removeEventListener('abort', stop);
    request.send(file);
  });
}

export function uploadStepsFor(runId: string): UploadSteps {
  return {
    hash: hashFile,
    known,
    put,
    add: (sha256, name) => call<ShotRow>(`/api/runs/${runId}/shots`, 'POST', { sha256, name }),
    wait: (milliseconds) => new Promise((resolve) => setTimeout(resolve, milliseconds)),
  };
}
