/** The five groups of a study's pages, in the order of the work. */
export const studyGroups = ['Overview', 'Plan', 'Bench', 'Findings', 'Record'] as const;
export type StudyGroup = (typeof studyGroups)[number];

export interface NavigationItem {
  readonly href: string;
  readonly label: string;
  /** How many there are, or a word on the state ("2 new", "draft"). */
  readonly count?: number | string | undefined;
}

export interface NavigationGroup {
  readonly group: StudyGroup;
  readonly items: readonly NavigationItem[];
}

/**
 * The item whose page is shown: the one whose address is the path or the longest beginning of it, so that a page
 * below "Experiments" still marks Experiments.
 */
export function currentItem(groups: readonly NavigationGroup[], path: string): NavigationItem | null {
  const fits = groups
    .flatMap(({ items }) => items)
    .filter(({ href }) => path === href || path.startsWith(`${href}/`));
  return fits.reduce<NavigationItem | null>(
    (best, item) => (best === null || item.href.length > best.href.length ? item : best),
    null
  );
}
