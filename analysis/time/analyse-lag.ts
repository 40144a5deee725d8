import { measureClipping, measureMedian } from '../exposure/measure-exposure.ts';
import { measureFrame } from '../exposure/measure-frame.ts';
import type { Capture, Frame } from '../image.ts';
import type { Analysis, Warning } from '../result.ts';
import { shotLag } from './lag.ts';
import { readTimingPage } from './read-timing-page.ts';
import { exactTime } from './series.ts';

/**
 * One photograph of the timing page: lag.shutter, ms, by this photograph alone.
 * @throws MeasurementError no-timing-page, timing-page-unclear
 */
export function analyseLag(
  frame: Frame,
  capture: Capture,
): Pick<Analysis, 'metrics' | 'warnings' | 'plots'> {
  const { exposureTime } = capture;
  const timing = readTimingPage(frame, exposureTime === null ? null : exactTime(exposureTime));
  const frameLight = measureFrame(frame);
  const { histogram, histogramByChannel } = frameLight;
  return {
    metrics: [shotLag(timing), measureMedian(frameLight, null), ...measureClipping(frameLight)],
    warnings: timing.exposureFrames > longExposure ? [smeared] : [],
    plots: { histogram, histogramByChannel, timing },
  };
}

/** In frames of the screen: over this, half a frame is no longer surely told. */
const longExposure = 6;

const smeared: Warning = {
  code: 'lag-long-exposure',
  message:
    'The exposure lasted many frames of the screen, so that its start is less sure. Use more light or a higher ISO for a shorter time.',
};
