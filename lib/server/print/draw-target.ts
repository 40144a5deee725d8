import 'server-only';
import qrcode from 'qrcode';
import type { Target } from '@/analysis/target/target';
import type { Sheet } from './sheet';

/** What a print says of itself: the target's version and shape and the print's own id, since a calibration belongs to a print. */
export const targetCode = (target: Target, printId: string) =>
  `MENDLIGHT TARGET ${target.version} ${target.name.toUpperCase()} ${printId}`;

/**
 * Draws the target centred at the document's current origin. The document's unit must be the millimetre.
 * @param mmPerUnit the paper's scale, from the target's own table
 */
export function drawTarget(
  document: Sheet,
  target: Target,
  mmPerUnit: number,
  printId: string,
): void {
  document.save();
  document.scale(mmPerUnit);
  const { width, height } = target;
  document.rect(-width / 2, -height / 2, width, height).fill(grey(target.background.reflectance));
  for (const station of target.stations) drawStation(document, target, station);
  for (const ring of target.rings) drawRing(document, target, ring);
  for (const disc of target.discs) {
    document.circle(disc.x, disc.y, disc.radius).fill(paint(disc.linearSrgb));
  }
  drawCode(document, target, targetCode(target, printId));
  drawRuler(document, target, mmPerUnit);
  drawCaption(document, target, printId);
  document.restore();
}

function drawStation(document: Sheet, target: Target, { x, y }: { x: number; y: number }): void {
  const { padRadius, squareSide, rotationDegrees, pad, square } = target.station;
  document.circle(x, y, padRadius).fill(grey(pad.reflectance));
  document.save();
  document.translate(x, y).rotate(rotationDegrees);
  document
    .rect(-squareSide / 2, -squareSide / 2, squareSide, squareSide)
    .fill(grey(square.reflectance));
  document.restore();
}

function drawRing(document: Sheet, target: Target, { x, y }: { x: number; y: number }): void {
  const { discRadius, outer, dotRadius, light, dark } = target.ring;
  const radii = [discRadius, Math.max(...outer), Math.min(...outer), dotRadius];
  radii.forEach((radius, i) => {
    document.circle(x, y, radius).fill(grey(i % 2 === 0 ? light.reflectance : dark.reflectance));
  });
}

/** Modules are drawn as vectors with a quiet zone of four modules inside the code's square (ISO/IEC 18004). */
function drawCode(document: Sheet, target: Target, text: string): void {
  const { modules } = qrcode.create(text, { errorCorrectionLevel: 'M' });
  const { x, y, side } = target.qr;
  const step = side / (modules.size + 8);
  document.rect(x - side / 2, y - side / 2, side, side).fill('white');
  const left = x - side / 2 + 4 * step;
  const top = y - side / 2 + 4 * step;
  for (let row = 0; row < modules.size; row++) {
    for (let col = 0; col < modules.size; col++) {
      if (modules.get(row, col)) document.rect(left + col * step, top + row * step, step, step);
    }
  }
  document.fill('black');
}

/** Millimetre ticks, longer at 5 and 10, numbered in centimetres. */
function drawRuler(document: Sheet, target: Target, mmPerUnit: number): void {
  const { x, y, width, height } = target.ruler;
  const left = x - width / 2;
  const bottom = y + height / 2;
  document.rect(left, y - height / 2, width, height).fill(grey(0.85));
  const margin = 4;
  const millimetres = Math.floor((width - 2 * margin) * mmPerUnit);
  document
    .lineWidth(0.12 / mmPerUnit)
    .strokeColor('black')
    .fillColor('black');
  for (let mm = 0; mm <= millimetres; mm++) {
    const length = mm % 10 === 0 ? 0.55 : mm % 5 === 0 ? 0.42 : 0.28;
    const tick = left + margin + mm / mmPerUnit;
    document
      .moveTo(tick, bottom)
      .lineTo(tick, bottom - height * length)
      .stroke();
    if (mm % 10 === 0 && mm < millimetres) {
      write(document, String(mm / 10), 'mono', height * 0.26, tick + 1.5, y - height / 2 + 3);
    }
  }
}

function drawCaption(document: Sheet, target: Target, printId: string): void {
  const { x, y, width, height } = target.caption;
  document.fillColor(grey(0.85));
  write(
    document,
    `Mendlight target ${target.name.replace('x', ':')}`,
    'sans-600',
    11,
    x - width / 2,
    y - height / 2,
  );
  write(
    document,
    `version ${target.version} · print ${printId}`,
    'mono',
    9,
    x - width / 2,
    y - height / 2 + 14,
  );
}

function write(
  document: Sheet,
  text: string,
  font: string,
  size: number,
  x: number,
  y: number,
): void {
  document.font(font).fontSize(size).text(text, x, y, { lineBreak: false });
}

const grey = (reflectance: number) => paint([reflectance, reflectance, reflectance]);

/** Linear sRGB to what a PDF's DeviceRGB takes here (0…255, not rounded): sRGB encoding, IEC 61966-2-1. */
function paint(linear: readonly number[]): [number, number, number] {
  const encode = (v: number) => 255 * (v <= 0.0031308 ? 12.92 * v : 1.055 * v ** (1 / 2.4) - 0.055);
  const [red = 0, green = 0, blue = 0] = linear;
  return [encode(red), encode(green), encode(blue)];
}
