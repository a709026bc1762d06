/** Two states of a thing, cut down to what differs, as the history keeps them. */
export interface Changes {
  readonly before: Record<string, unknown>;
  readonly after: Record<string, unknown>;
  /** Names of what differs. */
  readonly names: readonly string[];
}

/** What differs between two states of a thing; values are compared as JSON. */
export function changesBetween<Values extends object>(before: Values, after: Partial<Values>): Changes {
  const old = before as Record<string, unknown>;
  const names = Object.keys(after).filter(
    (name) =>
      JSON.stringify(old[name] ?? null) !== JSON.stringify((after as Record<string, unknown>)[name] ?? null)
  );
  const pick = (source: Record<string, unknown>) =>
    Object.fromEntries(names.map((name) => [name, source[name] ?? null]));
  return { before: pick(old), after: pick(after as Record<string, unknown>), names };
}

/** "a, b and c". */
export function listed(items: readonly string[], most = 6): string {
  const shown =
    items.length > most ? [...items.slice(0, most - 1), `${items.length - most + 1} more`] : [...items];
  const last = shown.pop();
  return shown.length === 0 ? (last ?? '') : `${shown.join(', ')} and ${last}`;
}

/** "1 analyte", "3 analytes". */
export function counted(count: number, one: string, many = `${one}s`): string {
  return `${count} ${count === 1 ? one : many}`;
}
