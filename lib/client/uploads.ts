import type { ShotRow } from '@/lib/shared/api';
import { ApiError, sentenceOf } from './api';
import { refusalOf } from './files';

export type UploadStage = 'waiting' | 'reading' | 'sending' | 'done' | 'refused' | 'failed';
export interface Upload {
  id: string;
  name: string;
  bytes: number;
  sent: number;
  stage: UploadStage;
  /** The shop had this original already; nothing was sent. */
  known: boolean;
  /** One sentence when refused or failed. */
  message: string | null;
}

/** What an upload does, in order; handed in so that a test can hold the network. */
export interface UploadSteps {
  hash(file: File, signal: AbortSignal): Promise<string>;
  known(sha256: string): Promise<boolean>;
  put(
    sha256: string,
    file: File,
    progress: (sent: number) => void,
    signal: AbortSignal,
  ): Promise<void>;
  add(sha256: string, name: string): Promise<ShotRow>;
  wait(milliseconds: number): Promise<void>;
}

/** A break in the line is tried again after these pauses before a person is asked. */
const pauses = [1000, 4000];
const passing = (error: unknown) =>
  error instanceof ApiError && (error.status === 0 || error.status >= 500 || error.status === 429);

/** The file itself is the matter: sending it again would end the same. */
const final = (error: unknown) =>
  error instanceof ApiError && (error.status === 413 || error.status === 415);

/** Sends many files, a few at a time. A file that fails leaves the others alone and can be tried again. */
export class UploadQueue {
  private list: readonly Upload[] = [];
  private readonly files = new Map<string, File>();
  private readonly listeners = new Set<() => void>();
  /** Two copies of one picture in a drop are sent once. */
  private readonly sending = new Map<string, Promise<void>>();
  private readonly abort = new AbortController();
  private readonly steps: UploadSteps;
  private readonly added: (shot: ShotRow) => void;
  private readonly parallel: number;
  private running = 0;
  private count = 0;

  constructor(steps: UploadSteps, added: (shot: ShotRow) => void, parallel = 3) {
    this.steps = steps;
    this.added = added;
    this.parallel = parallel;
  }

  subscribe = (listener: () => void) => {
    this.listeners.add(listener);
    return () => this.listeners.delete(listener);
  };
  snapshot = () => this.list;

  add(files: readonly File[]): void {
    const fresh = files.map((file): Upload => {
      const id = String(this.count++);
      const message = refusalOf(file.name, file.size);
      this.files.set(id, file);
      const stage = message ? 'refused' : 'waiting';
      return { id, name: file.name, bytes: file.size, sent: 0, stage, known: false, message };
    });
    this.publish([...this.list, ...fresh]);
    this.pump();
  }

  retry(id: string): void {
    this.change(id, { stage: 'waiting', message: null, sent: 0 });
    this.pump();
  }

  /** Takes what is over off the list. */
  clear(): void {
    const over = new Set<UploadStage>(['done', 'refused', 'failed']);
    this.publish(this.list.filter((upload) => !over.has(upload.stage)));
  }

  stop(): void {
    this.abort.abort();
  }

  private pump(): void {
    while (this.running < this.parallel) {
      const next = this.list.find((upload) => upload.stage === 'waiting');
      const file = next && this.files.get(next.id);
      if (!next || !file) return;
      this.running++;
      this.change(next.id, { stage: 'reading' });
      void this.send(next.id, file).finally(() => {
        this.running--;
        if (!this.abort.signal.aborted) this.pump();
      });
    }
  }

  private async send(id: string, file: File): Promise<void> {
    try {
      const sha256 = await this.steps.hash(file, this.abort.signal);
      const known = await this.patiently(() => this.steps.known(sha256));
      this.change(id, { stage: 'sending', known, sent: known ? file.size : 0 });
      if (!known) await this.patiently(() => this.putOnce(sha256, id, file));
      const shot = await this.patiently(() => this.steps.add(sha256, file.name));
      this.change(id, { stage: 'done', sent: file.size });
      this.files.delete(id);
      this.added(shot);
    } catch (error) {
      if (this.abort.signal.aborted) return;
      const stage = final(error) ? 'refused' : 'failed';
      this.change(id, { stage, message: sentenceOf(error), sent: 0 });
    }
  }

  private putOnce(sha256: string, id: string, file: File): Promise<void> {
    const under = this.sending.get(sha256);
    if (under) return under;
    const put = this.steps
      .put(sha256, file, (sent) => this.change(id, { sent }), this.abort.signal)
      .finally(() => this.sending.delete(sha256));
    this.sending.set(sha256, put);
    return put;
  }

  private async patiently<T>(step: () => Promise<T>): Promise<T> {
    for (const pause of pauses) {
      try {
        return await step();
      } catch (error) {
        if (!passing(error) || this.abort.signal.aborted) throw error;
        await this.steps.wait(pause);
      }
    }
    return step();
  }

  private change(id: string, part: Partial<Upload>): void {
    this.publish(this.list.map((upload) => (upload.id === id ? { ...upload, ...part } : upload)));
  }

  private publish(list: readonly Upload[]): void {
    this.list = list;
    for (const listener of this.listeners) listener();
  }
}
