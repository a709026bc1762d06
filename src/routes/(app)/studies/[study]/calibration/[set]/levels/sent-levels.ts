/**
 * The rows of the grid that say something: those of stored levels, and new ones in which anything was typed. A row that was passed
 * over keeps its place, so that a problem is told at the row it belongs to.
 */
export function sentLevels(sent: Record<string, unknown>): Record<string, unknown> {
  const rows = Array.isArray(sent.levels) ? (sent.levels as Record<string, unknown>[]) : [];
  const last = rows.findLastIndex(isFilled);
  return { ...sent, levels: rows.slice(0, last + 1) };
}

function isFilled(row: Readonly<Record<string, unknown>>): boolean {
  const cells = typeof row.cells === 'object' && row.cells !== null ? Object.values(row.cells) : [];
  return [row.id, row.label, ...cells].some((value) => typeof value === 'string' && value.trim() !== '');
}
