/**
 * Monotone cubic interpolation through points of rising x and rising y
 * (Fritsch & Carlson, SIAM J. Numer. Anal. 17 (1980) 238), straight on beyond both ends with the end slopes.
 */
export function monotoneCurve(
  x: readonly number[],
  y: readonly number[],
  lowSlope: number,
  highSlope: number,
): (at: number) => number {
  const count = x.length;
  const slopes = tangents(x, y);
  const last = count - 1;
  return (at) => {
    if (at <= x[0]!) return y[0]! + lowSlope * (at - x[0]!);
    if (at >= x[last]!) return y[last]! + highSlope * (at - x[last]!);
    let i = 0;
    while (x[i + 1]! < at) i++;
    const h = x[i + 1]! - x[i]!;
    const t = (at - x[i]!) / h;
    return (
      y[i]! * (1 + 2 * t) * (1 - t) ** 2 +
      h * slopes[i]! * t * (1 - t) ** 2 +
      y[i + 1]! * t * t * (3 - 2 * t) +
      h * slopes[i + 1]! * t * t * (t - 1)
    );
  };
}

function tangents(x: readonly number[], y: readonly number[]): number[] {
  const last = x.length - 1;
  const chord = Array.from({ length: last }, (_, i) => (y[i + 1]! - y[i]!) / (x[i + 1]! - x[i]!));
  const slopes = Array.from({ length: x.length }, (_, i) => {
    if (i === 0) return chord[0]!;
    if (i === last) return chord[last - 1]!;
    const before = x[i]! - x[i - 1]!;
    const after = x[i + 1]! - x[i]!;
    return (chord[i - 1]! * after + chord[i]! * before) / (before + after);
  });
  for (let i = 0; i < last; i++) {
    const limit = 3 * chord[i]!;
    const size = Math.hypot(slopes[i]!, slopes[i + 1]!);
    if (size > limit) {
      slopes[i]! *= limit / size;
      slopes[i + 1]! *= limit / size;
    }
  }
  return slopes;
}
