import sharp from 'sharp';
import type { Frame, Point } from '../../../analysis/image.ts';
import type { Registration } from '../../../analysis/target/registration.ts';
import { targets } from '../../../analysis/target/target.ts';

/** A registration that knows where everything is, for tests of what comes after it. `slip` displaces the corners, px. */
export function truthRegistration(
  truth: { width: number; height: number; toImage(x: number, y: number): [number, number] },
  shape: '4x3' | '3x2' = '4x3',
  slip: () => number = () => 0,
): Registration {
  const target = targets[shape];
  const toImage = (x: number, y: number): Point => {
    const [px, py] = truth.toImage(x, y);
    return { x: px, y: py };
  };
  const jacobian = (x: number, y: number) => {
    const [a, b, c, d] = [
      toImage(x + 1, y),
      toImage(x - 1, y),
      toImage(x, y + 1),
      toImage(x, y - 1),
    ];
    return [(a.x - b.x) / 2, (c.x - d.x) / 2, (a.y - b.y) / 2, (c.y - d.y) / 2] as const;
  };
  const toTarget = (px: number, py: number): Point => {
    let [x, y] = [0, 0];
    for (let i = 0; i < 20; i++) {
      const at = toImage(x, y);
      const [xx, xy, yx, yy] = jacobian(x, y);
      const det = xx * yy - xy * yx;
      x += ((px - at.x) * yy - (py - at.y) * xy) / det;
      y += ((py - at.y) * xx - (px - at.x) * yx) / det;
    }
    return { x, y };
  };
  const turn = (target.station.rotationDegrees * Math.PI) / 180;
  const half = target.station.squareSide / 2;
  const corners = new Map<string, Point[]>();
  for (const { id, x, y } of target.stations) {
    const square = [
      [-1, -1],
      [1, -1],
      [1, 1],
      [-1, 1],
    ].map(([a, b]) => {
      const [u, v] = [a! * half, b! * half];
      const p = toImage(
        x + Math.cos(turn) * u - Math.sin(turn) * v,
        y + Math.sin(turn) * u + Math.cos(turn) * v,
      );
      return { x: p.x + slip(), y: p.y + slip() };
    });
    const whole = square.every(
      (p) => p.x > 5 && p.y > 5 && p.x < truth.width - 5 && p.y < truth.height - 5,
    );
    if (whole) corners.set(id, square);
  }
  return {
    target,
    summary: { target: shape, residual: 0, rotation: 0, coverage: 1, rings: {} },
    toImage,
    toTarget,
    jacobian,
    corners,
    distortion: { corner: 0, uncertainty: 0 },
  };
}

const srgb = (maxCode: number) =>
  Float32Array.from({ length: maxCode + 1 }, (_, code) => {
    const v = code / maxCode;
    return v <= 0.04045 ? v / 12.92 : ((v + 0.055) / 1.055) ** 2.4;
  });

/** A frame from codes that follow the sRGB curve. */
export function frameOf(width: number, height: number, data: Uint8Array | Uint16Array): Frame {
  const maxCode = data instanceof Uint16Array ? 65535 : 255;
  const table = srgb(maxCode);
  return { width, height, data, maxCode, toLinear: [table, table, table], toSrgb: null };
}

/** Decodes an 8-bit file without turning to analysis/decode.ts, which is not what these tests are about. */
export async function decodeFrame(bytes: Buffer): Promise<Frame> {
  const { chromaSubsampling, format } = await sharp(bytes).metadata();
  const { data, info } = await sharp(bytes)
    .removeAlpha()
    .raw()
    .toBuffer({ resolveWithObject: true });
  const frame = frameOf(info.width, info.height, new Uint8Array(data));
  const chromaHalved = chromaSubsampling?.startsWith('4:2') ?? false;
  return format === 'jpeg' ? { ...frame, chromaHalved, blockStep: { luma: 1, chroma: 1 } } : frame;
}

/** Inverse of the renderer's tone curve as a tone response: code 0…1 → scene light, exact below the shoulder. */
export function lightOfContrast(contrast: number): (code: number) => number {
  return (code) => {
    const linear = code <= 0.04045 ? code / 12.92 : ((code + 0.055) / 1.055) ** 2.4;
    return 0.18 * (linear / 0.18) ** (1 / contrast);
  };
}
