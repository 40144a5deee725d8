import { expect, test } from 'vitest';
import { measureFringes } from '@/analysis/chromatic/measure-fringes';
import { traceEdges } from '@/analysis/edge/trace-edges';
import { measureSharpness } from '@/analysis/sharpness/measure-sharpness';
import type { ScenePlan } from '@/fixtures/scene/plan';
import { renderScene } from '@/fixtures/scene/render';
import { decodeFrame, truthRegistration } from './truth-registration';

// Halved chroma leaks into green (JFIF, ITU-T T.871); the planted blur is the same in all channels, so the truth is one number.
test('strong colour fringes in a 4:2:0 JPEG leave mtf50 within 3 %, and within 1 % on average', async () => {
  const plan: ScenePlan = {
    width: 1600,
    height: 1200,
    fill: 0.94,
    rotationDegrees: 1.1,
    blurSigma: 0.6,
    redScalePermille: 0.9,
    blueScalePermille: -0.8,
    redShift: [0.2, 0],
    snrDb: 42,
    format: { type: 'jpeg', quality: 95, subsampling: '4:2:0' },
  };
  const { bytes, truth } = await renderScene(plan);
  const frame = await decodeFrame(bytes);
  const registration = truthRegistration(truth);
  const traces = traceEdges(frame, registration, frame.toLinear);
  const fringes = measureFringes(frame, registration, traces, true);
  const { metrics } = measureSharpness(frame, registration, traces, fringes);
  const errors = truth.stations.flatMap((station) =>
    (['vertical', 'horizontal'] as const).map((edge) => {
      const found = metrics.find(
        (m) => m.name === 'sharpness.mtf50' && m.zone === station.id && m.edge === edge,
      );
      return (found?.value ?? 0) / station[edge].mtf50 - 1;
    }),
  );
  const mean = errors.reduce((sum, e) => sum + e, 0) / errors.length;
  const within = errors.filter((e) => Math.abs(e) < 0.03).length / errors.length;
  expect(Math.abs(mean)).toBeLessThan(0.01);
  expect(within).toBeGreaterThan(0.95);
});
