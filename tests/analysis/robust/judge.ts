import { analyseBytes } from '../../../analysis/analyse-bytes.ts';
import type { Analysis, Metric } from '../../../analysis/result.ts';
import type { ScenePlan } from '../../../fixtures/scene/plan.ts';
import { renderSpoiled, type Spoil } from '../../../fixtures/scene/spoil.ts';
import type { SceneTruth } from '../../../fixtures/scene/truth.ts';

/** A sound photograph, of a size that is quick to measure. */
export const sound: ScenePlan = {
  width: 1600,
  height: 1200,
  fill: 0.92,
  rotationDegrees: 1,
  snrDb: 38,
  blurSigma: 0.7,
  format: { type: 'jpeg', quality: 95, subsampling: '4:4:4' },
};

export interface Spoiled {
  readonly analysis: Analysis;
  readonly truth: SceneTruth;
  readonly codes: readonly string[];
  message(code: string): string;
  find(name: string, zone?: string, edge?: string): Metric | undefined;
}

export async function photograph(
  plan: ScenePlan = {},
  spoils: readonly Spoil[] = [],
): Promise<Spoiled> {
  const { bytes, truth } = await renderSpoiled({ ...sound, ...plan }, spoils);
  const analysis = await analyseBytes(bytes, { kind: 'target' });
  return {
    analysis,
    truth,
    codes: analysis.warnings.map((w) => w.code),
    message: (code) => analysis.warnings.find((w) => w.code === code)?.message ?? '',
    find: (name, zone, edge) =>
      analysis.metrics.find((m) => m.name === name && m.zone === zone && m.edge === edge),
  };
}

/** Quantities whose truth the renderer knows, still reported and further from it than three of their own uncertainties. */
export function confidentlyWrong(
  { analysis, truth }: Spoiled,
  options: {
    /** mtf50 that the fault has changed for the whole picture; by default the plan's own at each station. */
    mtf50?: (zone: string, edge: 'vertical' | 'horizontal') => number;
    /** Names that the fault has truly changed, so that the plan's truth doesn't hold. */
    except?: readonly string[];
  } = {},
): string[] {
  const { except = [] } = options;
  const whole: Record<string, number> = {
    'exposure.bias': truth.exposureBias,
    'tone.contrast': truth.toneContrast,
    'colour.saturation': truth.saturation,
    'shading.corner': truth.shadingCorner,
    'fringe.redScale': truth.redScale,
    'fringe.blueScale': truth.blueScale,
    'distortion.corner': truth.distortionCorner,
  };
  return analysis.metrics.flatMap((metric) => {
    const { name, zone, edge, value, uncertainty } = metric;
    if (except.includes(name)) return [];
    const station = truth.stations.find(({ id }) => id === zone);
    const planted =
      name === 'sharpness.mtf50' && edge && station
        ? (options.mtf50?.(station.id, edge) ?? station[edge].mtf50)
        : zone === undefined
          ? whole[name]
          : undefined;
    if (planted === undefined) return [];
    const off = (value - planted) / uncertainty;
    const at = `${name} ${zone ?? ''} ${edge ?? ''}`.trim();
    return Math.abs(off) > 3 ? [`${at}: ${value} ± ${uncertainty} for ${planted}`] : [];
  });
}
