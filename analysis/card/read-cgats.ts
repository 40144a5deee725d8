import { xyzToLab } from '../colour/cie.ts';
import type { Triple } from '../colour/matrix.ts';
import { MeasurementError } from '../errors.ts';
import type { CardPatch } from './card.ts';

/** A CGATS text file (ISO 28178, ANSI CGATS.17): a header of keywords, then a table. */
export interface CgatsFile {
  /** Keywords and their values as written, quotes taken off; FOO of `KEYWORD "FOO"` included when it has a value. */
  readonly header: ReadonlyMap<string, string>;
  readonly fields: readonly string[];
  /** One row a set, with the line it began on. */
  readonly rows: readonly { readonly line: number; readonly values: readonly string[] }[];
}

interface Token {
  readonly text: string;
  readonly line: number;
  /** First of its line, and not in quotes: a keyword where keywords are looked for. */
  readonly first: boolean;
}

/**
 * Reads a CGATS text. Comments begin with #, strings may be quoted with "" inside, rows of the table may go over several lines.
 * @throws MeasurementError `bad-cgats`, the message naming the line
 */
export function readCgats(text: string): CgatsFile {
  const tokens = tokenise(text);
  const format = section(tokens, 'DATA_FORMAT');
  const data = section(tokens, 'DATA');
  const fields = format.map(({ text: name }) => name.toUpperCase());
  if (fields.length === 0)
    throw bad(1, 'there are no fields between BEGIN_DATA_FORMAT and END_DATA_FORMAT');
  const header = readHeader(tokens);
  checkCount(tokens, header, 'NUMBER_OF_FIELDS', fields.length, 'fields');
  const rows: { line: number; values: string[] }[] = [];
  for (let i = 0; i < data.length; i += fields.length) {
    const part = data.slice(i, i + fields.length);
    const line = part[0]!.line;
    if (part.length < fields.length) {
      throw bad(line, `this set has ${part.length} values where ${fields.length} fields are named`);
    }
    rows.push({ line, values: part.map(({ text: value }) => value) });
  }
  checkCount(tokens, header, 'NUMBER_OF_SETS', rows.length, 'sets');
  return { header, fields, rows };
}

function tokenise(text: string): Token[] {
  const tokens: Token[] = [];
  text.split(/\r\n?|\n/).forEach((content, i) => {
    let first = true;
    let rest = content.trim();
    while (rest !== '' && !rest.startsWith('#')) {
      const quoted = rest.startsWith('"');
      const found = (quoted ? /^"((?:[^"]|"")*)"/ : /^[^\s"]+/).exec(rest);
      if (!found) throw bad(i + 1, 'a quoted string does not end');
      const value = quoted ? found[1]!.replaceAll('""', '"') : found[0];
      tokens.push({ text: value, line: i + 1, first: first && !quoted });
      rest = rest.slice(found[0].length).trim();
      first = false;
    }
  });
  return tokens;
}

/** What stands between BEGIN_… and END_…. */
function section(tokens: readonly Token[], name: string): Token[] {
  const begin = tokens.findIndex((t) => t.first && t.text === `BEGIN_${name}`);
  if (begin < 0) throw bad(tokens.at(-1)?.line ?? 1, `BEGIN_${name} is missing`);
  const length = tokens.slice(begin).findIndex((t) => t.first && t.text === `END_${name}`);
  if (length < 0) throw bad(tokens[begin]!.line, `BEGIN_${name} has no END_${name}`);
  return tokens.slice(begin + 1, begin + length);
}

function readHeader(tokens: readonly Token[]): Map<string, string> {
  const header = new Map<string, string>();
  let inside = false;
  tokens.forEach((token, i) => {
    if (!token.first) return;
    if (token.text.startsWith('BEGIN_')) inside = true;
    else if (token.text.startsWith('END_')) inside = false;
    else if (!inside) {
      const next = tokens[i + 1];
      header.set(token.text.toUpperCase(), next?.line === token.line ? next.text : '');
    }
  });
  return header;
}

function checkCount(
  tokens: readonly Token[],
  header: ReadonlyMap<string, string>,
  keyword: string,
  found: number,
  what: string,
): void {
  const told = header.get(keyword);
  if (told === undefined || Number(told) === found) return;
  const line = tokens.find((t) => t.first && t.text.toUpperCase() === keyword)!.line;
  throw bad(line, `${keyword} is ${told}, but there are ${found} ${what}`);
}

/**
 * The patches of a CGATS file: CIELAB from LAB_L, LAB_A, LAB_B, or else from XYZ_X, XYZ_Y, XYZ_Z with Y = 100 for white; both D50, as
 * ISO 13655 has it. Named by SAMPLE_NAME, else SAMPLE_ID, else their number; in the file's order.
 * @throws MeasurementError `bad-cgats`, the message naming the line
 */
export function patchesFromCgats(text: string): CardPatch[] {
  const { header, fields, rows } = readCgats(text);
  const illuminant = header.get('ILLUMINATION_NAME') ?? header.get('ILLUMINANT') ?? 'D50';
  if (illuminant.toUpperCase() !== 'D50') {
    throw new MeasurementError(
      'bad-cgats',
      `The CGATS file is for ${illuminant}; values for D50 are needed. Export the measurement for D50 and 2°.`,
    );
  }
  const column = (name: string) => fields.indexOf(name);
  const lab = ['LAB_L', 'LAB_A', 'LAB_B'].map(column);
  const xyz = ['XYZ_X', 'XYZ_Y', 'XYZ_Z'].map(column);
  const hasLab = lab.every((i) => i >= 0);
  if (!hasLab && !xyz.every((i) => i >= 0)) {
    throw new MeasurementError(
      'bad-cgats',
      'The CGATS file has neither LAB_L, LAB_A, LAB_B nor XYZ_X, XYZ_Y, XYZ_Z. Export it with CIELAB values.',
    );
  }
  const names = [column('SAMPLE_NAME'), column('SAMPLE_ID')].filter((i) => i >= 0);
  return rows.map(({ line, values }, n) => {
    const read = (hasLab ? lab : xyz).map((i) => toNumber(values[i]!, fields[i]!, line));
    const id = names.map((i) => values[i]!).find((name) => name !== '') ?? String(n + 1);
    const triple = read as unknown as Triple;
    if (hasLab) return { id, lab: triple };
    return { id, lab: xyzToLab([triple[0] / 100, triple[1] / 100, triple[2] / 100]) };
  });
}

function toNumber(text: string, field: string, line: number): number {
  const value = Number(text.replace(/^(-?\d+),(\d+)$/, '$1.$2'));
  if (text === '' || !Number.isFinite(value))
    throw bad(line, `${field} is “${text}”, not a number`);
  return value;
}

function bad(line: number, what: string): MeasurementError {
  return new MeasurementError(
    'bad-cgats',
    `The CGATS file can’t be read: line ${line}, ${what}. Correct the file or export it again.`,
  );
}
