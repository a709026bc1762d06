import { chargeOfGroups, chargeShares, checkedGroups, lnUncharged, type ChargeGroups } from './charge';
import { ChemistryError } from './errors';
import { lastWhere } from './find-edge';
import { oneOf, phOf, share as checkedShare } from './guards';

export interface PhRange {
  readonly low: number;
  readonly high: number;
}

/** A stretch of pH in which a condition holds. An end that is not an edge is the end of the range that was asked about. */
export interface PhWindow extends PhRange {
  readonly lowIsEdge: boolean;
  readonly highIsEdge: boolean;
}

const conditions = ['neutral', 'charged', 'cation', 'anion'] as const;
/** `charged` is everything but neutral, zwitterions too; `cation` and `anion` go by the net charge. */
export type ChargeCondition = (typeof conditions)[number];

/** Returns the range, or throws when its ends are not two pH values in order. */
export function checkedRange({ low, high }: PhRange): PhRange {
  if (phOf(low, 'The lower pH') >= phOf(high, 'The upper pH')) {
    throw new ChemistryError(
      'out-of-range',
      `The lower pH must be below the upper one, found ${low} and ${high}.`
    );
  }
  return { low, high };
}

/**
 * The pH windows within `range` in which at least `share` of the molecules are in the condition.
 *
 * The edges are exact to the last digits: ln f_n has the slope ln 10 × mean charge, which falls with pH, so f_n rises to one peak
 * and falls; the net-positive share only falls and the net-negative one only rises. Each piece is searched by halving. Neutral
 * has at most one window, charged at most two.
 * @returns windows in order of pH, none when the condition holds nowhere
 * @throws ChemistryError for a share outside 0 to 1, a range that is not in order, or groups as in `fractionNeutral`
 */
export function phWindows(
  groups: ChargeGroups,
  condition: ChargeCondition,
  share = 0.99,
  range: PhRange = { low: 0, high: 14 }
): readonly PhWindow[] {
  const checked = checkedGroups(groups);
  oneOf(condition, conditions, 'The condition');
  checkedShare(share, 'The share');
  const { low, high } = checkedRange(range);
  const holds = claim(checked, condition, share);
  const turn = condition === 'neutral' || condition === 'charged' ? peakOf(checked, low, high) : null;
  return condition === 'charged'
    ? aroundPeak(holds, low, turn ?? low, high)
    : insideOf(holds, low, turn ?? (holds(low) ? low : high), high);
}

/**
 * The pH of the range at which most of the molecules are neutral, and their share there. Where it is flat (no groups) the lower end.
 * @returns share 0 where a permanent charge leaves none
 * @throws ChemistryError for a range that is not in order, or groups as in `fractionNeutral`
 */
export function mostNeutral(
  groups: ChargeGroups,
  range: PhRange
): { readonly ph: number; readonly share: number } {
  const checked = checkedGroups(groups);
  const { low, high } = checkedRange(range);
  const ph = peakOf(checked, low, high);
  return { ph, share: checked.permanentCharge === 0 ? Math.exp(lnUncharged(checked, ph)) : 0 };
}

function claim(groups: Required<ChargeGroups>, condition: ChargeCondition, share: number) {
  if (condition === 'cation' || condition === 'anion') {
    return (ph: number) => chargeShares(groups, ph)[condition] >= share;
  }
  const always = groups.permanentCharge !== 0;
  if (condition === 'neutral') return (ph: number) => !always && lnUncharged(groups, ph) >= Math.log(share);
  return (ph: number) => always || -Math.expm1(lnUncharged(groups, ph)) >= share;
}

/** The pH of the range at which the neutral share is largest: where the mean charge passes zero, or an end. */
function peakOf(groups: Required<ChargeGroups>, low: number, high: number): number {
  const rising = (ph: number) => chargeOfGroups(groups, ph) > 0;
  if (!rising(low)) return low;
  return rising(high) ? high : lastWhere(rising, low, high);
}

/** One window that contains `within`, or none. */
function insideOf(holds: (ph: number) => boolean, low: number, within: number, high: number): PhWindow[] {
  if (!holds(within)) return [];
  const lowIsEdge = !holds(low);
  const highIsEdge = !holds(high);
  return [
    {
      low: lowIsEdge ? lastWhere(holds, within, low) : low,
      high: highIsEdge ? lastWhere(holds, within, high) : high,
      lowIsEdge,
      highIsEdge
    }
  ];
}

/** The windows on either side of the peak of what is not wanted; the whole range where that peak is no obstacle. */
function aroundPeak(holds: (ph: number) => boolean, low: number, peak: number, high: number): PhWindow[] {
  if (holds(peak)) return [{ low, high, lowIsEdge: false, highIsEdge: false }];
  const windows: PhWindow[] = [];
  if (holds(low)) {
    windows.push({ low, high: lastWhere(holds, low, peak), lowIsEdge: false, highIsEdge: true });
  }
  if (holds(high)) {
    windows.push({ low: lastWhere(holds, high, peak), high, lowIsEdge: true, highIsEdge: false });
  }
  return windows;
}
