/** Text as typed, by row key and column key. */
export type TypedCells = Readonly<Record<string, Readonly<Record<string, string>>>>;

type Cells = Record<string, Record<string, string>>;

/** Cells that differ between two states of the grid, empty where they were taken back. */
export function changedCells(before: TypedCells, after: TypedCells): TypedCells {
  const changed: Cells = {};
  for (const row of new Set([...Object.keys(before), ...Object.keys(after)])) {
    for (const column of new Set([...Object.keys(before[row] ?? {}), ...Object.keys(after[row] ?? {})])) {
      const text = after[row]?.[column] ?? '';
      if (text !== (before[row]?.[column] ?? '')) (changed[row] ??= {})[column] = text;
    }
  }
  return changed;
}

/** Cells laid over others. */
export function laidOver(under: TypedCells, over: TypedCells): TypedCells {
  const next: Cells = Object.fromEntries(Object.entries(under).map(([row, own]) => [row, { ...own }]));
  for (const [row, own] of Object.entries(over)) next[row] = { ...next[row], ...own };
  return next;
}

/** Without empty cells, and without rows that hold none. */
export function filledCells(cells: TypedCells): TypedCells {
  return Object.fromEntries(
    Object.entries(cells).flatMap(([row, own]) => {
      const filled = Object.entries(own).filter(([, text]) => text !== '');
      return filled.length > 0 ? [[row, Object.fromEntries(filled)]] : [];
    })
  );
}
