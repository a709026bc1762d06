import { demoPanel, demoRecovered, type DemoAnalyte } from './panel';
import { createRandom, type Random } from './random';
import { spikeNg, surrogateNg } from './experiments';
import type { PlannedExperiment, PlannedFraction, PlannedPortion } from './planned';
import { sampleVolumeMl, type Shifts } from './truth';

/** The seed of everything in the demo study: the same numbers wherever it is built. */
export const demoSeed = 26_127;

/** Strength of the injection standards: in every vial, in the whole final extract, and in every calibration level. */
export const standardNgPerMl = 50;
export const standardNg = 50;
export const calibrationNgPerMl: readonly number[] = [0.5, 2, 10, 50, 100, 250, 500];
/** Below the lowest level there is no peak: "ND". Read against a standard, the level counts as a ratio to it. */
export const leastNgPerMl = 0.5;

/** One injection as the instrument reports it. */
export interface SimulatedInjection {
  /** Label of the portion or of the calibration level. */
  readonly sample: string;
  /** Name of the fraction; null for standards. */
  readonly fraction: string | null;
  readonly injection: number;
  readonly finalVolumeMl: number | null;
  readonly dilution: number;
  readonly aliquotShare: number;
  /** Area by substance; null: not detected. */
  readonly areas: ReadonlyMap<string, number | null>;
  /** Area of each injection standard. */
  readonly standardAreas: ReadonlyMap<string, number>;
}

/** What one portion held and where it went, ng: `amount` = the sum of the fractions + `lost`. */
export interface SimulatedPortion {
  readonly portion: PlannedPortion;
  readonly contents: ReadonlyMap<
    string,
    { readonly amount: number; readonly fractions: Readonly<Record<string, number>>; readonly lost: number }
  >;
}

const standards = demoPanel.filter(({ role }) => role === 'injection internal standard');

/** Where a solvent standard is found: in its vial, which is no fraction of anything. */
const standardFraction: PlannedFraction = {
  name: '',
  kind: 'elution',
  countsAs: 'method',
  passedStages: [],
  finalVolumeMl: 1,
  aliquotShare: 1,
  dilution: 1
};

/** ng by the label that go in where the experiment is spiked; what a portion receives afterwards is none of it. */
function addedBefore(analyte: DemoAnalyte, experiment: PlannedExperiment, { kind }: PlannedPortion): number {
  if (analyte.role === 'surrogate') {
    const isForMatrixEffect = kind === 'post-extraction spike' || kind === 'solvent standard';
    return isForMatrixEffect && experiment.stage === 'extraction' ? 0 : surrogateNg;
  }
  return kind === 'spiked' || kind === 'solvent standard' ? spikeNg : 0;
}

/** ng of a substance that one portion starts with. */
function amountIn(analyte: DemoAnalyte, experiment: PlannedExperiment, portion: PlannedPortion): number {
  const isExtracted = experiment.stage === 'extraction' && portion.kind !== 'solvent standard';
  const native =
    isExtracted && portion.kind !== 'method blank' ? (analyte.nativeNgPerL * sampleVolumeMl) / 1000 : 0;
  const handled = isExtracted ? analyte.contaminationNg : 0;
  return native + handled + addedBefore(analyte, experiment, portion) * analyte.strength;
}

function shiftsOf(chance: Random, evaporation: number): Shifts {
  return { retention: chance.normal(0.12), elution: chance.normal(0.15), evaporation };
}

/**
 * Carries every portion of an experiment through. One portion's volumes and hands move all its substances together, each
 * substance scatters on top, and the steps themselves are now a little better, now a little worse.
 */
export function simulatePortions(
  experiment: PlannedExperiment,
  seed = demoSeed
): readonly SimulatedPortion[] {
  return experiment.portions.map((portion) => {
    const chance = createRandom(seed, `portion ${experiment.key} ${portion.label}`);
    const day = portion.batch === null ? 1 : createRandom(seed, `day ${portion.batch}`).factor(0.005);
    const whole = chance.factor(experiment.scatter.portion) * day * (portion.mishap?.left ?? 1);
    const evaporation = chance.factor(0.14);
    const contents = new Map(
      demoRecovered.map((analyte) => {
        const scatter = chance.factor(experiment.scatter.substance * analyte.unrest);
        const amount = amountIn(analyte, experiment, portion) * whole * scatter;
        const { collected, lost } =
          portion.kind === 'solvent standard'
            ? { collected: { [standardFraction.name]: 1 }, lost: 0 }
            : experiment.split(analyte, shiftsOf(chance, evaporation));
        const fractions = Object.fromEntries(
          Object.entries(collected).map(([name, share]) => [name, amount * share])
        );
        return [analyte.name, { amount, fractions, lost: amount * lost }] as const;
      })
    );
    return { portion, contents };
  });
}

/** The instrument on the day of a calibration: its overall sensitivity, and how each substance has drifted. */
function sensitivity(seed: number, calibration: number, name: string): number {
  const overall = createRandom(seed, `instrument ${calibration}`).factor(0.06);
  return overall * createRandom(seed, `response ${calibration} ${name}`).factor(0.03);
}

