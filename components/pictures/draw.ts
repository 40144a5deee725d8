import { numberText } from '@/lib/shared/numbers';
import { placeWords } from '@/lib/shared/places';

const tau = Math.PI * 2;

/** Two decimals are a hundredth of a screen pixel: enough, and short in the page. */
export function round(value: number): number {
  return Math.round(value * 100) / 100;
}

/** `count` places on a circle about (centre, centre), the first at the top, clockwise. */
export function around(count: number, centre: number, radius: number) {
  return Array.from({ length: count }, (_, index) => {
    const angle = (tau * index) / count - Math.PI / 2;
    return {
      index,
      x: round(centre + radius * Math.cos(angle)),
      y: round(centre + radius * Math.sin(angle)),
    };
  });
}

/** An arc from the top, clockwise, over `share` of the circle; just short of closing, or SVG would draw nothing. */
export function arcPath(x: number, y: number, radius: number, share: number): string {
  const part = Math.min(0.9999, Math.max(0, share));
  const angle = tau * part - Math.PI / 2;
  const endX = round(x + radius * Math.cos(angle));
  const endY = round(y + radius * Math.sin(angle));
  return `M${round(x)} ${round(y - radius)}A${round(radius)} ${round(radius)} 0 ${part > 0.5 ? 1 : 0} 1 ${endX} ${endY}`;
}

/** A polyline through points that are already in drawing units. */
export function linePath(points: readonly (readonly [number, number])[]): string {
  return points.map(([x, y], index) => `${index ? 'L' : 'M'}${round(x)} ${round(y)}`).join('');
}

/** The value at `at` of a curve given by samples, by straight lines between them. */
export function valueAt(xs: readonly number[], ys: readonly number[], at: number): number | null {
  for (let i = 1; i < xs.length; i += 1) {
    const [x0, x1, y0, y1] = [xs[i - 1], xs[i], ys[i - 1], ys[i]];
    if (x0 === undefined || x1 === undefined || y0 === undefined || y1 === undefined) return null;
    if (at >= x0 && at <= x1) return x1 === x0 ? y0 : y0 + ((y1 - y0) * (at - x0)) / (x1 - x0);
  }
  return null;
}

/** A station or a group of them as the beginning of a line: "Upper left". */
export function placeName(id: string): string {
  const words = placeWords[id] ?? id;
  return words.charAt(0).toUpperCase() + words.slice(1);
}

/** A number that says its sign either way: +0.7. */
export function signedText(value: number, decimals: number): string {
  const text = numberText(value, decimals);
  return value > 0 && Number(text) !== 0 ? `+${text}` : text;
}
