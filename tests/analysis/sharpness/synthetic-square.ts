import type { Frame } from '../../../analysis/image.ts';
import type { Registration } from '../../../analysis/target/registration.ts';
import { truthRegistration } from './truth-registration.ts';

/** Edge-spread function: 0 far on one side, 1 far on the other. */
export type Spread = (d: number) => number;

/**
 * A frame that holds station C alone, painted in closed form: dark square, light surround, blurred by a kernel that is a product of
 * one line-spread function along each of the square's own axes. Light is stored linearly in 16 bits.
 */
export function syntheticSquare(
  exactSpread: Spread,
  {
    scale = 2.6,
    angle = 0,
    noise = () => 0,
  }: { scale?: number; angle?: number; noise?: () => number },
): { frame: Frame; registration: Registration } {
  const spread = tabulate(exactSpread);
  const side = Math.ceil(62 * 2 * scale) & ~1;
  const [cx, cy] = [side / 2 + 0.31, side / 2 - 0.17];
  const turn = (angle * Math.PI) / 180;
  const [c, s] = [Math.cos(turn), Math.sin(turn)];
  const truth = {
    width: side,
    height: side,
    toImage: (x: number, y: number): [number, number] => [
      cx + scale * (c * x - s * y),
      cy + scale * (s * x + c * y),
    ],
  };
  const registration = truthRegistration(truth);
  const tilt = turn + (registration.target.station.rotationDegrees * Math.PI) / 180;
  const half = (registration.target.station.squareSide * scale) / 2;
  const data = new Uint16Array(side * side * 3);
  for (let row = 0; row < side; row++)
    for (let col = 0; col < side; col++) {
      const [x, y] = [col + 0.5 - cx, row + 0.5 - cy];
      const u = Math.cos(tilt) * x + Math.sin(tilt) * y;
      const v = Math.cos(tilt) * y - Math.sin(tilt) * x;
      const inside = (spread(u + half) - spread(u - half)) * (spread(v + half) - spread(v - half));
      for (let channel = 0; channel < 3; channel++) {
        const light = 0.36 - 0.27 * inside + noise();
        data[(row * side + col) * 3 + channel] = Math.round(
          65535 * Math.min(1, Math.max(0, light)),
        );
      }
    }
  const table = Float32Array.from({ length: 65536 }, (_, code) => code / 65535);
  return {
    frame: {
      width: side,
      height: side,
      data,
      maxCode: 65535,
      toLinear: [table, table, table],
      toSrgb: null,
    },
    registration,
  };
}

const reach = 24;
const perPixel = 512;

/** Linear between 1/512 px, good to 1e-6: the exact forms are slow at every pixel. */
function tabulate(exact: Spread): Spread {
  const table = Float64Array.from({ length: 2 * reach * perPixel + 2 }, (_, i) =>
    exact(i / perPixel - reach),
  );
  return (d) => {
    const at = (Math.min(reach, Math.max(-reach, d)) + reach) * perPixel;
    const cell = Math.floor(at);
    return table[cell]! + (table[cell + 1]! - table[cell]!) * (at - cell);
  };
}
