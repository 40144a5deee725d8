import { type AnalyseOptions, analyseFrame } from './analyse.ts';
import { type Decoded, decode } from './decode.ts';
import type { Analysis } from './result.ts';

/** Decodes and analyses one file. @throws MeasurementError when it can't be decoded or measured */
export async function analyseBytes(
  bytes: Uint8Array,
  options: AnalyseOptions = {},
): Promise<Analysis> {
  const start = performance.now();
  const decoded = await decode(bytes);
  const milliseconds = performance.now() - start;
  options.onStage?.('decode', milliseconds);
  return analyseDecoded(decoded, milliseconds, options);
}

/** The same for a file that is decoded already, for callers that need its pixels as well. */
export function analyseDecoded(
  decoded: Decoded,
  decodeMilliseconds: number,
  options: AnalyseOptions = {},
): Analysis {
  const now = () => performance.now();
  const analysis = analyseFrame(decoded.frame, decoded.capture, { now, ...options });
  const { register, measure, total } = analysis.milliseconds;
  return {
    ...analysis,
    warnings: [...decoded.warnings, ...analysis.warnings],
    milliseconds: {
      decode: decodeMilliseconds,
      register,
      measure,
      total: decodeMilliseconds + total,
    },
  };
}
