import { fractionKinds, type FractionKind } from '../domain/vocabulary';

/** How many colours the palette has; a slot beyond them repeats a colour under a second texture. */
export const paletteSize = 6;

/**
 * The slot of each fraction of an experiment: the place of its kind in the one order of the application, so that a
 * kind has the same colour on every screen. A second fraction of the same kind takes the first free slot after
 * the named kinds' own.
 */
export function fractionSlots(kinds: readonly FractionKind[]): number[] {
  const own = new Set(kinds.map((kind) => fractionKinds.indexOf(kind)));
  const taken = new Set<number>();
  return kinds.map((kind) => {
    let slot = fractionKinds.indexOf(kind);
    if (taken.has(slot)) {
      slot = 0;
      while (taken.has(slot) || own.has(slot)) slot += 1;
    }
    taken.add(slot);
    return slot;
  });
}

export interface SlotLook {
  /** 1 to 6: the number of the colour token. */
  readonly colour: number;
  /** CSS colour. */
  readonly fill: string;
  /** Pale on paper: gets a thin outline in ink. */
  readonly pale: boolean;
  /** Dark marks show on it, where the others take light ones. */
  readonly bright: boolean;
  /** Index of the texture that print lays over the colour. */
  readonly texture: number;
  /** The colour is used a second time: the texture shows on screen too. */
  readonly repeated: boolean;
}

/** Colour and texture of a slot. */
export function slotLook(slot: number): SlotLook {
  const colour = (slot % paletteSize) + 1;
  return {
    colour,
    fill: `var(--fraction-${colour})`,
    pale: colour === 4 || colour === 6,
    bright: colour === 2 || colour === 4 || colour === 6,
    texture: slot % paletteSize,
    repeated: slot >= paletteSize
  };
}
