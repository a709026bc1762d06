import { phFrom, phUpTo } from '../../../domain/ph-text';
import type { PanelChemistryRow, PhRangeView } from '../../../views/panel-chemistry';
import { listed } from '../changes';

/** True for an analyte of which at least 99 % is neutral at the chosen pH. */
export const isNeutral = ({ neutral }: PanelChemistryRow): boolean => neutral !== null && neutral >= 0.99;

/** Where analytes that are not neutral at the chosen pH would be, each of them with its count. */
function elsewhere(ranges: readonly PhRangeView[]): readonly (readonly [number, string])[] {
  const below = ranges.filter(({ low }) => low <= 0);
  const above = ranges.filter(({ low, high }) => low > 0 && high >= 14);
  const between = ranges.filter(({ low, high }) => low > 0 && high < 14);
  const [only] = between;
  return [
    [below.length, `below pH ${phUpTo(Math.min(...below.map(({ high }) => high)))}`] as const,
    [above.length, `above pH ${phFrom(Math.max(...above.map(({ low }) => low)))}`] as const,
    [
      between.length,
      between.length === 1 && only
        ? `from pH ${phFrom(only.low)} to ${phUpTo(only.high)}`
        : 'between two pH values of their own'
    ] as const
  ].filter(([count]) => count > 0);
}

const verb = (count: number): string => (count === 1 ? 'is' : 'are');

/**
 * A panel at a pH in a sentence or two: how many are at least 99 % neutral, and at which pH the others would be. Limits are
 * rounded so that they keep what they promise.
 * @returns '' for an empty panel
 */
export function panelLead(rows: readonly PanelChemistryRow[], ph: number): string {
  const known = rows.filter(({ neutral }) => neutral !== null);
  const unknown = rows.length - known.length;
  if (known.length === 0)
    return rows.length === 0 ? '' : `Of none of the ${rows.length} is the charge known.`;
  const others = known.filter((row) => !isNeutral(row));
  const ranges = others.flatMap(({ neutralRanges: [range] }) => (range ? [range] : []));
  const places = elsewhere(ranges).map(
    ([count, where], index) => `${count} ${index === 0 ? 'would be ' : ''}${where}`
  );
  const nowhere = others.length - ranges.length;
  const neutral = known.length - others.length;
  const what = others.length > 0 ? `${neutral} of ${known.length}` : `all ${known.length}`;
  return [
    `At pH ${ph}, ${known.length === 1 && neutral === 1 ? 'the one analyte' : what} ${verb(neutral)} at least 99 % neutral.`,
    ...(places.length > 0 ? [`Of the other ${others.length}, ${listed(places)}.`] : []),
    ...(nowhere > 0 ? [`${nowhere} ${verb(nowhere)} neutral at no pH.`] : []),
    ...(unknown > 0 ? [`Of ${unknown} the charge is not known.`] : [])
  ].join(' ');
}
