/**
 * Numbers of bonds, hydrogens counted, that an atom without unpaired electrons can have (octet and expanded octets, textbook; a charge
 * adds one to nitrogen and what stands right of it, and takes one from carbon and what stands left).
 * @returns null for elements that keep to no such rule, metals above all
 */
export function possibleBonds(atomicNumber: number, charge: number): readonly number[] | null {
  const rule = rules.get(atomicNumber);
  return rule ? rule(charge).filter((bonds) => bonds >= 0) : null;
}

const left = (neutral: number) => (charge: number) => [neutral - Math.abs(charge)];
const right = (neutral: number) => (charge: number) => [neutral + charge];
const rules: ReadonlyMap<number, (charge: number) => readonly number[]> = new Map([
  [1, left(1)],
  [5, (charge: number) => [3 - charge]],
  [6, left(4)],
  [7, right(3)],
  [8, right(2)],
  [9, right(1)],
  // Silicon and phosphorus take one or two ligands more as anions.
  [14, (charge: number) => [4 - charge, 4 - Math.abs(charge)]],
  [15, (charge: number) => [3 + charge, 5 + charge, 5 - charge]],
  ...[16, 34, 52].map((chalcogen) => [chalcogen, (q: number) => [2 + q, 4 + q, 6 + q]] as const),
  ...[17, 35, 53].map((halogen) => [halogen, (q: number) => [1 + q, 3 + q, 5 + q, 7 + q]] as const)
]);
