import 'server-only';
import type { Target } from '@/analysis/target/target';
import type { Sheet } from './sheet';

/** Half the diagonal rule of 35 mm equivalence: 43.27 mm is the diagonal of 36 × 24 mm. */
const fullFrameDiagonal = Math.hypot(36, 24);

/**
 * Camera to target distance, m, at which the target's height takes `fill` of the frame's height.
 * Thin lens: distance from the front principal plane = f · (subject height / image height) + f, with f and the image height both
 * taken on the 36 × 24 mm equivalent, whose `+ f` is at most a few centimetres and makes the frame a little looser.
 */
export function distanceMetres(
  target: Target,
  mmPerUnit: number,
  equivalentFocalLength: number,
  fill = 0.95,
): number {
  const [across = 4, down = 3] = target.name.split('x').map(Number);
  const imageHeight = (fullFrameDiagonal * down) / Math.hypot(across, down);
  const subjectHeight = (target.height * mmPerUnit) / fill;
  return (equivalentFocalLength * (subjectHeight / imageHeight) + equivalentFocalLength) / 1000;
}

const focalLengths = [24, 28, 35, 50, 70, 105];

const steps: [string, string][] = [
  [
    'Print',
    'At 100 %, no scaling, no borderless enlargement. Matte paper, at least 180 g/m², the printer’s best quality. Leave colour management to the printer’s own sRGB profile; no “vivid” or “photo enhance”. Let it dry for an hour.',
  ],
  [
    'Check',
    'Measure the line below: it is 100.0 mm long. If it is more than half a millimetre off, the print was scaled; print again.',
  ],
  [
    'Mount',
    'Flat, on a rigid dark board, without glass. A creased or curled print bends edges and cannot be used for distortion.',
  ],
  [
    'Light',
    'Two lamps at 45° to the left and right, at the same distance, or open shade by day. A sheet of white paper held at each corner and in the middle should meter within a quarter of a stop.',
  ],
  [
    'Line up',
    'Camera on a tripod, level with the middle of the target, its back parallel to the print: a small mirror held flat on the centre station shows the lens in its own middle. Fill the frame; keep the white border just outside it.',
  ],
  [
    'Shoot',
    'Self-timer, lowest sensitivity, no flash, no digital zoom, the largest and finest JPEG. Three frames, focusing anew for each. Lay the unit’s slip in its place beside the target.',
  ],
];

/** The second page: how to print, mount, light and line up, and a check line. The document's unit must be the millimetre. */
export function drawInstructions(
  document: Sheet,
  target: Target,
  mmPerUnit: number,
  pageWidth: number,
): void {
  const left = 20;
  document
    .fillColor('black')
    .font('sans-600')
    .fontSize(8)
    .text('How to print and shoot this target', left, 16);
  const column = Math.min(pageWidth - 2 * left, 170);
  let y = 32;
  for (const [title, body] of steps) {
    document.font('sans-600').fontSize(4).text(title, left, y, { width: 24 });
    document
      .font('sans-400')
      .fontSize(4)
      .text(body, left + 26, y, { width: column - 26, lineGap: 0.8 });
    y = document.y + 3.5;
  }
  drawCheckLine(document, left, y + 6);
  drawDistances(document, target, mmPerUnit, left, y + 18);
}

function drawCheckLine(document: Sheet, x: number, y: number): void {
  document.lineWidth(0.2).strokeColor('black');
  document
    .moveTo(x, y)
    .lineTo(x + 100, y)
    .stroke();
  for (const end of [x, x + 100])
    document
      .moveTo(end, y - 2)
      .lineTo(end, y + 2)
      .stroke();
  document
    .font('mono')
    .fontSize(3.5)
    .text('100.0 mm', x + 104, y - 2, { lineBreak: false });
}

function drawDistances(
  document: Sheet,
  target: Target,
  mmPerUnit: number,
  x: number,
  y: number,
): void {
  document
    .font('sans-600')
    .fontSize(4)
    .text('Distance that fills the frame', x, y, { lineBreak: false });
  document.font('sans-400').fontSize(3.5);
  document.text('Focal length as 35 mm equivalent; lens to print.', x, y + 6, { lineBreak: false });
  document.font('mono').fontSize(3.8);
  focalLengths.forEach((focal, i) => {
    document.text(`${focal} mm`, x + i * 26, y + 13, { lineBreak: false });
    document.text(`${distanceMetres(target, mmPerUnit, focal).toFixed(2)} m`, x + i * 26, y + 19, {
      lineBreak: false,
    });
  });
}
