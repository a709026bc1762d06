/** Isotopes that are written with a letter of their own, or as a mass before the element. */
const spelled: Readonly<Record<string, string>> = { '2H': 'D', '3H': 'T' };

/**
 * The atoms of a molecular formula by element, or null where the text is none: "C8H9D5ClN5", "C8H9(2H)5ClN5", "C2H6O · HCl".
 * Brackets and parts are multiplied out; charges do not count.
 */
export function atomsOf(formula: string): ReadonlyMap<string, number> | null {
  const text = formula
    .normalize('NFKC')
    .replace(/[[(]([23])H[\])]/g, (_, mass: string) => spelled[`${mass}H`] ?? '')
    // "SO4 2-" has a charge of two, "C8H10-" ten hydrogens and a charge of one.
    .replace(/(?:\s+\d*|\^\d*)?[+\u2212-]+\s*$/, '')
    .replace(/\s+/g, '');
  const total = new Map<string, number>();
  for (const part of text.split(/[·•.*]/)) {
    const [, times = '', body = ''] = /^(\d*)(.*)$/.exec(part) ?? [];
    const atoms = body === '' ? null : atomsOfPart(body);
    if (atoms === null) return null;
    for (const [element, count] of atoms) {
      total.set(element, (total.get(element) ?? 0) + count * (times === '' ? 1 : Number(times)));
    }
  }
  return total;
}

function atomsOfPart(text: string): Map<string, number> | null {
  const levels: Map<string, number>[] = [new Map()];
  let rest = text;
  while (rest !== '') {
    const match = /^(?:([A-Z][a-z]?)(\d*)|(\()|\)(\d*))/.exec(rest);
    if (!match) return null;
    const [all, element, count, opening, times] = match;
    rest = rest.slice(all.length);
    const level = levels.at(-1);
    if (!level) return null;
    if (opening !== undefined) levels.push(new Map());
    else if (element !== undefined) level.set(element, (level.get(element) ?? 0) + Number(count || 1));
    else {
      const closed = levels.pop();
      const outer = levels.at(-1);
      if (!closed || !outer) return null;
      for (const [inner, number] of closed)
        outer.set(inner, (outer.get(inner) ?? 0) + number * Number(times || 1));
    }
  }
  return levels.length === 1 ? (levels[0] ?? null) : null;
}

/** True when two formulas count the same atoms, in whatever order they are written; null where one of them is no formula. */
export function sameFormula(one: string, other: string): boolean | null {
  const [a, b] = [atomsOf(one), atomsOf(other)];
  if (a === null || b === null) return null;
  return a.size === b.size && [...a].every(([element, count]) => b.get(element) === count);
}
