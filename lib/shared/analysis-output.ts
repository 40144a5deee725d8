import { z } from 'zod';
import type { Analysis, GroupResult, Metric } from '@/analysis/result';

/** One line of the analyse command; its fields are promised to whoever reads it by machine. */
const text = z.string().nullable();
const number = z.number().nullable();
const shapes = z.enum(['4x3', '3x2']);

export const captureOutputSchema = z.strictObject({
  make: text,
  model: text,
  serial: text,
  exposureTime: number,
  fNumber: number,
  iso: number,
  exposureBias: number,
  focalLength: number,
  takenAt: text,
  program: text,
});

export const metricOutputSchema = z.strictObject({
  name: z.string(),
  zone: z.string().optional(),
  edge: z.enum(['vertical', 'horizontal']).optional(),
  value: z.number(),
  unit: z.string(),
  uncertainty: z.number().min(0),
  tangential: z.number().optional(),
  lwph: z.number().optional(),
});

/** The one metric whose value is a list: colours as #rrggbb; its uncertainty is how far, in codes of 255, pixels lie from them (rms). */
export const paletteOutputSchema = z.strictObject({
  name: z.literal('scene.palette'),
  value: z.array(z.string().regex(/^#[0-9a-f]{6}$/)).min(1),
  unit: z.literal('sRGB'),
  uncertainty: z.number().min(0),
});

export const warningOutputSchema = z.strictObject({
  code: z.string().regex(/^[a-z0-9]+(-[a-z0-9]+)*$/),
  message: z.string(),
  zone: z.string().optional(),
});

export const analysisOutputSchema = z.strictObject({
  file: z.string(),
  kind: z.enum(['target', 'grey', 'flat', 'dark', 'ladder', 'lag', 'scene']),
  /** How surely the kind was told; only where it wasn't given. */
  kindConfidence: z.number().min(0).max(1).optional(),
  width: z.int(),
  height: z.int(),
  capture: captureOutputSchema,
  registration: z
    .strictObject({
      target: shapes,
      residual: z.number().min(0),
      rotation: z.number().min(-180).max(180),
      coverage: z.number().min(0).max(1),
      rings: z.record(z.string(), z.tuple([z.number(), z.number()])),
    })
    .optional(),
  metrics: z.array(z.union([metricOutputSchema, paletteOutputSchema])),
  warnings: z.array(warningOutputSchema),
  milliseconds: z.strictObject({
    decode: z.number(),
    register: z.number(),
    measure: z.number(),
    total: z.number(),
  }),
});
export const failureOutputSchema = z.strictObject({
  file: z.string(),
  error: z.strictObject({ code: z.string(), message: z.string() }),
});
/** What a ladder's files, or those of the timing page, give together: one line after theirs. */
export const groupOutputSchema = z.strictObject({
  group: z.enum(['ladder', 'lag']),
  files: z.array(z.string()),
  metrics: z.array(metricOutputSchema),
  warnings: z.array(warningOutputSchema),
});
export type AnalysisOutput = z.infer<typeof analysisOutputSchema>;
export type FailureOutput = z.infer<typeof failureOutputSchema>;
export type GroupOutput = z.infer<typeof groupOutputSchema>;

/** The part of an analysis that the command prints: no drawings' data, numbers rounded to what they can mean. */
export function toAnalysisOutput(file: string, analysis: Analysis): AnalysisOutput {
  const { kind, kindConfidence, width, height, capture, registration, warnings, milliseconds } =
    analysis;
  const { flash: _flash, software: _software, ...rest } = capture;
  return {
    file,
    kind,
    ...(kindConfidence === undefined ? {} : { kindConfidence: roundHundredth(kindConfidence) }),
    width,
    height,
    capture: rest,
    ...(registration ? { registration } : {}),
    metrics: [...analysis.metrics.map(roundMetric), ...paletteOf(analysis)],
    warnings,
    milliseconds: {
      decode: roundTenth(milliseconds.decode),
      register: roundTenth(milliseconds.register),
      measure: roundTenth(milliseconds.measure),
      total: roundTenth(milliseconds.total),
    },
  };
}

/** @param files the ones that could be measured */
export function toGroupOutput(
  group: GroupOutput['group'],
  files: string[],
  result: GroupResult,
): GroupOutput {
  return { group, files, metrics: result.metrics.map(roundMetric), warnings: result.warnings };
}

function paletteOf({ plots }: Analysis): z.infer<typeof paletteOutputSchema>[] {
  if (!plots.palette) return [];
  const { colours, scatter } = plots.palette;
  return [
    {
      name: 'scene.palette',
      value: colours.map(({ colour }) => colour),
      unit: 'sRGB',
      uncertainty: roundTenth(scatter),
    },
  ];
}

function roundMetric(metric: Metric): Metric {
  const { value, uncertainty, tangential, lwph } = metric;
  return {
    ...metric,
    value: roundSix(value),
    uncertainty: roundSix(uncertainty),
    ...(tangential === undefined ? {} : { tangential: roundSix(tangential) }),
    ...(lwph === undefined ? {} : { lwph: roundSix(lwph) }),
  };
}

/** Six significant digits: well below any uncertainty. */
function roundSix(value: number): number {
  return Number(value.toPrecision(6));
}

function roundHundredth(value: number): number {
  return Math.round(value * 100) / 100;
}

function roundTenth(value: number): number {
  return Math.round(value * 10) / 10;
}
