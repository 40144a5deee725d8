import sharp from 'sharp';
import { analyseBytes } from '@/analysis/analyse-bytes';
import { MeasurementError } from '@/analysis/errors';
import type { Analysis, Kind } from '@/analysis/result';
import { derivePictures, type Picture } from './pictures';

/** Runs in a worker thread. It knows the photograph only: no database, no store, no settings. */
export interface Task {
  bytes: Uint8Array<ArrayBuffer>;
  kind: Kind | 'auto';
}
export type Answer =
  | { ok: true; analysis: Analysis; pictures: Picture[] }
  /** The photograph can't be measured, and trying again would not help. */
  | { ok: false; reason: string };

// One photograph, one core: as many photographs are worked on as there are threads.
sharp.concurrency(1);

export default async function analyseShot({ bytes, kind }: Task): Promise<Answer> {
  try {
    const analysis = await analyseBytes(bytes, { kind });
    return { ok: true, analysis, pictures: await derivePictures(bytes, analysis.plots) };
  } catch (error) {
    if (error instanceof MeasurementError) return { ok: false, reason: error.message };
    throw error;
  }
}
