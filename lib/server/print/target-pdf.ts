import 'server-only';
import { randomBytes } from 'node:crypto';
import { type Target, targets } from '@/analysis/target/target';
import type { TargetPrintQuery } from '@/lib/shared/schemas';
import { drawInstructions } from './draw-instructions';
import { drawTarget } from './draw-target';
import { addPage, closeSheet, openSheet } from './sheet';

const alphabet = '23456789ABCDEFGHJKMNPQRSTVWXYZ'; // no look-alikes

/** A print's own id, eight characters: short enough to read aloud, long enough that two prints never share one. */
export function newPrintId(): string {
  return Array.from(randomBytes(8), (byte) => alphabet[byte % alphabet.length]).join('');
}

/** The printable target in true size: page one the target, page two how to use it. */
export async function targetPdf(
  { shape, paper }: TargetPrintQuery,
  printId: string,
): Promise<Buffer> {
  const target: Target = targets[shape];
  const mmPerUnit = target.print[paper]?.mmPerUnit;
  if (!mmPerUnit) throw new Error(`Target ${shape} has no scale for ${paper}.`);
  const { document, width, height } = openSheet(
    paper,
    'landscape',
    `Mendlight target ${shape}, ${paper}, print ${printId}`,
  );
  addPage(document);
  document.translate(width / 2, height / 2);
  drawTarget(document, target, mmPerUnit, printId);
  addPage(document);
  drawInstructions(document, target, mmPerUnit, width);
  return closeSheet(document);
}
