/** Atoms of each element, as a formula without brackets counts them; deuterium and tritium as D and T. */
export type AtomCounts = ReadonlyMap<string, number>;

/** The atoms of a plain formula such as "C12H7O2Cl3". */
export function atomCounts(formula: string): AtomCounts {
  const counts = new Map<string, number>();
  for (const [, element = '', count = ''] of formula.matchAll(/([A-Z][a-z]?)(\d*)/g)) {
    counts.set(element, (counts.get(element) ?? 0) + (count === '' ? 1 : Number(count)));
  }
  return counts;
}

/**
 * The formula in the order of E. A. Hill (J. Am. Chem. Soc. 22 (1900) 478): carbon, hydrogen and its isotopes, then by letter; all by
 * letter without carbon.
 */
export function hillFormula(counts: AtomCounts): string {
  const first = counts.has('C') ? ['C', 'H', 'D', 'T'] : [];
  const rank = (element: string) => {
    const place = first.indexOf(element);
    return place >= 0 ? `${place}` : `9${element}`;
  };
  return [...counts]
    .filter(([, count]) => count > 0)
    .sort(([a], [b]) => (rank(a) < rank(b) ? -1 : 1))
    .map(([element, count]) => (count === 1 ? element : `${element}${count}`))
    .join('');
}

/**
 * Standard atomic weights (IUPAC 2021, abridged or conventional values; from memory, verify) of elements that analytes are made of,
 * and the masses of deuterium and tritium.
 */
const atomicWeights: Readonly<Record<string, number>> = {
  H: 1.008,
  D: 2.014102,
  T: 3.016049,
  Li: 6.94,
  B: 10.81,
  C: 12.011,
  N: 14.007,
  O: 15.999,
  F: 18.998403,
  Na: 22.989769,
  Mg: 24.305,
  Al: 26.981538,
  Si: 28.085,
  P: 30.973762,
  S: 32.06,
  Cl: 35.45,
  K: 39.0983,
  Ca: 40.078,
  Mn: 54.938043,
  Fe: 55.845,
  Co: 58.933194,
  Ni: 58.6934,
  Cu: 63.546,
  Zn: 65.38,
  As: 74.921595,
  Se: 78.971,
  Br: 79.904,
  Sn: 118.71,
  Sb: 121.76,
  I: 126.90447,
  Pt: 195.084,
  Hg: 200.592,
  Pb: 207.2
};

/** Σ count × standard atomic weight in g/mol; null where an element is not in the table. */
export function molarMassOf(counts: AtomCounts): number | null {
  let sum = 0;
  for (const [element, count] of counts) {
    const weight = atomicWeights[element];
    if (weight === undefined) return null;
    sum += weight * count;
  }
  return sum;
}
