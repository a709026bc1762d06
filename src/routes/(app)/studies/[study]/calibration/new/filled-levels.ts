type Row = Readonly<Record<string, unknown>>;

/**
 * The rows of the level grid in which a concentration stands, of the level or of one analyte; the others were offered and passed
 * over. Their places among each other are those that problems are told by.
 */
export function filledLevels(rows: unknown): readonly Row[] {
  return Array.isArray(rows) ? (rows as Row[]).filter(isFilled) : [];
}

/** What stands in a row for one analyte, as it was typed. */
export function cellText(row: Row | undefined, entryId: string): string {
  const { cells } = row ?? {};
  const text = isRecord(cells) ? cells[entryId] : undefined;
  return typeof text === 'string' ? text : '';
}

const isRecord = (value: unknown): value is Row => typeof value === 'object' && value !== null;

function isFilled({ concentrationNgPerMl, cells }: Row): boolean {
  return [concentrationNgPerMl, ...(isRecord(cells) ? Object.values(cells) : [])].some(
    (value) => typeof value === 'string' && value.trim() !== ''
  );
}
