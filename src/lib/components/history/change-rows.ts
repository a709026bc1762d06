/** One member of what an event changed, as text; null on the side that does not have it. */
export interface ChangeRow {
  readonly name: string;
  readonly before: string | null;
  readonly after: string | null;
}

const isRecord = (value: unknown): value is Readonly<Record<string, unknown>> =>
  typeof value === 'object' && value !== null && !Array.isArray(value);

/** "sampleVolumeMl" and "sample_volume" as words; "replicateId" is the replicate. */
export function worded(name: string): string {
  return name
    .replace(/(?<=.)(?:_id|Id)(s?)$/, '$1')
    .replace(/_/g, ' ')
    .replace(/([a-z0-9])([A-Z])/g, (_all, left: string, right: string) => `${left} ${right.toLowerCase()}`);
}

function textOf(value: unknown): string | null {
  if (value === undefined || value === null || value === '') return null;
  if (typeof value === 'boolean') return value ? 'yes' : 'no';
  if (typeof value === 'string' || typeof value === 'number') return String(value);
  if (Array.isArray(value)) return value.map((item) => textOf(item) ?? '—').join('; ');
  if (isRecord(value)) {
    return Object.entries(value)
      .map(([name, member]) => `${worded(name)}: ${textOf(member) ?? '—'}`)
      .join(', ');
  }
  return null;
}

/**
 * What an event changed, member by member, in the order in which they were written. Members that are the same on
 * both sides are left out.
 */
export function changeRows(before: unknown, after: unknown): readonly ChangeRow[] {
  const sides = [before, after].map((side) => (isRecord(side) ? side : side === null ? {} : { value: side }));
  const [left = {}, right = {}] = sides as [Record<string, unknown>, Record<string, unknown>];
  return [...new Set([...Object.keys(left), ...Object.keys(right)])]
    .map((name) => ({ name: worded(name), before: textOf(left[name]), after: textOf(right[name]) }))
    .filter((row) => row.before !== row.after);
}
