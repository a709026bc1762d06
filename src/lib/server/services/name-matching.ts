import { distance } from 'fastest-levenshtein';
import { nameKey, parseCas } from '../../domain/name-key';
import type { NameMatch } from '../../views/library';
import { briefOf, type NamedAnalyte } from './library-rows';

interface Index {
  readonly byCas: ReadonlyMap<string, NamedAnalyte>;
  readonly byName: ReadonlyMap<string, readonly NamedAnalyte[]>;
  readonly bySynonym: ReadonlyMap<string, readonly NamedAnalyte[]>;
}

function gathered(
  analytes: readonly NamedAnalyte[],
  textsOf: (analyte: NamedAnalyte) => readonly string[]
): Map<string, NamedAnalyte[]> {
  const map = new Map<string, NamedAnalyte[]>();
  for (const analyte of analytes) {
    for (const key of new Set(textsOf(analyte).map(nameKey))) {
      if (key !== '') map.set(key, [...(map.get(key) ?? []), analyte]);
    }
  }
  return map;
}

function indexOf(analytes: readonly NamedAnalyte[]): Index {
  return {
    byCas: new Map(analytes.flatMap((analyte) => (analyte.cas ? [[analyte.cas, analyte] as const] : []))),
    byName: gathered(analytes, ({ name }) => [name]),
    bySynonym: gathered(analytes, ({ synonyms }) => synonyms)
  };
}

const casLike = /(?<![\d-])\d{2,7}-\d{2}-\d(?![\d-])/;

/** A line of a pasted list, taken apart: a CAS number anywhere in it, and the names that stand in its cells. */
function partsOf(line: string): {
  readonly cas: string | null;
  readonly casText: string | null;
  readonly names: readonly string[];
} {
  const casText = casLike.exec(line.normalize('NFKC').replace(/[\u2010-\u2015\u2212]/g, '-'))?.[0] ?? null;
  const rest = casText ? line.replace(/[\u2010-\u2015\u2212]/g, '-').replace(casText, '\t') : line;
  const names = rest
    .split(/[\t;|]/)
    .map((cell) => cell.replace(/^[\s,•*]+|[\s,(]+$/g, '').trim())
    .filter((cell) => /\p{L}/u.test(cell) && !/^cas\b.{0,10}$/i.test(cell));
  return { cas: casText ? parseCas(casText) : null, casText, names };
}

const mostNear = 3;

/** What is spelled nearly like the name: at most a quarter of its letters differ, or one contains the other. */
function nearTo(name: string, analytes: readonly NamedAnalyte[]): NamedAnalyte[] {
  const key = nameKey(name);
  if (key.length < 3) return [];
  const allowed = Math.max(1, Math.floor(key.length / 4));
  const ranked = analytes.flatMap((analyte) => {
    const keys = [analyte.name, ...analyte.synonyms].map(nameKey);
    const closest = Math.min(...keys.map((other) => distance(key, other)));
    if (closest <= allowed) return [{ analyte, rank: closest }];
    const contains = keys.some((other) => other.length >= 4 && (other.includes(key) || key.includes(other)));
    return contains ? [{ analyte, rank: allowed + 1 }] : [];
  });
  return ranked
    .sort((a, b) => a.rank - b.rank || a.analyte.name.localeCompare(b.analyte.name))
    .slice(0, mostNear)
    .map(({ analyte }) => analyte);
}

function matchLine(line: string, index: Index, analytes: readonly NamedAnalyte[]): NameMatch {
  const { cas, casText, names } = partsOf(line);
  const none = (problem: string, near: readonly NamedAnalyte[]): NameMatch => ({
    line,
    analyte: null,
    matchedBy: null,
    near: near.map(briefOf),
    problem
  });
  const named = names.map((name) => {
    const key = nameKey(name);
    const byName = index.byName.get(key) ?? [];
    return byName.length > 0
      ? { by: 'name' as const, found: byName }
      : { by: 'synonym' as const, found: index.bySynonym.get(key) ?? [] };
  });
  const hit = named.find(({ found }) => found.length > 0);
  const near = names.flatMap((name) => nearTo(name, analytes)).slice(0, mostNear);

  if (casText && !cas) {
    return none(`${casText} is not a CAS number: its check digit does not fit.`, hit ? hit.found : near);
  }
  const byCas = cas ? index.byCas.get(cas) : undefined;
  if (byCas) {
    const other = hit?.found.find(({ id }) => id !== byCas.id);
    if (hit && !hit.found.includes(byCas) && other) {
      return none(`The CAS number is that of ${byCas.name}, the name that of ${other.name}.`, [byCas, other]);
    }
    return { line, analyte: briefOf(byCas), matchedBy: 'CAS number', near: [], problem: null };
  }
  if (!hit) {
    return none(
      cas ? `The library has nothing with CAS number ${cas}.` : 'The library has no such name.',
      near
    );
  }
  const [only, second] = hit.found;
  if (second || !only) return none('More than one analyte goes by this name.', hit.found);
  if (cas && only.cas) {
    return none(`The name is that of ${only.name}, whose CAS number is ${only.cas}, not ${cas}.`, [only]);
  }
  return { line, analyte: briefOf(only), matchedBy: hit.by, near: [], problem: null };
}

/** Recognises pasted lines, each a name, a CAS number or both in any order; empty lines are passed over. */
export function matchNames(
  lines: readonly string[],
  analytes: readonly NamedAnalyte[]
): readonly NameMatch[] {
  const index = indexOf(analytes);
  return lines
    .map((line) => line.trim())
    .filter((line) => line !== '')
    .map((line) => matchLine(line, index, analytes));
}
