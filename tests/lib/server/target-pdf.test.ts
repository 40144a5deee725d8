import { execFileSync } from 'node:child_process';
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import sharp from 'sharp';
import { expect, test } from 'vitest';
import { targets } from '@/analysis/target/target';
import { distanceMetres } from '@/lib/server/print/draw-instructions';
import { targetPdf } from '@/lib/server/print/target-pdf';

const dpi = 254; // 10 pixels a millimetre
const hasPoppler = (() => {
  try {
    execFileSync('pdftoppm', ['-v'], { stdio: 'ignore' });
    return true;
  } catch {
    return false;
  }
})();

/** Renders page one with poppler, a program that shares nothing with the one that drew it. */
async function renderPage(pdf: Buffer) {
  const folder = mkdtempSync(join(tmpdir(), 'mendlight-pdf-'));
  try {
    writeFileSync(join(folder, 'target.pdf'), pdf);
    execFileSync(
      'pdftoppm',
      ['-r', String(dpi), '-f', '1', '-l', '1', '-gray', '-png', 'target.pdf', 'page'],
      { cwd: folder },
    );
    const png = readFileSync(join(folder, 'page-1.png'));
    return await sharp(png).extractChannel(0).raw().toBuffer({ resolveWithObject: true });
  } finally {
    rmSync(folder, { recursive: true });
  }
}

// Truth: the target's JSON. A square of side s turned by 5° covers s² mm² and its darkest extent along x is s(cos 5° + sin 5°).
test.skipIf(!hasPoppler).each([
  ['4x3', 'A4', 297, 210],
  ['3x2', 'A3', 420, 297],
] as const)(
  'the %s target on %s is drawn in true millimetres',
  async (shape, paper, width, height) => {
    const { data, info } = await renderPage(await targetPdf({ shape, paper }, 'TEST2345'));
    expect(info.width / 10).toBeCloseTo(width, 0);
    expect(info.height / 10).toBeCloseTo(height, 0);
    const target = targets[shape];
    const mm = target.print[paper]!.mmPerUnit;
    const side = target.station.squareSide * mm;
    for (const station of target.stations) {
      const centreX = (width / 2 + station.x * mm) * 10;
      const centreY = (height / 2 + station.y * mm) * 10;
      const reach = Math.round(target.station.squareSide * mm * 10 * 0.85);
      let dark = 0;
      let sumX = 0;
      let sumY = 0;
      for (let y = Math.round(centreY) - reach; y <= centreY + reach; y++) {
        for (let x = Math.round(centreX) - reach; x <= centreX + reach; x++) {
          if (Math.hypot(x + 0.5 - centreX, y + 0.5 - centreY) > reach) continue; // stay on the pad
          // 162 is the pad's code, 85 the square's: a pixel half covered counts half.
          const share = Math.min(1, Math.max(0, (162 - data[y * info.width + x]!) / (162 - 85)));
          dark += share;
          sumX += share * (x + 0.5);
          sumY += share * (y + 0.5);
        }
      }
      expect(Math.abs(Math.sqrt(dark) / 10 / side - 1)).toBeLessThan(0.001);
      expect(Math.abs(sumX / dark - centreX)).toBeLessThan(0.5);
      expect(Math.abs(sumY / dark - centreY)).toBeLessThan(0.5);
    }
  },
);

// 36 × 24 mm equivalence: at 50 mm a 4:3 frame is 25.96 mm high, so 200 mm / 0.95 stands 50 · 210.5 / 25.96 + 50 = 455 mm away.
test('the distance that fills the frame follows the thin lens', () => {
  expect(distanceMetres(targets['4x3'], 200 / 900, 50)).toBeCloseTo(0.455, 2);
});
