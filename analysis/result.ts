import type { Capture, Point } from './image.ts';

export type Kind = 'target' | 'grey' | 'flat' | 'dark' | 'ladder' | 'lag' | 'scene';
export type Shape = '4x3' | '3x2';
export type Edge = 'vertical' | 'horizontal';

export interface Metric {
  /** A name of `quantities.ts`. */
  name: string;
  /** Station id (C, N, … inner-SE) or a group of stations: centre, partway, corners. Absent for the whole frame. */
  zone?: string;
  edge?: Edge;
  value: number;
  unit: string;
  /** Standard uncertainty, k = 1, from this photograph alone. */
  uncertainty: number;
  /** fringe.red and fringe.blue by station: displacement across the radius, px, + clockwise as seen. */
  tangential?: number;
  /** sharpness.mtf50: the same in line widths per picture height, 2 · f · H. */
  lwph?: number;
}

export interface Warning {
  /** kebab-case, stable. */
  code: string;
  /** What it means and what to do, one or two sentences. */
  message: string;
  zone?: string;
}

/** The part of the registration that the command prints. */
export interface RegistrationSummary {
  target: Shape;
  /** Root mean square distance of the found corners from the fitted model, px. */
  residual: number;
  /** Clockwise as seen, -180…180. */
  rotation: number;
  /** Share of the target's height in the frame's height as framed: area of the target inside the frame over the frame's area, 0…1. */
  coverage: number;
  rings: Record<string, [number, number]>;
}

/** Data for drawings, small enough to store beside the metrics. */
export interface Plots {
  /** 64 bins of code luminance over the whole frame, shares that add to 1. */
  histogram: number[];
  histogramByChannel: { red: number[]; green: number[]; blue: number[] };
  /** The target's outline in image pixels (a closed polygon along the distorted border). */
  outline?: Point[];
  stations?: StationPlot[];
  /** One entry a grey disc: reflectance as printed, mean code 0…1 of full scale, clipped or not. */
  tone?: { id: string; reflectance: number; code: number; used: boolean }[];
  colours?: ColourPlot[];
  /** Where each disc lies in the image, for the overlay. */
  discs?: { id: string; x: number; y: number; radius: number }[];
  /** Light in EV against the centre on a grid over the frame, row-major. */
  shading?: { columns: number; rows: number; ev: number[] };
  /** Dust or hot pixels, the most conspicuous first: place and diameter in px, contrast in % (of the light about it; of full scale). */
  spots?: { x: number; y: number; diameter: number; contrast: number }[];
  /** Dominant colours as #rrggbb, the most frequent first, with their shares; scatter: rms distance of pixels from them, codes of 255. */
  palette?: { colours: { colour: string; share: number }[]; scatter: number };
  /** Kind ladder: each unclipped grey's reflectance times the light at its place, and the linear luminance that came out. */
  greys?: { light: number; luminance: number; uncertainty: number }[];
  /** Kind lag: what the timing page says, ms, and how many of the screen's frames the exposure lasted. */
  timing?: { frameTime: number; elapsed: number; exposureFrames: number };
}

export interface StationPlot {
  id: string;
  /** Centre of the station in image pixels. */
  x: number;
  y: number;
  radius: number;
  /** Corners of the square in image pixels, in order round the square. */
  corners: Point[];
  /** SFR of each usable edge: response at `frequency` (cy/px along the edge normal). */
  curves: { edge: Edge; frequency: number[]; response: number[] }[];
  /** Geometric mean mtf50 of the station's edges, cy/px, or null. */
  mtf50: number | null;
  /** Displacement in px, x right and y down, of the red and blue image against green. */
  red: Point | null;
  blue: Point | null;
}

export interface ColourPlot {
  id: string;
  kind: 'hue' | 'vivid' | 'memory' | 'grey';
  /** CIELAB D50. */
  reference: [number, number, number];
  measured: [number, number, number];
  deltaE2000: number;
  /** Measured and reference colours as sRGB 0…255, for painting. */
  measuredRgb: [number, number, number];
  referenceRgb: [number, number, number];
  clipped: boolean;
}

export interface Analysis {
  /** Version of the measuring code; raised whenever a number can change. */
  version: string;
  kind: Kind;
  /** How surely the kind was told from the picture, 0…1; absent when it was given. */
  kindConfidence?: number;
  width: number;
  height: number;
  capture: Capture;
  registration?: RegistrationSummary;
  metrics: Metric[];
  warnings: Warning[];
  milliseconds: { decode: number; register: number; measure: number; total: number };
  plots: Plots;
}

/** What several photographs give together: a ladder, a series of shots of the timing page. */
export interface GroupResult {
  metrics: Metric[];
  warnings: Warning[];
}
