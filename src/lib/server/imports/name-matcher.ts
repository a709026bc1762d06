import { nameKey, parseCas } from '../../domain/name-key';

export type NameMatch<T> =
  | { readonly kind: 'one'; readonly value: T }
  | { readonly kind: 'many'; readonly values: readonly T[] }
  | { readonly kind: 'none' };

/** Finds things by their names: as written first, then with case, spaces, hyphens and Greek letters folded. */
export class NameMatcher<T> {
  readonly #exact = new Map<string, Set<T>>();
  readonly #folded = new Map<string, Set<T>>();
  readonly #names: string[] = [];
  readonly #known = new Map<string, NameMatch<T>>();

  add(value: T, names: readonly string[]): void {
    for (const name of names) {
      if (name.trim() === '') continue;
      this.#names.push(name);
      put(this.#exact, name.trim(), value);
      const key = keyOf(name);
      if (key !== '') put(this.#folded, key, value);
    }
  }

  match(text: string): NameMatch<T> {
    const known = this.#known.get(text);
    if (known) return known;
    const found = this.#find(text);
    this.#known.set(text, found);
    return found;
  }

  get names(): readonly string[] {
    return this.#names;
  }

  /** The name that was perhaps meant; null where none is near. */
  nearest(text: string): string | null {
    return nearestName(text, this.#names);
  }

  #find(text: string): NameMatch<T> {
    const values = [...(this.#exact.get(text.trim()) ?? this.#folded.get(keyOf(text)) ?? [])];
    const [first] = values;
    if (first === undefined) return { kind: 'none' };
    return values.length === 1 ? { kind: 'one', value: first } : { kind: 'many', values };
  }
}

function keyOf(text: string): string {
  return parseCas(text) ?? nameKey(text);
}

function put<T>(map: Map<string, Set<T>>, key: string, value: T): void {
  const values = map.get(key);
  if (values) values.add(value);
  else map.set(key, new Set([value]));
}

/** The name at the smallest edit distance, where that is at most a quarter of its length (two letters at least). */
export function nearestName(text: string, names: readonly string[]): string | null {
  return nearestNames(text, names, 1)[0] ?? null;
}

/** As `nearestName`: the nearest names, the nearest first, those at one distance in their own order. */
export function nearestNames(text: string, names: readonly string[], count: number): readonly string[] {
  const wanted = nameKey(text);
  if (wanted.length < 2) return [];
  const near: { name: string; distance: number }[] = [];
  for (const name of names) {
    const key = nameKey(name);
    const allowed = Math.max(Math.min(2, key.length - 2), Math.floor(key.length / 4));
    if (Math.abs(key.length - wanted.length) > allowed) continue;
    const distance = editDistance(wanted, key);
    if (distance <= allowed) near.push({ name, distance });
  }
  near.sort((one, other) => one.distance - other.distance);
  return near.slice(0, count).map(({ name }) => name);
}

/** Number of letters to insert, remove or replace (Levenshtein 1966). */
function editDistance(one: string, other: string): number {
  let previous = Array.from({ length: other.length + 1 }, (_, index) => index);
  for (let row = 1; row <= one.length; row++) {
    const current = [row];
    for (let column = 1; column <= other.length; column++) {
      const replaced = (previous[column - 1] ?? 0) + (one[row - 1] === other[column - 1] ? 0 : 1);
      current.push(Math.min(replaced, (previous[column] ?? 0) + 1, (current[column - 1] ?? 0) + 1));
    }
    previous = current;
  }
  return previous[other.length] ?? 0;
}
