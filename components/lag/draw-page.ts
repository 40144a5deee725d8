import {
  cycleFrames,
  frameBitDiscs,
  frameBits,
  onCircle,
  screenBits,
  timingPage,
} from '@/analysis/time/timing-page';

type Pen = CanvasRenderingContext2D;

const grey = (code: number) => `rgb(${code} ${code} ${code})`;
const light = grey(timingPage.codes.light);
const ground = grey(timingPage.codes.ground);
const dark = grey(timingPage.codes.dark);

/** What stays: rings, mark, the hand's way and, once the screen has been measured, its frame time in discs and in words. */
export function drawGround(pen: Pen, size: number, frameTime: number | null): void {
  toPageUnits(pen, size);
  const { side, ring, rings, hand } = timingPage;
  pen.fillStyle = ground;
  pen.fillRect(-side / 2, -side / 2, side, side);
  for (const { x, y } of rings) {
    disc(pen, x, y, ring.light, light);
    disc(pen, x, y, ring.dark, dark);
    disc(pen, x, y, ring.dot, light);
  }
  pen.strokeStyle = grey(104);
  pen.lineWidth = 3;
  pen.beginPath();
  pen.arc(0, 0, hand.radius, 0, 2 * Math.PI);
  pen.stroke();
  drawMark(pen);
  if (frameTime === null) return;
  const { count, radius, disc: discRadius } = timingPage.screenBits;
  screenBits(frameTime).forEach((bit, i) => {
    const { x, y } = onCircle(radius, i, count);
    disc(pen, x, y, discRadius, bit ? light : dark);
  });
  write(pen, frameTime);
}

/** Three steps before the mark help to anticipate it; what is under the hand's own way stays free. */
function drawMark(pen: Pen): void {
  const { from, to } = timingPage.mark;
  pen.strokeStyle = dark;
  for (const [turn, width, outer] of [
    [0, 12, to],
    [1 / 24, 6, from + 26],
    [2 / 24, 6, from + 20],
    [3 / 24, 6, from + 14],
  ] as const) {
    const angle = -2 * Math.PI * turn;
    pen.lineWidth = width;
    pen.beginPath();
    pen.moveTo(from * Math.sin(angle), -from * Math.cos(angle));
    pen.lineTo(outer * Math.sin(angle), -outer * Math.cos(angle));
    pen.stroke();
  }
}

function write(pen: Pen, frameTime: number): void {
  pen.fillStyle = dark;
  pen.textAlign = 'center';
  pen.font = '640 54px Archivo, sans-serif';
  pen.fillText(`${frameTime.toFixed(2)} ms`, 0, 4);
  pen.font = '500 30px Archivo, sans-serif';
  pen.fillText(`a frame, ${(1000 / frameTime).toFixed(1)} Hz`, 0, 46);
}

/** What changes from frame to frame: the code and the hand. */
export function drawFrame(pen: Pen, size: number, frame: number, frameTime: number): void {
  toPageUnits(pen, size);
  const { side, hand } = timingPage;
  pen.clearRect(-side / 2, -side / 2, side, side);
  const frames = cycleFrames(frameTime);
  const { count, radius, disc: discRadius } = timingPage.frameBits;
  frameBits(frame, frames).forEach((bit, i) => {
    const [one, zero] = frameBitDiscs(i).map((index) => onCircle(radius, index, 2 * count));
    if (!one || !zero) return;
    disc(pen, one.x, one.y, discRadius, bit ? light : dark);
    disc(pen, zero.x, zero.y, discRadius, bit ? dark : light);
  });
  const { x, y } = onCircle(hand.radius, frame % frames, frames);
  disc(pen, x, y, hand.disc, light);
}

function toPageUnits(pen: Pen, size: number): void {
  const scale = size / timingPage.side;
  pen.setTransform(scale, 0, 0, scale, size / 2, size / 2);
}

function disc(pen: Pen, x: number, y: number, radius: number, colour: string): void {
  pen.fillStyle = colour;
  pen.beginPath();
  pen.arc(x, y, radius, 0, 2 * Math.PI);
  pen.fill();
}
