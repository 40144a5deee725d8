/**
 * The steps to which a baseline or progressive JPEG rounds the mean of an 8 × 8 block: the first entry of the luma and of
 * the chroma quantisation table over 8 (ITU-T T.81, B.2.4.1 and A.3.4). Null when the tables can't be found.
 */
export function readBlockStep(bytes: Uint8Array): { luma: number; chroma: number } | null {
  const first: (number | undefined)[] = [];
  for (const { marker, start, end } of segments(bytes)) {
    if (marker !== 0xdb) continue;
    for (let at = start; at < end; ) {
      const wide = bytes[at]! >> 4;
      first[bytes[at]! & 15] = wide ? bytes[at + 1]! * 256 + bytes[at + 2]! : bytes[at + 1]!;
      at += 1 + 64 * (wide ? 2 : 1);
    }
  }
  const luma = first[0];
  if (!luma) return null;
  return { luma: luma / 8, chroma: (first[1] ?? luma) / 8 };
}

/** Marker segments up to the start of the scan. */
function* segments(bytes: Uint8Array): Generator<{ marker: number; start: number; end: number }> {
  let at = 2;
  while (at + 4 <= bytes.length && bytes[at] === 0xff) {
    const marker = bytes[at + 1]!;
    if (marker === 0xda) return;
    const end = at + 2 + bytes[at + 2]! * 256 + bytes[at + 3]!;
    yield { marker, start: at + 4, end: Math.min(end, bytes.length) };
    at = end;
  }
}
