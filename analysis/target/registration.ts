import type { Point } from '../image.ts';
import type { RegistrationSummary } from '../result.ts';
import type { Target } from './target.ts';

/** Where the target lies in the picture: a smooth map from target units to image pixels and back, and what it was fitted to. */
export interface Registration {
  readonly target: Target;
  readonly summary: RegistrationSummary;
  /** Target units → image pixels. Smooth over the whole target, also outside the frame. */
  toImage(x: number, y: number): Point;
  /** Image pixels → target units. */
  toTarget(x: number, y: number): Point;
  /** Row-major [∂px/∂u, ∂px/∂v, ∂py/∂u, ∂py/∂v] at a target point: local scale, rotation and shear. */
  jacobian(x: number, y: number): readonly [number, number, number, number];
  /**
   * The four refined corners of each station's square that lies wholly in the frame, in the target's order: starting at the corner
   * that is top-left in the unrotated square, clockwise in target space. Measured in the green channel.
   */
  readonly corners: ReadonlyMap<string, readonly Point[]>;
  /** Radial displacement of the field's corners against the centre's scale, %, negative is barrel (ISO 17850), with its standard uncertainty. */
  readonly distortion: { readonly corner: number; readonly uncertainty: number };
}
