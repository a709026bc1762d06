import {
  breakthroughVolumeRatio,
  capacities,
  cartridgePlates,
  holdUpPerMass,
  lovkvistJonssonRatio,
  solventPairs,
  solvents,
  volatility,
  workingRanges,
  type Solvent,
  type SourcedRange
} from '$lib/server/chemistry';
import { givenText } from '$lib/domain/given-text';
import type { PageServerLoad } from './$types';

const losses = [0.01, 0.05, 0.1] as const;

const rangeText = ({ low, high }: Pick<SourcedRange, 'low' | 'high'>): string =>
  low === high ? givenText(low) : `${givenText(low)} to ${givenText(high)}`;

/** What of a solvent a row of the table shows, as text. */
function solventRow({
  name,
  boilingPointC,
  polarity,
  mixesWithWater,
  waterInSolvent,
  solventInWater,
  waterAzeotrope
}: Solvent) {
  const mixes = mixesWithWater ? 'mixes' : null;
  const azeotrope = waterAzeotrope === 'none' ? null : waterAzeotrope;
  return {
    name,
    boils: boilingPointC.value.toFixed(1),
    polarity: polarity?.value.toFixed(1) ?? null,
    waterIn: waterInSolvent ? rangeText(waterInSolvent) : mixes,
    inWater: solventInWater ? rangeText(solventInWater) : mixes,
    azeotropeBoils: waterAzeotrope === 'none' ? 'none' : (azeotrope?.boilingPointC.toFixed(1) ?? null),
    azeotropeWater: azeotrope ? givenText(azeotrope.percent) : null
  };
}

const nameOf = (key: string): string => solvents.find((solvent) => solvent.key === key)?.name ?? key;

/** The figures and statements of the page come from the module that the studies use, so that they cannot differ. */
export const load: PageServerLoad = () => ({
  breakthrough: [5, 10, 20, 50, 100].map((plates) => ({
    plates,
    ratios: losses.map((loss) => breakthroughVolumeRatio(plates, loss).toFixed(3)),
    published: lovkvistJonssonRatio(plates).toFixed(3)
  })),
  losses: losses.map((loss) => 100 * loss),
  evaporation: volatility({ vapourPressurePa: null, boilingPointC: 100, henryPaM3Mol: null }).findings,
  solvents: solvents.map(solventRow),
  pairs: solventPairs.map(
    ({ first, second, boilingPointC, percent }) =>
      `${nameOf(first)} and ${nameOf(second)}: ${givenText(boilingPointC)} °C, ${givenText(percent)} % of the first`
  ),
  quoted: {
    silica: rangeText(workingRanges.c18),
    polymer: rangeText(workingRanges.polymer),
    plates: rangeText(cartridgePlates),
    holdUp: rangeText(holdUpPerMass),
    c18: rangeText(capacities.c18),
    polymerCapacity: rangeText(capacities.polymer),
    exchanger: rangeText(capacities['ion-exchange'])
  }
});
