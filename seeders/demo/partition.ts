import { libraryAnalyte } from '../library/analytes';
import type { LibraryAnalyte } from '../library/sourced';
import type { DemoAnalyte } from './panel';

/*
 * How the generator lets a substance behave. The laws are simple on purpose and stand apart from the program's own
 * chemistry: what the program reports about the demo is tested against them.
 */

/** Ion pairs keep a charged substance from leaving the organic phase altogether (log units below log Kow). */
const ionPairFloor = 3.5;

export function chemistryOf(analyte: DemoAnalyte): LibraryAnalyte {
  return libraryAnalyte(analyte.behavesAs);
}

const logKowOf = (analyte: DemoAnalyte): number => chemistryOf(analyte).logKow?.value ?? 0;

/** Share of the molecules whose acid groups are not ionised. */
function acidsNeutral(analyte: DemoAnalyte, ph: number): number {
  return (chemistryOf(analyte).pkaAcid?.value ?? []).reduce(
    (share, pka) => share / (1 + 10 ** (ph - pka)),
    1
  );
}

/** Share of the molecules whose base groups are not protonated. */
function basesNeutral(analyte: DemoAnalyte, ph: number): number {
  return (chemistryOf(analyte).pkaBase?.value ?? []).reduce(
    (share, pka) => share / (1 + 10 ** (pka - ph)),
    1
  );
}

/** Share that a cation exchanger sees: protonated, and without an anionic group that is pushed away. */
export function cationShare(analyte: DemoAnalyte, ph: number): number {
  return (1 - basesNeutral(analyte, ph)) * acidsNeutral(analyte, ph);
}

/** log D = log Kow + log (neutral share), not below the ion pair. */
export function logD(analyte: DemoAnalyte, ph: number): number {
  const neutral = acidsNeutral(analyte, ph) * basesNeutral(analyte, ph);
  return Math.max(logKowOf(analyte) + Math.log10(neutral), logKowOf(analyte) - ionPairFloor);
}

/**
 * Share of a sample that a reversed phase holds back: retention volume V_R = V_M (1 + k) with log k = log D + 2,
 * and 1/(1 + (V/V_R)³) for the wash-out.
 */
export function heldByPolymer(analyte: DemoAnalyte, ph: number, sampleMl: number): number {
  const bedMl = 0.6;
  const retentionMl = bedMl * (1 + 10 ** (logD(analyte, ph) + 2 + analyte.polymerExtra));
  return 1 / (1 + (sampleMl / retentionMl) ** 3);
}

/** Share taken up by repeated shaking with dichloromethane, phase ratio organic over water each time. */
export function takenUp(analyte: DemoAnalyte, ph: number, phaseRatio: number, times: number): number {
  const partition = 10 ** (logD(analyte, ph) + analyte.dichloromethaneExtra);
  return 1 - 1 / (1 + partition * phaseRatio) ** times;
}

/** Share that a water layer in contact with the extract holds: great for the very hydrophilic, nil for the rest. */
export function hydrophilicShare(analyte: DemoAnalyte): number {
  return 1 / (1 + 10 ** (logKowOf(analyte) + 0.5));
}

/** Exponent of the loss while the solvent is blown off, from vapour pressure (Pa) and Henry constant (Pa·m³/mol). */
export function evaporationExponent(analyte: DemoAnalyte): number {
  const { vapourPressurePa, henryPaM3Mol } = chemistryOf(analyte);
  return 0.03 * (vapourPressurePa?.value ?? 0) ** 0.45 + 0.02 * Math.sqrt(henryPaM3Mol?.value ?? 0);
}

/** Share that strong ammonia in methanol frees from the cation exchanger: strong bases stay charged and hold on. */
export function freedByAmmonia(analyte: DemoAnalyte): number {
  return 0.3 + 0.67 * basesNeutral(analyte, 11.2);
}

/** Share of the neutral part that the first elution brings off the polymer: best at log Kow 2.5, less to either side. */
export function elutedFromPolymer(analyte: DemoAnalyte): number {
  return 0.965 - 0.02 * Math.abs(logKowOf(analyte) - 2.5);
}
