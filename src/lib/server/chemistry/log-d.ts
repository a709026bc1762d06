import { checkedGroups, lnUncharged, type ChargeGroups } from './charge';
import { fromMemory, type Finding } from './evidence';
import { logKowOf, phOf } from './guards';
import { shortText } from './text';

export interface LogD {
  /** null where a permanent charge leaves no neutral share to partition. */
  readonly logD: number | null;
  readonly neutralFraction: number;
  /** Where the partition of ion pairs usually takes over; not applied to `logD`. */
  readonly ionPairFloor: { readonly low: number; readonly high: number };
  /** Set where the figure lies below that floor, so that it says less than it seems to. */
  readonly caution: Finding | null;
}

/** Log units below log Kow at which ion pairs usually hold the partition (from memory, verify). */
const floorBelow = { least: 3, most: 4 };

/**
 * Distribution between octanol and water at a pH: log D = log Kow + log10 f_n, partition of the neutral share only.
 *
 * Ion pairs partition too and usually keep the real value from falling below log Kow − 3 to log Kow − 4; that is told as a
 * caution and never applied. Source: textbook, from memory.
 * @returns log D without unit
 * @throws ChemistryError for log Kow outside −20 to 30, or groups and pH as in `fractionNeutral`
 */
export function logD(logKow: number, groups: ChargeGroups, ph: number): LogD {
  const checked = checkedGroups(groups);
  logKowOf(logKow);
  const ln = lnUncharged(checked, phOf(ph));
  const permanent = checked.permanentCharge !== 0;
  const value = permanent ? null : logKow + ln / Math.LN10;
  const ionPairFloor = { low: logKow - floorBelow.most, high: logKow - floorBelow.least };
  const low = value === null || value < ionPairFloor.high;
  return {
    logD: value,
    neutralFraction: permanent ? 0 : Math.exp(ln),
    ionPairFloor,
    caution: low
      ? {
          text: 'Hardly anything is neutral at this pH. Ion pairs may partition more than this figure says: what counter-ions does the sample bring?',
          evidence: `Ion pairs usually hold the distribution 3 to 4 log units below log Kow, here between ${shortText(ionPairFloor.low)} and ${shortText(ionPairFloor.high)}.`,
          ...fromMemory('ion-pair floor')
        }
      : null
  };
}
