import type { ShotRow } from '@/lib/shared/api';

/** The newest measured shot of the target: the one that a run's pictures are drawn from. */
export const newestTarget = (shots: readonly ShotRow[]): ShotRow | undefined =>
  shots.filter((shot) => shot.state === 'done' && shot.kind === 'target').at(-1);
