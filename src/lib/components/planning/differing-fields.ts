export interface DifferingField {
  readonly key: string;
  readonly label: string;
  readonly stored: string;
  readonly typed: string;
}

type Fields = Readonly<Record<string, string>>;

/** Fields that travel with a form and are nobody's content. */
const carried = new Set([
  'version',
  'seen',
  'seenVersion',
  'seenRevision',
  'reason',
  'entryId',
  'replicateId',
  'panelEntryId'
]);

/** "fractions.0.countsAs" read aloud: "fractions 1, counts as". */
function spoken(key: string): string {
  return key
    .split('.')
    .map((part) =>
      /^\d+$/.test(part) ? String(Number(part) + 1) : part.replace(/([a-z])([A-Z])/g, '$1 $2').toLowerCase()
    )
    .join(' ');
}

/** The fields that were typed otherwise than they are stored; those whose names hold an id have no words for it and are left out. */
export function differingFields(
  typed: Fields,
  stored: Fields,
  labels: Fields = {}
): readonly DifferingField[] {
  const names = [...new Set([...Object.keys(stored), ...Object.keys(typed).filter((key) => key in stored)])];
  return names
    .filter((key) => !carried.has(key) && !/[0-9a-f]{8}-[0-9a-f]{4}-/.test(key) && !key.endsWith('.id'))
    .filter((key) => (typed[key] ?? '').trim() !== (stored[key] ?? '').trim())
    .map((key) => ({
      key,
      label: labels[key] ?? spoken(key),
      stored: stored[key] ?? '',
      typed: typed[key] ?? ''
    }));
}
