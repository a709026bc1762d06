import { amountsOf, type ExperimentAmounts } from '../../amounts/experiment-amounts';
import {
  flagsOfNumbers,
  numbersOf,
  numbersOfRecovery,
  type FigureFlags,
  type FlaggedPart
} from '../../amounts/figure-flags';
import { matrixFigures, type MatrixFigures } from '../../amounts/matrix-effects';
import { methodFigures, type MethodFigures } from '../../amounts/method-figures';
import { recoveryInput, type RecoveryRefusal } from '../../amounts/recovery-input';
import { relativeFigures, type RelativeFigures } from '../../amounts/relative-recovery';
import { sequenceChecks, type SequenceChecks } from '../../amounts/sequence-checks';
import { surrogateFigures, type SurrogateFigures } from '../../amounts/surrogates';
import { variantFigures, type StageOfVariant, type VariantFigures } from '../../amounts/variant-figures';
import { NotFound } from '../../errors';
import { criteriaFor, ruleOf, showsWholeMethod } from './criteria';
import type { StudyData, StudyExperiment, StudyPanelEntry, StudyVariant } from './study-data';

/** One analyte of one experiment: figures, or the reason why there are none. */
export type EntryFigures =
  | ({ readonly ready: true } & MethodFigures)
  | (RecoveryRefusal & { readonly relative: RelativeFigures | null });

/** Where a variant's stages are looked for: the matrix and level of the experiment at its top. */
export interface VariantContext {
  readonly variant: StudyVariant;
  /** The experiment that stands for the stage farthest upstream that has one; null: nothing is measured. */
  readonly top: StudyExperiment | null;
  /** `top` where it was spiked in the sample; null: nothing is known of the whole method yet. */
  readonly whole: StudyExperiment | null;
  readonly stages: readonly StageOfVariant[];
  readonly figures: VariantFigures;
}

/** The figures of one study, each formed when it is first asked for and kept. */
export interface StudyFigures {
  readonly data: StudyData;
  readonly entries: ReadonlyMap<string, StudyPanelEntry>;
  readonly targets: readonly StudyPanelEntry[];
  readonly surrogates: readonly StudyPanelEntry[];
  readonly amounts: (experimentId: string) => ExperimentAmounts;
  readonly entry: (experimentId: string, entryId: string) => EntryFigures;
  /** @param experiment one at the variant's top stage, where several stand for matrices and levels; else the first */
  readonly variant: (variant: StudyVariant, experiment?: StudyExperiment) => VariantContext;
  readonly surrogate: (experimentId: string, entryId: string) => SurrogateFigures;
  readonly matrix: (experimentId: string, entryId: string) => MatrixFigures | null;
  /** What was run to watch over the instrument, and what is flagged by it. */
  readonly checks: () => SequenceChecks;
  /** What the method recovery of an entry, or its balance, rests on that is flagged; null: nothing. */
  readonly flagged: (experimentId: string, entryId: string, part: FlaggedPart) => FigureFlags | null;
  /** The same of a surrogate, over all portions that received it. */
  readonly flaggedSurrogate: (experimentId: string, entryId: string) => FigureFlags | null;
}