/** Areas of one vial: `concentrations` of the substances and of the injection standards, ng/mL. */
function inject(
  chance: Random,
  seed: number,
  calibration: number,
  concentrations: ReadonlyMap<string, number>,
  standardConcentration: number,
  signal: (analyte: DemoAnalyte) => number = () => 1
): Pick<SimulatedInjection, 'areas' | 'standardAreas'> {
  const volume = chance.factor(0.01);
  const area = (analyte: DemoAnalyte, concentration: number) =>
    Math.round(
      concentration *
        analyte.response *
        sensitivity(seed, calibration, analyte.name) *
        volume *
        chance.factor(0.009)
    );
  return {
    areas: new Map(
      demoRecovered.map((analyte) => {
        const concentration = (concentrations.get(analyte.name) ?? 0) * signal(analyte);
        const least = analyte.internalStandard
          ? (leastNgPerMl * standardConcentration) / standardNgPerMl
          : leastNgPerMl;
        return [analyte.name, concentration < least ? null : area(analyte, concentration)];
      })
    ),
    standardAreas: new Map(
      standards.map((standard) => [standard.name, area(standard, standardConcentration)])
    )
  };
}

/** What of a portion is measured: its fractions; after a late spike only the extract; of a standard the vial. */
function measuredFractions(
  { fractions }: PlannedExperiment,
  { kind }: PlannedPortion
): readonly PlannedFraction[] {
  if (kind === 'solvent standard') return [standardFraction];
  return kind === 'post-extraction spike'
    ? fractions.filter(({ countsAs }) => countsAs === 'method')
    : fractions;
}

/** Every injection of an experiment, with the areas that the instrument reports. */
export function simulateExperiment(
  experiment: PlannedExperiment,
  seed = demoSeed
): readonly SimulatedInjection[] {
  return simulatePortions(experiment, seed).flatMap((simulated) =>
    measuredFractions(experiment, simulated.portion).flatMap((fraction) =>
      simulateVial(experiment, simulated, fraction, seed)
    )
  );
}

function simulateVial(
  experiment: PlannedExperiment,
  { portion, contents }: SimulatedPortion,
  fraction: PlannedFraction,
  seed: number
): readonly SimulatedInjection[] {
  const chance = createRandom(seed, `vial ${experiment.key} ${portion.label} ${fraction.name}`);
  const isStandard = portion.kind === 'solvent standard';
  const finalVolumeMl = isStandard
    ? fraction.finalVolumeMl
    : Number((fraction.finalVolumeMl * (1 + chance.normal(0.02))).toFixed(2));
  const vialMl = finalVolumeMl * fraction.dilution;
  const late = portion.kind === 'post-extraction spike' ? spikeNg * chance.factor(0.01) : 0;
  const concentrations = new Map(
    demoRecovered.map(({ name, role, strength }) => {
      const found = (contents.get(name)?.fractions[fraction.name] ?? 0) * fraction.aliquotShare;
      return [name, (found + (role === 'target' ? late * strength : 0)) / vialMl];
    })
  );
  const isMasked =
    experiment.masked && !isStandard && portion.kind !== 'method blank' && fraction.countsAs === 'method';
  const standardConcentration = experiment.standardsIn === 'vial' ? standardNgPerMl : standardNg / vialMl;
  return Array.from({ length: experiment.injections }, (_, index) => ({
    sample: portion.label,
    fraction: isStandard ? null : fraction.name,
    injection: index + 1,
    finalVolumeMl,
    dilution: fraction.dilution,
    aliquotShare: fraction.aliquotShare,
    ...inject(chance, seed, experiment.calibration, concentrations, standardConcentration, (analyte) =>
      isMasked ? analyte.masking : 1
    )
  }));
}

export const levelLabel = (calibration: number, level: number): string =>
  `CAL ${calibration + 1}-${level + 1}`;

/** What a standard holds of one substance, ng/mL, and how much of its signal there is. */
type StandardContent = (analyte: DemoAnalyte) => { readonly concentration: number; readonly signal: number };

/** One injection of a solution that is made up and injected as it is: a level, a check, a blank. */
export function simulateStandard(
  calibration: number,
  stream: string,
  sample: string,
  contentOf: StandardContent,
  seed = demoSeed
): SimulatedInjection {
  const contents = new Map(demoRecovered.map((analyte) => [analyte.name, contentOf(analyte).concentration]));
  return {
    sample,
    fraction: null,
    injection: 1,
    finalVolumeMl: null,
    dilution: 1,
    aliquotShare: 1,
    ...inject(
      createRandom(seed, stream),
      seed,
      calibration,
      contents,
      standardNgPerMl,
      // The internal standards are in every vial alike.
      (analyte) => (contents.has(analyte.name) ? contentOf(analyte).signal : 1)
    )
  };
}

/** The injections of a calibration set, lowest level first. */
export function simulateCalibration(calibration: number, seed = demoSeed): readonly SimulatedInjection[] {
  return calibrationNgPerMl.map((concentration, level) => {
    const sample = levelLabel(calibration, level);
    const holds = () => ({ concentration, signal: 1 });
    return simulateStandard(calibration, `level ${sample}`, sample, holds, seed);
  });
}
