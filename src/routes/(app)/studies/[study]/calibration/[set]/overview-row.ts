import type { CalibrationSetView, FitCheckView, FitView } from '$lib/views/calibration';

/** What the list of a set shows of one analyte: a pick, so that a long panel sends no points. */
export interface OverviewRow extends Pick<
  FitView,
  'entryId' | 'name' | 'role' | 'sentence' | 'rse' | 'refusal'
> {
  readonly checks: readonly Pick<FitCheckView, 'rule' | 'holds' | 'value'>[];
  readonly chosenBy: string | null;
}

export const overviewRow = (fit: FitView): OverviewRow => ({
  entryId: fit.entryId,
  name: fit.name,
  role: fit.role,
  sentence: fit.sentence,
  rse: fit.rse,
  refusal: fit.refusal,
  checks: fit.checks.map(({ rule, holds, value }) => ({ rule, holds, value })),
  chosenBy: fit.choice?.by ?? null
});

/** "34 of 38 lines hold every rule; Atrazine and Simazine do not." */
export function standingSentence({
  fits,
  values,
  rules
}: Pick<CalibrationSetView, 'fits' | 'values' | 'rules'>): string {
  if (values === 0) return 'The levels are described; none of their areas is stored yet.';
  const drawn = fits.filter(({ refusal }) => refusal === null);
  const none = fits.length - drawn.length;
  const missing = none === 0 ? '' : ` ${none === 1 ? 'One analyte has' : `${none} analytes have`} no line.`;
  const ruled = drawn.filter(({ checks }) => checks.length > 0);
  // One direction of a curve is asked always; a set of criteria without rules for lines says nothing more.
  if (rules.length <= 1 || ruled.length === 0) {
    return `${drawn.length} lines; the study's criteria have no rule to hold them against.${missing}`;
  }
  const broken = ruled.filter(({ checks }) => checks.some(({ holds }) => !holds)).map(({ name }) => name);
  if (broken.length === 0) return `All ${ruled.length} lines hold every rule.${missing}`;
  const named =
    broken.length > 3 ? `${broken.slice(0, 3).join(', ')} and ${broken.length - 3} more` : listed(broken);
  return `${ruled.length - broken.length} of ${ruled.length} lines hold every rule; ${named} ${broken.length === 1 ? 'does' : 'do'} not.${missing}`;
}

const listed = (items: readonly string[]): string =>
  items.length < 2 ? items.join('') : `${items.slice(0, -1).join(', ')} and ${items.at(-1)}`;
