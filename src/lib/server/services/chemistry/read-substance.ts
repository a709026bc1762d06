import type { LogKowView } from '../../../views/structure';
import type { ChargeCurveView, ChargeView } from '../../../views/panel-chemistry';
import {
  chargeShares,
  fractionNeutral,
  phWindows,
  type ChargeGroups,
  type ChargeShares,
  type PanelAnalyte,
  type PhWindow
} from '../../chemistry';
import { knownCharge, type KnownCharge } from '../../chemistry/panel-analyte';
import { knownStructure } from './known-structure';
import { logKowView } from './structure-view';
import type { Substance } from './panel-substances';

/** A substance as the chemistry takes it, with what was read from its structure. */
export interface ReadSubstance<Kind extends Substance = Substance> {
  readonly substance: Kind;
  readonly logKow: LogKowView | null;
  readonly analyte: PanelAnalyte;
  readonly charge: KnownCharge;
}

/**
 * Reads what the library holds of a substance, and from its structure what the library lacks: a log Kow that nobody typed, a
 * charge that stays, groups that ionise and have no pKa. A structure that cannot be read tells nothing.
 * @param id what the answer is known by: the panel entry, or the analyte
 */
export async function readSubstance<Kind extends Substance>(
  substance: Kind,
  id: string
): Promise<ReadSubstance<Kind>> {
  const { smiles } = substance;
  const known = smiles === null ? null : await knownStructure(smiles);
  const structure = known?.read ? known.structure : null;
  const found = logKowView(substance, structure);
  const hasPka = substance.pkaAcid.length + substance.pkaBase.length > 0;
  // A prediction is no sign that anybody looked for a pKa: an acid without one would pass for neutral.
  const logKow = found?.basis === 'predicted' && !hasPka && !structure?.permanentCharge ? null : found;
  const analyte: PanelAnalyte = {
    id,
    name: substance.name,
    logKow: logKow?.value ?? null,
    logKowIsPredicted: logKow?.basis === 'predicted',
    pkaAcid: substance.pkaAcid,
    pkaBase: substance.pkaBase,
    permanentCharge: structure?.permanentCharge ?? 0,
    ionisable: structure?.ionisable ?? [],
    boilingPointC: substance.boilingPointC,
    vapourPressurePa: substance.vapourPressurePa,
    henryPaM3Mol: substance.henryPaM3Mol
  };
  return { substance, logKow, analyte, charge: knownCharge(analyte) };
}

const curveStep = 0.25;
/** Places of a share that a drawing or a table of the curve can use. */
const rounded = (share: number): number => Math.round(share * 1e4) / 1e4;
const ranges = (windows: readonly PhWindow[]) => windows.map(({ low, high }) => ({ low, high }));

/** The neutral share over the axis from pH 0 to 14, and where at least 99 % is neutral or charged. */
export function chargeCurve(charge: KnownCharge): ChargeCurveView {
  if (!charge.known) return { curve: null, neutralRanges: [], chargedRanges: [], unknown: charge.why };
  const { groups } = charge;
  const values = Array.from({ length: 14 / curveStep + 1 }, (_, index) =>
    rounded(fractionNeutral(groups, index * curveStep))
  );
  return {
    curve: { from: 0, step: curveStep, values },
    neutralRanges: ranges(phWindows(groups, 'neutral')),
    chargedRanges: ranges(phWindows(groups, 'charged')),
    unknown: null
  };
}

/** What most of a substance carries at a pH: the largest of the four shares. */
export function mostly({ neutral, cation, anion, zwitterion }: ChargeShares): ChargeView {
  const largest = Math.max(neutral, cation, anion, zwitterion);
  if (largest === neutral) return 'none';
  if (largest === cation) return 'positive';
  return largest === anion ? 'negative' : 'both';
}

/** The shares at a pH, and what most of it carries. */
export function chargeAt(groups: ChargeGroups, ph: number) {
  const shares = chargeShares(groups, ph);
  return { shares, charge: mostly(shares) };
}
