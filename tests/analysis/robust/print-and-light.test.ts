import { describe, expect, test } from 'vitest';
import { targets } from '@/analysis/target/target';
import { confidentlyWrong, photograph } from './judge';

const target = targets['4x3'];
const disc = (id: string) => target.discs.find((d) => d.id === id)!;
const station = (id: string) => target.stations.find((s) => s.id === id)!;
const glare = ({ x, y }: { x: number; y: number }, sigma: number, light: number) =>
  ({ kind: 'glare', x, y, sigma, light }) as const;

describe('a reflection', () => {
  test.each([
    ['a light grey', 'grey-06', 14, 0.12],
    ['a dark grey', 'grey-10', 14, 0.12],
    ['a colour', 'hue-030', 16, 0.2],
  ] as const)(
    'on %s leaves that disc out by name, and harms nothing else',
    async (_, id, sigma, light) => {
      const shot = await photograph({}, [glare(disc(id), sigma, light)]);
      expect(shot.message('discs-uneven')).toContain(id);
      expect(shot.message('discs-uneven')).toContain('lamps');
      expect(shot.find('exposure.bias')).toBeDefined();
      expect(confidentlyWrong(shot)).toEqual([]);
    },
  );

  test('too even to be seen on a dark grey itself is told from the other greys', async () => {
    const shot = await photograph({}, [glare(disc('grey-10'), 40, 0.02)]);
    expect(shot.message('greys-astray')).toContain('grey-10');
    expect(confidentlyWrong(shot)).toEqual([]);
  });

  test.each([60, 150])(
    'as broad as several discs (σ %d units) leaves light and colour out',
    async (sigma) => {
      const shot = await photograph({}, [glare(disc('grey-06'), sigma, 0.12)]);
      expect(shot.codes).toContain('glare');
      for (const name of ['exposure.bias', 'tone.contrast', 'colour.saturation', 'colour.error'])
        expect(shot.find(name), name).toBeUndefined();
      expect(confidentlyWrong(shot)).toEqual([]);
    },
  );

  test.each(['C', 'NE'])('on station %s leaves it out and measures the rest', async (id) => {
    const shot = await photograph({}, [glare(station(id), 30, id === 'C' ? 0.3 : 0.8)]);
    expect(shot.message('stations-left-out')).toContain(id);
    expect(shot.find('sharpness.mtf50', id, 'vertical')).toBeUndefined();
    expect(shot.find('sharpness.mtf50', 'SW', 'vertical')).toBeDefined();
    expect(confidentlyWrong(shot)).toEqual([]);
  });

  test('on a ring doesn’t move the registration', async () => {
    const { x, y } = target.rings[0]!;
    const shot = await photograph({}, [glare({ x, y }, 20, 1.5)]);
    for (const [id, [px, py]] of Object.entries(shot.truth.rings)) {
      const [qx, qy] = shot.analysis.registration!.rings[id]!;
      expect(Math.hypot(qx - px, qy - py), id).toBeLessThan(0.3);
    }
    expect(confidentlyWrong(shot)).toEqual([]);
  });
});

describe('a print that isn’t flat', () => {
  test('at one station leaves that station out', async () => {
    const shot = await photograph({}, [
      { kind: 'crease', ...station('NE'), sigma: 60, shift: [6, 4] },
    ]);
    expect(shot.message('stations-left-out')).toMatch(/NE.*Press the print flat/);
    expect(shot.find('sharpness.mtf50', 'NE', 'vertical')).toBeUndefined();
    expect(confidentlyWrong(shot)).toEqual([]);
  });

  test('over a third of it is told from the squares’ places', async () => {
    const bent = { kind: 'crease', x: 250, y: 0, sigma: 200, shift: [8, 3] } as const;
    const shot = await photograph({}, [bent]);
    expect(shot.message('print-not-flat')).toMatch(/Press the print flat/);
  });
});

describe('the frame and the light', () => {
  test('a target that is cut off: what is outside is left out, the rest measured', async () => {
    const shot = await photograph({ offset: [230, 130] });
    expect(shot.codes).toContain('target-cut-off');
    for (const { id, inFrame } of shot.truth.stations)
      expect(shot.find('sharpness.mtf50', id, 'vertical') !== undefined, id).toBe(inFrame);
    expect(confidentlyWrong(shot)).toEqual([]);
  });

  test('uneven light is told, and exposure and saturation stay true', async () => {
    const shot = await photograph({ lightTiltEv: 0.8 });
    expect(shot.message('uneven-light')).toContain('Set the lamps evenly');
    expect(confidentlyWrong(shot)).toEqual([]);
  });

  test('even light isn’t', async () => {
    const { codes } = await photograph({ shadingCornerEv: -1, lightTiltEv: 0.1 });
    expect(codes).not.toContain('uneven-light');
  });

  test.each([-5.6, -5, -4.4])(
    'a camera turned by %d° is asked to turn a little',
    async (rotationDegrees) => {
      const shot = await photograph({ rotationDegrees });
      expect(shot.message('edge-angle')).toMatch(/Turn the camera by/);
      expect(confidentlyWrong(shot)).toEqual([]);
    },
  );

  test('few pixels are told, and what is left is true', async () => {
    const shot = await photograph({ width: 640, height: 480, fill: 0.62 });
    expect(shot.codes).toContain('few-pixels');
    expect(confidentlyWrong(shot)).toEqual([]);
  });

  test('clipped pads and discs are named and left out', async () => {
    const shot = await photograph({ exposureEv: 1.6 });
    expect(shot.codes).toEqual(
      expect.arrayContaining(['edge-clipped', 'greys-clipped', 'discs-clipped']),
    );
    expect(shot.find('sharpness.mtf50', 'C', 'vertical')).toBeUndefined();
    expect(shot.find('colour.saturation')).toBeUndefined();
    expect(confidentlyWrong(shot)).toEqual([]);
  });
});
