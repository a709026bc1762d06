import { givenText } from '../../../domain/given-text';
import type { BedParameters, ChemistryParameters } from '../../../schemas/panel-chemistry';
import type { ChemistryFindingView } from '../../../views/chemistry';
import type { BreakthroughView, EstimateView } from '../../../views/panel-chemistry';
import { bedCapacity, bedVolumes, estimateBreakthrough, type SorbentKind } from '../../chemistry';
import { bedKind } from './beds';
import type { ReadSubstance } from './read-substance';

/** Where nobody says: the bed that published methods use for half a litre, and the loss that reviews speak of. */
const usual = { bedMassMg: 500, lossPercent: 5 } as const;

const twoDigits = (value: number): string => givenText(Number(value.toPrecision(2)));
const percent = ({ low, middle, high }: EstimateView): EstimateView => ({
  low: 100 * low,
  middle: 100 * middle,
  high: 100 * high
});

function capacityFinding(
  kind: SorbentKind,
  bedMassMg: number,
  what: string,
  matrix: string
): ChemistryFindingView {
  const { low, high, unit, source, standing } = bedCapacity(kind, bedMassMg);
  return {
    text: `${matrix} of the matrix take their part, usually more than the analytes do. How much does this sample bring?`,
    evidence: `${givenText(bedMassMg)} mg of ${what} hold ${twoDigits(low)} to ${twoDigits(high)} ${unit} in all.`,
    source,
    standing
  };
}

/** What a bed would take of a sample before the substance passes, as an estimate, and what it can hold. */
export function breakthroughView(
  { analyte, charge }: ReadSubstance,
  ph: number,
  { phase, bed, plates, loss, volume }: BedParameters & Pick<ChemistryParameters, 'phase'>
): BreakthroughView {
  const bedMassMg = bed ?? usual.bedMassMg;
  const lossPercent = loss ?? usual.lossPercent;
  const kind = bedKind(phase);
  const about = { bed: kind, bedMassMg, plates, lossPercent, sampleVolumeMl: volume };
  const isIonic =
    charge.known &&
    (analyte.pkaAcid.length + analyte.pkaBase.length > 0 || charge.groups.permanentCharge !== 0);
  const capacity = [
    capacityFinding(phase, bedMassMg, kind.label, 'Humic substances'),
    ...(isIonic ? [capacityFinding('ion-exchange', bedMassMg, 'an ion exchanger', 'Salts')] : [])
  ];
  if (!charge.known || analyte.logKow === null) {
    const why = !charge.known
      ? `Nothing can be estimated: ${charge.why}.`
      : 'Nothing can be estimated without a log Kow.';
    return { ...about, estimate: null, why, capacity };
  }
  const found = estimateBreakthrough({
    logKow: analyte.logKow,
    groups: charge.groups,
    ph,
    phase,
    bedMassMg,
    loss: lossPercent / 100,
    sampleVolumeMl: volume,
    ...(plates === null ? {} : { plates })
  });
  return {
    ...about,
    estimate: {
      holdUpMl: found.holdUpMl,
      bedVolumes: volume === null ? null : bedVolumes(volume, bedMassMg),
      retentionMl: found.retentionMl,
      breakthroughMl: found.breakthroughMl,
      lostPercent: found.lossOfSample && percent(found.lossOfSample),
      cautions: found.cautions
    },
    why: null,
    capacity
  };
}
