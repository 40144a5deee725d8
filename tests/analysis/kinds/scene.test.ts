import { converter } from 'culori';
import { describe, expect, test } from 'vitest';
import { analyseBytes } from '@/analysis/analyse-bytes';
import { decode } from '@/analysis/decode';
import { measureScene } from '@/analysis/kinds/measure-scene';
import { renderFlat, renderFree } from '@/fixtures/scene/flat';
import type { ScenePlan } from '@/fixtures/scene/plan';
import { toAnalysisOutput } from '@/lib/shared/analysis-output';

const size = { width: 1600, height: 1200 };

async function measure(plan: ScenePlan, render = renderFree) {
  const { bytes } = await render({ ...size, ...plan });
  const { frame } = await decode(bytes);
  const result = measureScene(frame);
  const find = (name: string) => result.metrics.find((m) => m.name === name)!;
  return { ...result, frame, find };
}

describe('estimates from natural edges', () => {
  // Truth: a Gaussian of deviation σ rises from 10 to 90 % over 2 · 1.28155 σ.
  test.each([0.7, 1.1, 1.8])(
    'rise of edges blurred by σ %d px comes back within 12 %',
    async (blurSigma) => {
      const truth = 2 * 1.28155 * blurSigma;
      const { find } = await measure({ blurSigma, snrDb: 38 });
      expect(Math.abs(find('scene.rise').value / truth - 1)).toBeLessThan(0.12);
    },
  );

  // Truth by construction: the planted magnifications.
  test.each([
    { redScalePermille: 0.8, blueScalePermille: -0.6, snrDb: 40, seed: 1 },
    { redScalePermille: -1.2, blueScalePermille: 0.5, snrDb: 36, seed: 2 },
    { redScalePermille: 0, blueScalePermille: 0, snrDb: 36, seed: 3 },
    {
      redScalePermille: -0.5,
      blueScalePermille: 1,
      snrDb: 34,
      seed: 4,
      format: { type: 'jpeg', quality: 90, subsampling: '4:2:0' },
    },
  ] as ScenePlan[])('magnifications come back within 3 u: %j', async (plan) => {
    const { find } = await measure({ ...plan, blurSigma: 0.9 });
    for (const [name, truth] of [
      ['scene.fringeRed', plan.redScalePermille],
      ['scene.fringeBlue', plan.blueScalePermille],
    ] as const) {
      const { value, uncertainty } = find(name);
      expect(Math.abs(value - truth!), `${name} ${value} ± ${uncertainty}`).toBeLessThan(
        3 * uncertainty,
      );
    }
  });

  test('a picture without edges gives none, and says so', async () => {
    const { metrics, warnings } = await measure({ snrDb: 36 }, renderFlat);
    expect(metrics.map(({ name }) => name)).toEqual(['scene.chroma']);
    expect(warnings.map(({ code }) => code)).toEqual(['estimate', 'few-edges']);
  });
});

describe('colours of a picture', () => {
  // Independent implementation: culori's CIELAB (D50) of every tenth pixel as stored.
  test('mean chroma agrees with culori’s', async () => {
    const { frame, find } = await measure({ blurSigma: 1, format: { type: 'png' } });
    const toLab = converter('lab');
    let sum = 0;
    let count = 0;
    for (let i = 0; i < frame.data.length; i += 3 * 10) {
      const [r, g, b] = [0, 1, 2].map((c) => frame.data[i + c]! / 255) as [number, number, number];
      const lab = toLab({ mode: 'rgb', r, g, b });
      sum += Math.hypot(lab.a, lab.b);
      count++;
    }
    const { value, uncertainty } = find('scene.chroma');
    expect(Math.abs(value - sum / count)).toBeLessThan(2 * uncertainty);
  });

  // Truth by construction: a plain picture has one colour.
  test('the palette of a plain surface is its colour', async () => {
    const { plots, frame } = await measure(
      { whiteGains: [1.2, 1, 0.7], format: { type: 'png' } },
      renderFlat,
    );
    const hex = [0, 1, 2].map((c) => frame.data[c]!.toString(16).padStart(2, '0')).join('');
    expect(plots.palette?.colours).toEqual([{ colour: `#${hex}`, share: 1 }]);
  });

  test('the command prints the palette as a metric whose value is a list', async () => {
    const { bytes } = await renderFree({ width: 800, height: 600 });
    const analysis = await analyseBytes(bytes, { kind: 'scene' });
    const metric = toAnalysisOutput('a.jpg', analysis).metrics.find(
      ({ name }) => name === 'scene.palette',
    );
    expect(metric?.unit).toBe('sRGB');
    expect(metric?.value).toEqual(analysis.plots.palette?.colours.map(({ colour }) => colour));
  });
});
