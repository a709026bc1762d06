import type { DemoAnalyte } from './panel';
import type { PlannedPortion } from './planned';
import { createRandom, type Random } from './random';
import { methodFractions, procedureSplit } from './truth';
import {
  lowContaminationNg,
  lowLevelLabel,
  lowLevelPanel,
  lowLevelRecovered,
  lowLevelsNgPerMl,
  lowSampleVolumeMl,
  lowStandardNg,
  lowStandardNgPerMl,
  lowSurrogateNg,
  type LowLevelExperiment
} from './low-level-plan';
import type { ReportedInjection } from './workbooks';

export const lowLevelSeed = 10_500;

/** Relative scatter of a portion, a day and a substance; of an injection; and the noise under a peak, ng/mL in the vial. */
export const lowScatter = {
  portion: 0.018,
  day: 0.025,
  substance: 0.025,
  injection: 0.013,
  noise: 0.18
} as const;
/** Below this there is no peak: "ND". */
const least = 0.5;

const standards = lowLevelPanel.filter(({ role }) => role === 'injection internal standard');

/** The one extract: both elutions together, dried and concentrated. */
export function lowShare(analyte: DemoAnalyte, shifts?: Parameters<typeof procedureSplit>[2]): number {
  const { collected } = procedureSplit(analyte, 'C', shifts);
  return methodFractions.C.reduce((sum, name) => sum + (collected[name] ?? 0), 0);
}

/** ng that one portion starts with, before anything is lost. */
export function lowAmount(
  analyte: DemoAnalyte,
  experiment: LowLevelExperiment,
  portion: PlannedPortion
): number {
  const { kind } = portion;
  const late = kind === 'post-extraction spike' || kind === 'solvent standard';
  const native =
    experiment.medium === 'sample matrix' && kind !== 'method blank'
      ? (analyte.nativeNgPerL * lowSampleVolumeMl) / 1000
      : 0;
  const handled = analyte.contaminationNg + (lowContaminationNg[analyte.name] ?? 0);
  const surrogate = late ? 0 : lowSurrogateNg * (experiment.shortSurrogates[portion.label] ?? 1);
  const added = analyte.role === 'surrogate' ? surrogate : kind === 'spiked' ? experiment.spikeNg : 0;
  return native + handled + added * analyte.strength;
}

function inject(
  chance: Random,
  seed: number,
  concentrations: ReadonlyMap<string, number>,
  standardConcentration: number,
  signal: (analyte: DemoAnalyte) => number = () => 1
): Pick<ReportedInjection, 'areas' | 'standardAreas'> {
  const sensitivity = (name: string): number => createRandom(seed, `low response ${name}`).factor(0.03);
  const area = (analyte: DemoAnalyte, concentration: number): number =>
    Math.round(
      concentration * analyte.response * sensitivity(analyte.name) * chance.factor(lowScatter.injection)
    );
  return {
    areas: new Map(
      lowLevelRecovered.map((analyte) => {
        const seen =
          (concentrations.get(analyte.name) ?? 0) * signal(analyte) + chance.normal(lowScatter.noise);
        return [analyte.name, seen < least ? null : area(analyte, seen)];
      })
    ),
    standardAreas: new Map(
      standards.map((standard) => [standard.name, area(standard, standardConcentration)])
    )
  };
}

export function simulateLowLevels(seed = lowLevelSeed): readonly ReportedInjection[] {
  return lowLevelsNgPerMl.map((concentration, level) => {
    const chance = createRandom(seed, `low level ${level}`);
    // Standards are made up by weight: their noise is that of the injection alone.
    const { standardAreas } = inject(chance, seed, new Map(), lowStandardNgPerMl);
    const areas = new Map(
      lowLevelRecovered.map((analyte) => {
        const sensitivity = createRandom(seed, `low response ${analyte.name}`).factor(0.03);
        return [
          analyte.name,
          Math.round(concentration * analyte.response * sensitivity * chance.factor(lowScatter.injection))
        ] as const;
      })
    );
    return {
      sample: lowLevelLabel(level),
      fraction: null,
      injection: 1,
      finalVolumeMl: null,
      dilution: 1,
      aliquotShare: 1,
      areas,
      standardAreas
    };
  });
}

/** Every injection of an experiment, with the areas that the instrument reports. */
export function simulateLowExperiment(
  experiment: LowLevelExperiment,
  seed = lowLevelSeed
): readonly ReportedInjection[] {
  const day = createRandom(seed, `low day ${experiment.performedOn}`).factor(lowScatter.day);
  return experiment.portions.map((portion) => {
    const chance = createRandom(seed, `low portion ${portion.label}`);
    const isStandard = portion.kind === 'solvent standard';
    const whole = chance.factor(lowScatter.portion) * day * (portion.mishap?.left ?? 1);
    const shifts = {
      retention: chance.normal(0.06),
      elution: chance.normal(0.08),
      evaporation: chance.factor(0.05)
    };
    const finalVolumeMl = isStandard ? 1 : Number((1 + chance.normal(0.02)).toFixed(2));
    const late =
      portion.kind === 'post-extraction spike' || isStandard ? experiment.spikeNg * chance.factor(0.01) : 0;
    const concentrations = new Map(
      lowLevelRecovered.map((analyte) => {
        const scatter = chance.factor(lowScatter.substance * analyte.unrest);
        const found = isStandard
          ? 0
          : lowAmount(analyte, experiment, portion) * lowShare(analyte, shifts) * whole * scatter;
        const after = analyte.role === 'target' ? late * analyte.strength : 0;
        return [analyte.name, (found + after) / finalVolumeMl];
      })
    );
    // What is masked is milder at pH 7 than in the acid extracts of the first study.
    const masks = experiment.medium === 'sample matrix' && !isStandard && portion.kind !== 'method blank';
    return {
      sample: portion.label,
      fraction: isStandard ? null : 'Extract',
      injection: 1,
      finalVolumeMl,
      dilution: 1,
      aliquotShare: 1,
      ...inject(chance, seed, concentrations, lowStandardNg / finalVolumeMl, ({ masking }) =>
        masks ? (1 + masking) / 2 : 1
      )
    };
  });
}