/** @throws NotFound for ids that are not of this study */
export function studyFigures(data: StudyData): StudyFigures {
  const entries = new Map(data.panel.map((entry) => [entry.id, entry]));
  const targets = data.panel.filter((entry) => entry.role === 'target');
  const surrogates = data.panel.filter((entry) => entry.role === 'surrogate');
  const experiments = new Map(data.experiments.map((item) => [item.id, item]));
  const sets = new Map(data.calibrationSets.map((set) => [set.id, set]));
  const surrogateRule = ruleOf(data.criteriaSet.rules, 'surrogate recovery');
  const entryOf = (id: string): StudyPanelEntry => orNotFound(entries.get(id));

  const amounts = remembered((experimentId: string) => {
    const experiment = orNotFound(experiments.get(experimentId));
    return amountsOf(experiment, entries, sets.get(experiment.calibrationSetId ?? '') ?? null);
  });
  const perEntry = <Made>(make: (of: ExperimentAmounts, entry: StudyPanelEntry) => Made) => {
    const made = remembered((key: string): Made => {
      const [experimentId = '', entryId = ''] = key.split(' ');
      return make(amounts(experimentId), entryOf(entryId));
    });
    return (experimentId: string, entryId: string): Made => made(`${experimentId} ${entryId}`);
  };

  const entry = perEntry((of, item): EntryFigures => {
    const input = recoveryInput(of, item);
    if (!input.ready) {
      const relative = input.kind === 'relative only' ? relativeFigures(of, item) : null;
      return { ...input, relative };
    }
    if (showsWholeMethod(data, orNotFound(experiments.get(of.experiment.id))))
      return { ready: true, ...methodFigures(input, criteriaFor(data, item).criteria) };
    const figures = methodFigures(input, null);
    return figures.balance.method
      ? { ready: true, ...figures, reasons: ['criteria are for the whole method, spiked in the sample'] }
      : { ready: true, ...figures };
  });

  const checks = remembered(() =>
    sequenceChecks({
      panel: entries,
      sets: data.calibrationSets,
      experiments: data.experiments,
      checkStandards: data.checkStandards,
      checkReported: data.checkReported,
      sequences: data.sequences,
      injections: data.injections,
      rules: data.criteriaSet.rules
    })
  );

  const flaggedIn = (part: FlaggedPart) =>
    perEntry((of, item) => {
      const found = entry(of.experiment.id, item.id);
      const numbers = found.ready
        ? numbersOfRecovery(found, part)
        : found.portions.flatMap((portion) => numbersOf(portion, part));
      return flagsOfNumbers(numbers, item.id, checks(''));
    });
  const flagged = { method: flaggedIn('method'), balance: flaggedIn('balance') };
  const surrogate = perEntry((of, item) => surrogateFigures(of, item, surrogateRule));
  const flaggedSurrogate = perEntry((of, item) =>
    flagsOfNumbers(
      surrogate(of.experiment.id, item.id).portions.flatMap(({ portion }) => numbersOf(portion, 'method')),
      item.id,
      checks('')
    )
  );

  const contexts = remembered((key: string): VariantContext => {
    const [variantId, topId] = key.split(' ');
    const variant = orNotFound(data.variants.find((item) => item.id === variantId));
    const evidence = evidenceOf(data, variant, topId ? orNotFound(experiments.get(topId)) : null);
    const stages = data.stages.map((stage): StageOfVariant => {
      const experimentId = evidence.get(stage.key);
      const found = experimentId
        ? { amounts: amounts(experimentId), medium: orNotFound(experiments.get(experimentId)).medium }
        : null;
      return { key: stage.key, name: stage.name, kind: stage.kind, evidence: found };
    });
    const topKey = [...data.stages]
      .reverse()
      .find((stage) => stage.kind === 'loss' && evidence.has(stage.key))?.key;
    const top = topKey ? (experiments.get(evidence.get(topKey) ?? '') ?? null) : null;
    const whole = top && showsWholeMethod(data, top) ? top : null;
    return { variant, top, whole, stages, figures: variantFigures(stages, targets) };
  });

  return {
    data,
    entries,
    targets,
    surrogates,
    amounts,
    entry,
    variant: (variant, experiment) => contexts(experiment ? `${variant.id} ${experiment.id}` : variant.id),
    surrogate,
    matrix: perEntry((of, item) => matrixFigures(of, item)),
    checks: () => checks(''),
    flagged: (experimentId, entryId, part) => flagged[part](experimentId, entryId),
    flaggedSurrogate
  };
}

/** Which experiment stands for each stage, in the matrix and at the level of the one at the top. */
function evidenceOf(
  data: StudyData,
  variant: StudyVariant,
  top: StudyExperiment | null
): ReadonlyMap<string, string> {
  const asked = variant.evidence.find((item) => item.experimentId === top?.id);
  const farthest = [...data.stages]
    .reverse()
    .find((stage) => variant.evidence.some((item) => item.stageKey === stage.key));
  const context = asked ?? variant.evidence.find((item) => item.stageKey === farthest?.key) ?? null;
  const chosen = new Map<string, string>();
  for (const stage of data.stages) {
    const ofStage = variant.evidence.filter((item) => item.stageKey === stage.key);
    // The closest of those that speak for this matrix and level: of both, of one of them, in general. What was made in another
    // matrix or at another level stands for nothing here.
    const speaks = ofStage.filter(
      (item) =>
        (item.matrix === null || context?.matrix == null || item.matrix === context.matrix) &&
        (item.levelLabel === null || context?.levelLabel == null || item.levelLabel === context.levelLabel)
    );
    const closeness = (item: (typeof ofStage)[number]): number =>
      Number(item.matrix === (context?.matrix ?? null)) * 2 +
      Number(item.levelLabel === (context?.levelLabel ?? null));
    const match = [...speaks].sort((a, b) => closeness(b) - closeness(a))[0];
    if (match) chosen.set(stage.key, match.experimentId);
  }
  if (asked) chosen.set(asked.stageKey, asked.experimentId);
  return chosen;
}

function remembered<Made>(make: (key: string) => Made): (key: string) => Made {
  const made = new Map<string, Made>();
  return (key) => {
    if (!made.has(key)) made.set(key, make(key));
    return made.get(key) as Made;
  };
}

function orNotFound<Thing>(thing: Thing | undefined): Thing {
  if (thing === undefined) throw new NotFound();
  return thing;
}
