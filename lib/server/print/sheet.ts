import 'server-only';
import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import PDFDocument from 'pdfkit';

/** ISO 216 sizes, mm, portrait. */
export const papers = { A4: [210, 297], A3: [297, 420], A2: [420, 594], A1: [594, 841] } as const;
export type Paper = keyof typeof papers;

export const pointsPerMm = 72 / 25.4;

/** A PDF document measured in true millimetres with the product's two typefaces embedded. */
export function openSheet(paper: Paper, orientation: 'landscape' | 'portrait', title: string) {
  const [short, long] = papers[paper];
  const [width, height] = orientation === 'landscape' ? [long, short] : [short, long];
  const document = new PDFDocument({
    size: [width * pointsPerMm, height * pointsPerMm],
    margin: 0,
    autoFirstPage: false,
    info: { Title: title, Creator: 'Mendlight' },
  });
  for (const weight of [400, 600]) {
    document.registerFont(`sans-${weight}`, font(`archivo/files/archivo-latin-${weight}-normal`));
  }
  document.registerFont('mono', font('spline-sans-mono/files/spline-sans-mono-latin-400-normal'));
  return { document, width, height };
}

// .woff2 embeds but draws blank; the .woff of the same face draws.
const font = (name: string) =>
  readFileSync(join(process.cwd(), `node_modules/@fontsource/${name}.woff`));

export type Sheet = ReturnType<typeof openSheet>['document'];

/** Starts a page whose unit is the millimetre, origin top left. */
export function addPage(document: Sheet): void {
  document.addPage();
  document.scale(pointsPerMm);
}

export async function closeSheet(document: Sheet): Promise<Buffer> {
  const chunks: Buffer[] = [];
  document.on('data', (chunk: Buffer) => chunks.push(chunk));
  const ended = new Promise<void>((resolve, reject) => {
    document.on('end', resolve);
    document.on('error', reject);
  });
  document.end();
  await ended;
  return Buffer.concat(chunks);
}
