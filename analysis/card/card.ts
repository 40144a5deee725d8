import type { Triple } from '../colour/matrix.ts';
import reference from './reference-24.json' with { type: 'json' };

export interface CardPatch {
  readonly id: string;
  /** CIELAB, D50, 2° observer. */
  readonly lab: Triple;
}

/** A grid of equal patches, row by row from the top left as the card is read. */
export interface Card {
  readonly rows: number;
  readonly columns: number;
  readonly patches: readonly CardPatch[];
  /** Width of the bar between two patches over the distance of their centres. */
  readonly gap: number;
}

/** The common 24-patch card has bars of about an eighth of the pitch, measured on photographs of it. */
const commonGap = 0.13;

/**
 * The 24-patch colour card that ISO 17321-1 names, by its published average values. A single card departs from them; its own
 * measurement (see read-cgats.ts) is better.
 */
export function card24(made: 'before-november-2014' | 'after-november-2014'): Card {
  const labs =
    made === 'before-november-2014' ? reference.beforeNovember2014 : reference.afterNovember2014;
  return {
    rows: reference.rows,
    columns: reference.columns,
    gap: commonGap,
    patches: reference.names.map((id, i) => ({ id, lab: labs[i] as unknown as Triple })),
  };
}

/** A card of any shape; @throws RangeError when the patches don't fill it. */
export function createCard(
  patches: readonly CardPatch[],
  rows: number,
  columns: number,
  gap = commonGap,
): Card {
  if (patches.length !== rows * columns) {
    throw new RangeError(`${rows} × ${columns} patches are needed, not ${patches.length}`);
  }
  return { rows, columns, patches, gap };
}
