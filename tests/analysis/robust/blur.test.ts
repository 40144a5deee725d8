import { describe, expect, test } from 'vitest';
import { confidentlyWrong, photograph } from './judge';

/**
 * First frequency at which a Gaussian of σ and the renderer's motion fall to a half. The motion is a row of whole pixels with the rest
 * shared between its ends; `share` of the frequency lies along it.
 */
function mtf50(sigma: number, length: number, share: number): number {
  const whole = Math.floor((length - 1) / 2);
  const end = (length - 1 - 2 * whole) / 2;
  const response = (f: number) => {
    const turn = 2 * Math.PI * f * share;
    let sum = 1 + 2 * end * Math.cos((whole + 1) * turn);
    for (let k = 1; k <= whole; k++) sum += 2 * Math.cos(k * turn);
    return (Math.exp(-2 * (Math.PI * sigma * f) ** 2) * sum) / length;
  };
  let [low, high] = [0, 0.001];
  while (response(high) > 0.5) high += 0.001;
  low = high - 0.001;
  for (let i = 0; i < 40; i++) {
    const middle = (low + high) / 2;
    if (response(middle) > 0.5) low = middle;
    else high = middle;
  }
  return low;
}

describe('motion blur', () => {
  // Squares turned by 5° in a picture turned by 1°: an edge sees the part of the motion that crosses it.
  const [across, along] = [Math.cos((6 * Math.PI) / 180), Math.sin((6 * Math.PI) / 180)];

  test.each([
    ['x', 3, 'upright'],
    ['x', 5, 'upright'],
    ['y', 4, 'level'],
  ] as const)(
    'along %s by %d px is told, and its sharpness is the blurred one',
    async (axis, length, which) => {
      const shot = await photograph({}, [{ kind: 'motion', along: axis, length }]);
      expect(shot.message('motion-blur')).toMatch(
        new RegExp(`${which} edges are \\d+ % less sharp`),
      );
      expect(shot.message('motion-blur')).toContain('tripod');
      const blurred = axis === 'x' ? 'vertical' : 'horizontal';
      const truth = (_: string, edge: string) =>
        mtf50(0.7, length, edge === blurred ? across : along);
      expect(confidentlyWrong(shot, { mtf50: truth })).toEqual([]);
    },
  );

  test('isn’t seen in a sound photograph, nor in a lens that is soft towards the corners', async () => {
    expect((await photograph()).codes).not.toContain('motion-blur');
    const soft = await photograph({ blurSigma: { centre: 0.6, corner: 1.6 } });
    expect(soft.codes).not.toContain('motion-blur');
    expect(soft.codes).not.toContain('focus-missed');
  });
});

describe('a missed focus', () => {
  test.each([2.2, 3.2])('of σ %d px is told, and its sharpness is true', async (blurSigma) => {
    const shot = await photograph({ blurSigma });
    expect(shot.message('focus-missed')).toMatch(/Even the centre is soft.*Focus on/);
    expect(confidentlyWrong(shot)).toEqual([]);
  });

  test('in front of the middle is told from a soft centre', async () => {
    const shot = await photograph({ blurSigma: { centre: 1.5, corner: 0.4 } });
    expect(shot.message('focus-missed')).toMatch(/softer than the rest/);
  });
});
