import type { Shape } from '../result.ts';
import target3x2 from './target-3x2.json' with { type: 'json' };
import target4x3 from './target-4x3.json' with { type: 'json' };

/** The printed target's geometry and nominal colours, in target units (see target JSON and ../README.md). */
export interface Target {
  readonly name: Shape;
  readonly version: number;
  readonly width: number;
  readonly height: number;
  readonly background: { readonly reflectance: number };
  readonly station: {
    readonly padRadius: number;
    readonly squareSide: number;
    readonly rotationDegrees: number;
    readonly pad: { readonly reflectance: number };
    readonly square: { readonly reflectance: number };
  };
  readonly stations: readonly { readonly id: string; readonly x: number; readonly y: number }[];
  readonly ring: {
    readonly discRadius: number;
    readonly outer: readonly number[];
    readonly dotRadius: number;
    readonly light: { readonly reflectance: number };
    readonly dark: { readonly reflectance: number };
  };
  readonly rings: readonly { readonly id: string; readonly x: number; readonly y: number }[];
  readonly discs: readonly Disc[];
  readonly plain: readonly { readonly x: number; readonly y: number; readonly radius: number }[];
  readonly qr: { readonly x: number; readonly y: number; readonly side: number };
  readonly unitSlip: { readonly x: number; readonly y: number; readonly side: number };
  readonly ruler: {
    readonly x: number;
    readonly y: number;
    readonly width: number;
    readonly height: number;
  };
  readonly caption: {
    readonly x: number;
    readonly y: number;
    readonly width: number;
    readonly height: number;
  };
  readonly print: Readonly<Record<string, { readonly mmPerUnit: number }>>;
  readonly meanReflectance: number;
}

export interface Disc {
  readonly id: string;
  readonly kind: string;
  readonly x: number;
  readonly y: number;
  readonly radius: number;
  /** CIELAB, D50. */
  readonly lab: readonly number[];
  readonly linearSrgb: readonly number[];
  readonly srgb8: readonly number[];
  readonly reflectance?: number;
}

export const targets: Readonly<Record<Shape, Target>> = {
  '4x3': target4x3 as unknown as Target,
  '3x2': target3x2 as unknown as Target,
};
