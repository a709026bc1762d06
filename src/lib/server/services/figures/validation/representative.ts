import type { StudyPanelEntry } from '../study-data';

/** The entry with the most of something: what a sentence over a whole panel speaks of. Null for an empty panel. */
export function representative(
  entries: readonly StudyPanelEntry[],
  countOf: (entry: StudyPanelEntry) => number
): StudyPanelEntry | null {
  return entries.reduce<StudyPanelEntry | null>(
    (best, entry) => (best === null || countOf(entry) > countOf(best) ? entry : best),
    null
  );
}
