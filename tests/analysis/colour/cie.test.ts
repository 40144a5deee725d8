import { converter } from 'culori';
import { describe, expect, test } from 'vitest';
import {
  bradford,
  labToLinearSrgb,
  linearSrgbToLab,
  srgbToXyz,
  whiteD50,
  whiteD65,
  xyzToLab,
  xyzToSrgb,
} from '@/analysis/colour/cie';
import { apply, type Triple } from '@/analysis/colour/matrix';
import { luminance, midToneCode, toCode, toLinear } from '@/analysis/colour/srgb';
import matrices from '@/fixtures/check-values/colour-matrices.json';
import transfer from '@/fixtures/check-values/srgb-transfer.json';
import points from '@/fixtures/check-values/xyz-lab.json';

/** Random but repeatable codes. */
const codes = Array.from({ length: 200 }, (_, i) =>
  [7919, 104_729, 1_299_709].map((prime) => ((i + 1) * prime) % 256),
) as [number, number, number][];

describe('sRGB transfer (IEC 61966-2-1)', () => {
  test.each(transfer.values.decode_8bit)('code $code is light $linear', ({ code, linear }) => {
    expect(toLinear(code / 255)).toBeCloseTo(linear, 7);
  });
  test.each(transfer.values.encode)('light $linear is level $V', ({ linear, V }) => {
    expect(toCode(linear)).toBeCloseTo(V, 6);
  });
  test('the mid-tone is code 118, 461/1000 of full scale to the nearest code (ISO 12232)', () => {
    expect(midToneCode * 255).toBe(transfer.values.midtone.code);
    expect(toLinear(midToneCode)).toBeCloseTo(transfer.values.midtone.linear_of_code_118, 6);
  });
  test('there and back changes nothing', () => {
    for (let code = 0; code < 256; code++)
      expect(toCode(toLinear(code / 255)) * 255).toBeCloseTo(code, 4);
  });
});

describe('matrices', () => {
  const close = (matrix: readonly number[], published: number[][], digits: number) =>
    published.flat().forEach((value, i) => {
      expect(matrix[i]).toBeCloseTo(value, digits);
    });
  test('linear sRGB to XYZ and back, from the primaries', () => {
    close(srgbToXyz, matrices.values.srgb_to_xyz_from_primaries, 9);
    close(xyzToSrgb, matrices.values.xyz_to_srgb_from_primaries, 8);
  });
  test('Bradford, published to seven decimals', () => {
    const d65 = matrices.values.white_points_XYZ.D65_cie as unknown as Triple;
    const a = matrices.values.white_points_XYZ.A as unknown as Triple;
    close(bradford(d65, whiteD50), matrices.values.bradford_D65_to_D50_cie, 6);
    close(bradford(whiteD50, d65), matrices.values.bradford_D50_to_D65_cie, 6);
    close(bradford(a, whiteD50), matrices.values.bradford_A_to_D50, 6);
  });
  test('white stays white', () => {
    const adapted = apply(bradford(whiteD65, whiteD50), whiteD65);
    adapted.forEach((value, i) => {
      expect(value).toBeCloseTo(whiteD50[i]!, 12);
    });
    expect(luminance(1, 1, 1)).toBeCloseTo(1, 12);
  });
});

describe('CIELAB (ISO/CIE 11664-4)', () => {
  test.each(points.values.srgb_points)('$name', ({ srgb8, XYZ_D65, Lab_D65, Lab_D50 }) => {
    const linear = srgb8.map((code) => toLinear(code / 255)) as unknown as Triple;
    const xyz = apply(srgbToXyz, linear);
    const labD65 = xyzToLab(xyz, whiteD65);
    const labD50 = linearSrgbToLab(linear);
    for (let i = 0; i < 3; i++) {
      expect(xyz[i]).toBeCloseTo(XYZ_D65[i]!, 5);
      expect(labD65[i]).toBeCloseTo(Lab_D65[i]!, 3);
      expect(labD50[i]).toBeCloseTo(Lab_D50[i]!, 3);
    }
  });
  test.each(points.values.lightness_points)(
    'Y = $Y_over_Yn is L* = $Lstar, the straight branch included',
    ({ Y_over_Yn, Lstar }) => {
      const grey = whiteD50.map((w) => w * Y_over_Yn) as unknown as Triple;
      expect(xyzToLab(grey)[0]).toBeCloseTo(Lstar, 3);
    },
  );
  test('agrees with culori, which took other constants for the white, to 0.01', () => {
    const toLab50 = converter('lab');
    for (const [r, g, b] of codes) {
      const theirs = toLab50({ mode: 'rgb', r: r / 255, g: g / 255, b: b / 255 });
      const ours = linearSrgbToLab([toLinear(r / 255), toLinear(g / 255), toLinear(b / 255)]);
      expect(Math.abs(ours[0] - theirs.l)).toBeLessThan(0.01);
      expect(Math.abs(ours[1] - theirs.a)).toBeLessThan(0.02);
      expect(Math.abs(ours[2] - theirs.b)).toBeLessThan(0.02);
    }
  });
  test('there and back changes nothing', () => {
    for (const rgb of codes) {
      const linear = rgb.map((code) => toLinear(code / 255)) as unknown as Triple;
      const back = labToLinearSrgb(linearSrgbToLab(linear));
      back.forEach((value, i) => {
        expect(value).toBeCloseTo(linear[i]!, 10);
      });
    }
  });
});
