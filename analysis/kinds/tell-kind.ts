import { readBlocks } from '../field/block-means.ts';
import { evennessOf, everyBlock } from '../field/evenness.ts';
import type { Capture, Frame } from '../image.ts';
import type { Kind } from '../result.ts';
import { findPage } from '../time/find-page.ts';
import { findCard } from './measure-grey.ts';

export interface ToldKind {
  readonly kind: Kind;
  /** 0.5…1: how surely it isn't the next likeliest kind. */
  readonly confidence: number;
}

const columns = 32;
const rows = 24;
/** Mean code of 255 at which a lens-cap frame and a very dark scene are equally likely. Our choice. */
const darkCode = 12;
/** Structure of the light, as a share, at which an even surface and a plain scene are equally likely. Our choice. */
const evenRoughness = 0.02;
/** Aperture at which flat frames for dust begin and cards are seldom photographed. Our choice; dust asks for f/16 and more. */
const smallAperture = 11;
/** C*-like difference of the channels from which a surface has a colour of its own. */
const coloured = 0.12;

/**
 * What a frame shows when no target is in it and nothing was said, from how even it is, its level and the aperture.
 * A plain frame that is filled wholly is a flat field at f/11 and smaller or when it's brighter than a card is exposed; a card otherwise,
 * as is an even neutral surface that fills most of the middle before something else. The timing page is known by its rings and checksum.
 * All else is a scene; a rung of a ladder is a target like another until it is said to be one.
 */
export function tellKind(frame: Frame, capture: Capture): ToldKind {
  return (
    tellPlain(frame, capture) ??
    tellPage(frame) ??
    tellCard(frame) ?? { kind: 'scene', confidence: 0.8 }
  );
}

/** The timing page says itself what it is: four rings with an eight-bit checksum between them. */
function tellPage(frame: Frame): ToldKind | null {
  return findPage(frame) ? { kind: 'lag', confidence: 0.99 } : null;
}

/** Pixels of a block for the first look. */
const firstLook = 40;
/** How much more than a plain frame a first look may show: its means are noisier. Our choice. */
const loosely = 5;

/** Dark, flat and grey frames without anything in them; null for all others. Quick, and so surely no target that none is looked for. */
export function tellPlain(frame: Frame, capture: Capture): ToldKind | null {
  if (isBusy(frame)) return null;
  const blocks = readBlocks(frame, columns, rows);
  const all = everyBlock(blocks);
  const { mean, spread } = levelOf(blocks, all);
  if (mean < darkCode && spread < darkCode / 2)
    return { kind: 'dark', confidence: between(1 - Math.max(mean, 2 * spread) / darkCode) };
  const evenness = evennessOf(blocks, all);
  if (!evenness || evenness.roughness > evenRoughness || evenness.range > 3) return null;
  const surely = between(1 - evenness.roughness / evenRoughness);
  if (hasColour(blocks, all)) return null;
  const { fNumber } = capture;
  // Twice as bright as a card that is exposed right.
  const bright = mean > 165;
  if (fNumber !== null && fNumber >= smallAperture) return { kind: 'flat', confidence: surely };
  if (bright) return { kind: 'flat', confidence: Math.min(surely, 0.75) };
  return { kind: 'grey', confidence: Math.min(surely, fNumber === null ? 0.65 : 0.85) };
}

/** A look at few pixels: most pictures are so far from plain that it is enough. */
function isBusy(frame: Frame): boolean {
  const blocks = readBlocks(frame, columns, rows, firstLook);
  const all = everyBlock(blocks);
  const { mean, spread } = levelOf(blocks, all);
  if (mean < darkCode * loosely && spread < (darkCode / 2) * loosely) return false;
  const evenness = evennessOf(blocks, all);
  return evenness !== null && evenness.roughness > evenRoughness * loosely;
}

/** Of the blocks' mean codes, of 255: their mean, and the spread of all but 1 % at each end. */
function levelOf(
  { red, green, blue }: ReturnType<typeof readBlocks>,
  all: readonly number[],
): { mean: number; spread: number } {
  const codes = Float64Array.from(all, (b) => 85 * (red[b]! + green[b]! + blue[b]!)).sort();
  const mean = codes.reduce((s, v) => s + v, 0) / codes.length;
  const at = (share: number) => codes[Math.floor(share * codes.length)]!;
  return { mean, spread: at(0.99) - at(0.01) };
}

function tellCard(frame: Frame): ToldKind | null {
  const card = findCard(frame);
  if (!card || card.share < 0.45 || card.ofMiddle < 0.85 || card.roughness > evenRoughness)
    return null;
  if (hasColour(card.blocks, card.inside)) return null;
  return { kind: 'grey', confidence: between(Math.min(1, card.share / 0.9)) * 0.9 };
}

function hasColour(
  { red, green, blue }: { red: Float64Array; green: Float64Array; blue: Float64Array },
  among: readonly number[],
): boolean {
  const mean = (values: Float64Array) => among.reduce((s, b) => s + values[b]!, 0) / among.length;
  const [r, g, b] = [mean(red), mean(green), mean(blue)];
  return Math.max(r, g, b) - Math.min(r, g, b) > coloured;
}

function between(share: number): number {
  return 0.5 + 0.5 * Math.min(1, Math.max(0, share));
}
