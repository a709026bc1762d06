import { labelledStandards } from './labelled-standards';
import { pesticides } from './pesticides';
import { pharmaceuticals } from './pharmaceuticals';
import { phenolsAminesAndHydrocarbons } from './phenols-amines-and-hydrocarbons';
import type { LibraryAnalyte } from './sourced';

/** What the library of a new lab begins with: 42 substances of several classes, and standards to add to them. */
export const libraryAnalytes: readonly LibraryAnalyte[] = [
  ...pharmaceuticals,
  ...phenolsAminesAndHydrocarbons,
  ...pesticides,
  ...labelledStandards
];

/** A substance of the library by its name. @throws RangeError when the library has none of that name */
export function libraryAnalyte(name: string): LibraryAnalyte {
  const found = libraryAnalytes.find((analyte) => analyte.name === name);
  if (!found) throw new RangeError(`the library has no analyte named ${name}`);
  return found;
}
