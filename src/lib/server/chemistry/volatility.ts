import { documents, practice, type Finding } from './evidence';
import { notNegative, within } from './guards';
import { shortText } from './text';

/** What is known of how readily a substance leaves. null where the library does not say. */
export interface VolatileProperties {
  readonly vapourPressurePa: number | null;
  readonly boilingPointC: number | null;
  readonly henryPaM3Mol: number | null;
}

export interface Volatility {
  /** `high` as those that methods name as lost on evaporation, `some` where loss is likely below 1 mL. */
  readonly level: 'high' | 'some' | 'low' | 'unknown';
  /** The Henry constant is such that it leaves water for air. */
  readonly leavesWater: boolean;
  /** The properties that speak for the level, in sentences. */
  readonly reasons: readonly string[];
  readonly findings: readonly Finding[];
}

/*
 * Common practice, no source: they raise a question and decide nothing. The upper pair is set so that pyridine, 1,4-dioxane and
 * the dichlorobenzenes, which 8270E names, fall above it, the lower so that the cresols of 3535A do.
 */
const high = { boilingPointC: 181, vapourPressurePa: 150 } as const;
const some = { boilingPointC: 220, vapourPressurePa: 10 } as const;
/** Above it a substance leaves stirred or aerated water noticeably. */
const henryLimit = 1;

/**
 * How likely a substance is to leave while the bed is dried and the extract is concentrated, with what published methods say.
 *
 * Vapour pressure at ambient temperature decides before the boiling point, and the more volatile of both counts. The Henry
 * constant speaks of leaving water, so it adds a finding and does not raise the level. Ionised substances do not evaporate; that
 * is for the reader to weigh.
 * @param properties Pa, °C and Pa·m³/mol
 * @param finalVolumeMl volume the extract is brought to, where it is planned
 * @throws ChemistryError for a negative pressure, Henry constant or volume, or a boiling point outside −273.15 to 5000 °C
 */
export function volatility(properties: VolatileProperties, finalVolumeMl: number | null = null): Volatility {
  const { vapourPressurePa, boilingPointC, henryPaM3Mol } = properties;
  if (vapourPressurePa !== null) notNegative(vapourPressurePa, 'The vapour pressure');
  if (boilingPointC !== null) within(boilingPointC, 'The boiling point', -273.15, 5000);
  if (henryPaM3Mol !== null) notNegative(henryPaM3Mol, 'The Henry constant');
  if (finalVolumeMl !== null) notNegative(finalVolumeMl, 'The final volume');
  const passes = (limit: typeof high | typeof some): boolean =>
    (vapourPressurePa !== null && vapourPressurePa >= limit.vapourPressurePa) ||
    (boilingPointC !== null && boilingPointC <= limit.boilingPointC);
  const level = passes(high)
    ? 'high'
    : passes(some)
      ? 'some'
      : vapourPressurePa === null && boilingPointC === null
        ? 'unknown'
        : 'low';
  const leavesWater = henryPaM3Mol !== null && henryPaM3Mol > henryLimit;
  return {
    level,
    leavesWater,
    reasons: reasonsOf(properties),
    findings: [...evaporation(level, finalVolumeMl), ...(leavesWater ? [fromWater(henryPaM3Mol)] : [])]
  };
}

function reasonsOf({ vapourPressurePa, boilingPointC, henryPaM3Mol }: VolatileProperties): readonly string[] {
  return [
    ...(vapourPressurePa === null ? [] : [`Vapour pressure ${shortText(vapourPressurePa)} Pa`]),
    ...(boilingPointC === null ? [] : [`Boiling point ${shortText(boilingPointC)} °C`]),
    ...(henryPaM3Mol === null ? [] : [`Henry constant ${shortText(henryPaM3Mol)} Pa·m³/mol`])
  ];
}

function evaporation(level: Volatility['level'], finalVolumeMl: number | null): readonly Finding[] {
  if (level === 'unknown') return [unknown];
  if (level === 'low') return [];
  const planned = finalVolumeMl === null ? '' : ` Planned here: ${shortText(finalVolumeMl)} mL.`;
  return [
    ...(level === 'high' ? [named, coolEnough] : []),
    {
      text: 'Could the extract stay at 1 mL or above? Below it, what is as volatile as the cresols may go.',
      evidence: `Below 1 mL semivolatile analytes such as cresols may be lost.${planned}`,
      ...documents.solidPhase('11.10.2.2')
    },
    {
      text: 'Is the extract never brought below 0.5 mL?',
      evidence: `Three methods for drinking water forbid it.${planned}`,
      ...documents.drinkingWater('521, 525.2 and 526')
    },
    {
      text: 'Is the bed dried for ten minutes and no longer?',
      evidence: 'Drying for longer than ten minutes loses nitrobenzene.',
      ...documents.drinkingWater('526')
    },
    {
      text: 'Would a spike before concentration, and the evaporator trap as a fraction, tell what leaves?',
      evidence: 'Only a stage of its own parts this loss from one in extraction.',
      ...practice
    }
  ];
}

const named: Finding = {
  text: 'As volatile as substances that a method names as lost while the extract is concentrated. Is there a gentler way?',
  evidence: 'Pyridine, dichlorobenzenes and 1,4-dioxane may be lost.',
  ...documents.gcMs('1.4.10')
};

const coolEnough: Finding = {
  text: 'Would nitrogen at 20 to 25 °C do?',
  evidence: 'The method for nitrosamines concentrates at 20 to 25 °C to 0.9 mL.',
  ...documents.drinkingWater('521')
};

const unknown: Finding = {
  text: 'Does anybody know its vapour pressure or boiling point? Without them nothing is said about evaporation.',
  evidence: 'The library holds neither.',
  ...practice
};

function fromWater(henryPaM3Mol: number): Finding {
  return {
    text: 'It leaves water for air. Is the bottle filled to the top, and little air drawn through the wet bed?',
    evidence: `Henry constant ${shortText(henryPaM3Mol)} Pa·m³/mol, above ${henryLimit}.`,
    ...practice
  };
}
