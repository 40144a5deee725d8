import type { Registration } from '@/analysis/target/registration';
import { targets } from '@/analysis/target/target';
import type { SceneTruth } from '@/fixtures/scene/truth';

/** The registration that a perfect search would find: the planted geometry itself, so that colour and tone are tested alone. */
export function plantedRegistration(truth: SceneTruth, shape: '4x3' | '3x2' = '4x3'): Registration {
  const at = (x: number, y: number) => {
    const [px, py] = truth.toImage(x, y);
    return { x: px, y: py };
  };
  return {
    target: targets[shape],
    summary: { target: shape, residual: 0, rotation: 0, coverage: 1, rings: truth.rings },
    toImage: at,
    toTarget: () => {
      throw new Error('not needed here');
    },
    jacobian: (x, y) => {
      const [a, b, c, d] = [at(x + 1, y), at(x - 1, y), at(x, y + 1), at(x, y - 1)];
      return [(a.x - b.x) / 2, (c.x - d.x) / 2, (a.y - b.y) / 2, (c.y - d.y) / 2];
    },
    corners: new Map(),
    distortion: { corner: 0, uncertainty: 0 },
  };
}
