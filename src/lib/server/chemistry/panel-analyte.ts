import { checkedGroups, type ChargeGroups } from './charge';
import { ChemistryError } from './errors';

/** What of an analyte decides how it behaves in an extraction; what the library does not hold is null or left out. */
export interface PanelAnalyte {
  readonly id: string;
  readonly name: string;
  readonly logKow: number | null;
  /** True when log Kow is predicted from the structure and nobody measured it. */
  readonly logKowIsPredicted?: boolean;
  readonly pkaAcid: readonly number[];
  readonly pkaBase: readonly number[];
  /** From the structure; see `readStructure`. */
  readonly permanentCharge?: number;
  readonly boilingPointC: number | null;
  readonly vapourPressurePa?: number | null;
  readonly henryPaM3Mol: number | null;
}

/** What is known of the charge of an analyte, or why nothing is. */
export type KnownCharge =
  | { readonly known: true; readonly groups: Required<ChargeGroups>; readonly hasPka: boolean }
  | { readonly known: false; readonly why: string };

/**
 * The groups of an analyte, as far as the library tells. An analyte without any pKa but with a log Kow that was not
 * predicted has been looked up and is taken to have no group; any other has not.
 * @returns `known: false` where nothing is on file, or where a value on file is impossible
 */
export function knownCharge(analyte: PanelAnalyte): KnownCharge {
  const { pkaAcid, pkaBase, permanentCharge = 0 } = analyte;
  const hasPka = pkaAcid.length + pkaBase.length > 0;
  // A predicted log Kow is no sign that anybody looked: the acid whose pKa is missing would pass for neutral.
  const wasLookedUp = analyte.logKow !== null && analyte.logKowIsPredicted !== true;
  if (!hasPka && !wasLookedUp && permanentCharge === 0) {
    return { known: false, why: 'neither pKa nor log Kow on file' };
  }
  try {
    return {
      known: true,
      groups: checkedGroups({ acids: pkaAcid, bases: pkaBase, permanentCharge }),
      hasPka
    };
  } catch (error) {
    if (error instanceof ChemistryError) return { known: false, why: error.message };
    throw error;
  }
}
