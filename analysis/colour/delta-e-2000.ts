import type { Triple } from './matrix.ts';

const degrees = Math.PI / 180;

/**
 * CIEDE2000 colour difference of two CIELAB colours under one white (ISO/CIE 11664-6), kL = kC = kH = 1.
 * Symmetric in its arguments. Written after G. Sharma, W. Wu, E. Dalal: "The CIEDE2000 Color-Difference Formula:
 * Implementation Notes, Supplementary Test Data, and Mathematical Observations", Color Res. Appl. 30(1), 2005,
 * whose 34 pairs it reproduces to the four decimals printed.
 */
export function deltaE2000(lab1: Triple, lab2: Triple): number {
  const [l1, a1, b1] = lab1;
  const [l2, a2, b2] = lab2;
  const meanC7 = ((Math.hypot(a1, b1) + Math.hypot(a2, b2)) / 2) ** 7;
  const g = 0.5 * (1 - Math.sqrt(meanC7 / (meanC7 + 25 ** 7)));
  const c1 = Math.hypot((1 + g) * a1, b1);
  const c2 = Math.hypot((1 + g) * a2, b2);
  const h1 = hueAngle((1 + g) * a1, b1);
  const h2 = hueAngle((1 + g) * a2, b2);

  const deltaL = l2 - l1;
  const deltaC = c2 - c1;
  const deltaH = 2 * Math.sqrt(c1 * c2) * Math.sin((hueDifference(c1, c2, h1, h2) / 2) * degrees);

  const l = (l1 + l2) / 2;
  const c = (c1 + c2) / 2;
  const h = meanHue(c1, c2, h1, h2);
  const t =
    1 -
    0.17 * Math.cos((h - 30) * degrees) +
    0.24 * Math.cos(2 * h * degrees) +
    0.32 * Math.cos((3 * h + 6) * degrees) -
    0.2 * Math.cos((4 * h - 63) * degrees);
  const rotation = 30 * Math.exp(-(((h - 275) / 25) ** 2));
  const rc = 2 * Math.sqrt(c ** 7 / (c ** 7 + 25 ** 7));
  const sl = 1 + (0.015 * (l - 50) ** 2) / Math.sqrt(20 + (l - 50) ** 2);
  const sc = 1 + 0.045 * c;
  const sh = 1 + 0.015 * c * t;
  const rt = -Math.sin(2 * rotation * degrees) * rc;
  return Math.sqrt(
    (deltaL / sl) ** 2 +
      (deltaC / sc) ** 2 +
      (deltaH / sh) ** 2 +
      rt * (deltaC / sc) * (deltaH / sh),
  );
}

function hueAngle(a: number, b: number): number {
  if (a === 0 && b === 0) return 0;
  const angle = Math.atan2(b, a) / degrees;
  return angle < 0 ? angle + 360 : angle;
}

function hueDifference(c1: number, c2: number, h1: number, h2: number): number {
  if (c1 * c2 === 0) return 0;
  const difference = h2 - h1;
  if (Math.abs(difference) <= 180) return difference;
  return difference > 180 ? difference - 360 : difference + 360;
}

function meanHue(c1: number, c2: number, h1: number, h2: number): number {
  const sum = h1 + h2;
  if (c1 * c2 === 0) return sum;
  if (Math.abs(h1 - h2) <= 180) return sum / 2;
  return sum < 360 ? (sum + 360) / 2 : (sum - 360) / 2;
}
