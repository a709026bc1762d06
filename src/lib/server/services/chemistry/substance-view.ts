import { givenText } from '../../../domain/given-text';
import type { SourcedPropertyView, SubstanceAtPhView, SubstanceView } from '../../../views/panel-chemistry';
import { ChemistryError, logD, volatility, type Volatility } from '../../chemistry';
import { listed } from '../changes';
import { chargeAt, chargeCurve, type ReadSubstance } from './read-substance';
import { structureView } from './structure-view';
import type { Substance } from './panel-substances';

const several = (values: readonly number[]): string | null =>
  values.length === 0 ? null : values.map((value) => givenText(value)).join('; ');
const figure = (value: number | null, unit: string): string | null =>
  value === null ? null : `${givenText(value)}\u00a0${unit}`;

/** What the library holds of charge and volatility, each value with its source. */
function propertiesOf(substance: Substance): readonly SourcedPropertyView[] {
  const { sources } = substance;
  const held: readonly (readonly [string, string | null, string])[] = [
    ['pKa, acid groups', several(substance.pkaAcid), 'pkaAcid'],
    ['pKa, base groups', several(substance.pkaBase), 'pkaBase'],
    ['Vapour pressure', figure(substance.vapourPressurePa, 'Pa'), 'vapourPressurePa'],
    ['Boiling point', figure(substance.boilingPointC, '°C'), 'boilingPointC'],
    ['Henry constant', figure(substance.henryPaM3Mol, 'Pa m³/mol'), 'henryPaM3Mol'],
    ['Solubility in water', figure(substance.waterSolubilityMgL, 'mg/L'), 'waterSolubilityMgL']
  ];
  return held.flatMap(([label, value, key]) =>
    value === null ? [] : [{ label, value, source: sources[key] ?? null }]
  );
}

const levels: Readonly<Record<Volatility['level'], string>> = {
  high: 'As volatile as what published methods name as lost on concentration.',
  some: 'Volatile enough to be lost where an extract is brought below 1 mL.',
  low: 'Nothing in the library speaks for a loss by evaporation.',
  // The finding says it.
  unknown: ''
};

/** A value on file that cannot be, such as a boiling point of 9000 °C, is told and not reckoned with. */
function volatilityView(substance: Substance, finalVolumeMl: number | null): SubstanceView['volatility'] {
  try {
    const { level, findings } = volatility(substance, finalVolumeMl);
    return { sentence: levels[level], findings };
  } catch (error) {
    if (!(error instanceof ChemistryError)) throw error;
    return { sentence: `Nothing is said of evaporation: ${error.message}`, findings: [] };
  }
}

/** What the library leaves open of the charge, as a question; null: nothing. */
function assumedOf({ charge }: ReadSubstance): string | null {
  if (!charge.known || charge.groups.permanentCharge !== 0) return null;
  if (charge.possible.length > 0)
    return `The structure shows something that may take up or lose a proton (${listed(charge.possible)}), and the library holds no pKa of it. Is it charged at a pH that is used?`;
  return charge.hasPka
    ? null
    : 'The library holds no pKa, so it is taken to have no group that ionises. Is that so?';
}

function atPh({ charge, logKow }: ReadSubstance, ph: number): readonly SubstanceAtPhView[] {
  if (!charge.known) return [];
  const distribution = logKow && logD(logKow.value, charge.groups, ph);
  return [
    {
      ph,
      ...chargeAt(charge.groups, ph),
      logD: distribution?.logD ?? null,
      caution: distribution?.caution ?? null
    }
  ];
}

/**
 * Everything the program can say of a substance without a measurement: structure, charge over pH and at the given ones, log D,
 * volatility.
 * @param finalVolumeMl volume that the extract is brought to, where one is planned
 */
export async function substanceView(
  substance: Substance,
  read: ReadSubstance,
  phs: readonly number[],
  finalVolumeMl: number | null = null
): Promise<SubstanceView> {
  const { charge } = read;
  return {
    analyteId: substance.id,
    name: substance.name,
    cas: substance.cas,
    class: substance.class,
    version: substance.version,
    structure: await structureView(substance),
    properties: propertiesOf(substance),
    assumed: assumedOf(read),
    atPhs: phs.flatMap((ph) => atPh(read, ph)),
    volatility: volatilityView(substance, finalVolumeMl),
    ...chargeCurve(charge)
  };
}
