import { checkedGroups, type ChargeGroups } from './charge';
import { ChemistryError } from './errors';
import type { IonisableGroup } from './ionisable-groups';

/** What of an analyte decides how it behaves in an extraction; what the library does not hold is null or left out. */
export interface PanelAnalyte {
  readonly id: string;
  readonly name: string;
  readonly logKow: number | null;
  /** True when log Kow is predicted from the structure and nobody measured it. */
  readonly logKowIsPredicted?: boolean;
  readonly pkaAcid: readonly number[];
  readonly pkaBase: readonly number[];
  /** Both from the structure; see `readStructure`. */
  readonly permanentCharge?: number;
  readonly ionisable?: readonly IonisableGroup[];
  readonly boilingPointC: number | null;
  readonly vapourPressurePa?: number | null;
  readonly henryPaM3Mol: number | null;
}

/** What is known of the charge of an analyte, or why nothing is. */
export type KnownCharge =
  | {
      readonly known: true;
      readonly groups: Required<ChargeGroups>;
      readonly hasPka: boolean;
      /** Groups of the structure that may be ionised somewhere and have no pKa on file. */
      readonly possible: readonly string[];
    }
  | { readonly known: false; readonly why: string };

/**
 * The groups of an analyte, as far as the library tells. An analyte without any pKa but with a log Kow has been looked up and is
 * taken to have no group, unless its structure shows one; one without either has not been looked up.
 * @returns `known: false` where nothing is on file, where the structure has an acid or a base that is certain and no pKa of that kind
 * is on file, or where a value on file is impossible
 */
export function knownCharge(analyte: PanelAnalyte): KnownCharge {
  const { pkaAcid, pkaBase, permanentCharge = 0, ionisable = [], logKow } = analyte;
  const hasPka = pkaAcid.length + pkaBase.length > 0;
  if (!hasPka && logKow === null && permanentCharge === 0) {
    return { known: false, why: 'neither pKa nor log Kow on file' };
  }
  const without = ionisable.filter(({ kind }) => (kind === 'acid' ? pkaAcid : pkaBase).length === 0);
  const missing = without.filter(({ sureness }) => sureness === 'certain').map(({ name }) => name);
  // A permanent charge stays whatever else there is.
  if (missing.length > 0 && permanentCharge === 0) {
    return { known: false, why: `the structure shows ${missing.join(' and ')}, and no pKa of it is on file` };
  }
  try {
    const groups = checkedGroups({ acids: pkaAcid, bases: pkaBase, permanentCharge });
    return { known: true, groups, hasPka, possible: without.map(({ name }) => name) };
  } catch (error) {
    if (error instanceof ChemistryError) return { known: false, why: error.message };
    throw error;
  }
}
