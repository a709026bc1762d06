import { NotFound } from '../../errors';
import type { ExperimentChoice, SubjectView } from '../../../views/findings';
import type { StudyExperiment } from './study-data';
import type { StudyFigures, VariantContext } from './study-figures';

/** What a page asks to see: a variant by its code, an experiment by its number, or whatever comes first. */
export interface SubjectQuery {
  readonly variant?: string | undefined;
  readonly experiment?: number | undefined;
}

/** The experiment that is looked at, and the variant it stands for. */
export interface Subject {
  readonly experiment: StudyExperiment | null;
  readonly context: VariantContext | null;
}

/**
 * Resolves what a page is about. An experiment that stands for a variant brings that variant; without a wish, the last variant
 * that was measured from the sample on comes, else the last with any experiment, else the last experiment spiked farthest up.
 * @throws NotFound for a variant or an experiment that the study does not have
 */
export function subjectOf(figures: StudyFigures, query: SubjectQuery): Subject {
  const { data } = figures;
  const experiment = query.experiment === undefined ? null : experimentByNumber(figures, query.experiment);
  const asked = query.variant === undefined ? null : variantByCode(figures, query.variant);
  if (experiment) {
    const variant =
      asked ??
      data.variants.find((item) => item.evidence.some((row) => row.experimentId === experiment.id)) ??
      null;
    const context = variant ? figures.variant(variant, experiment) : null;
    // An experiment below the top of the variant is looked at by itself.
    return { experiment, context: context?.top?.id === experiment.id ? context : null };
  }
  const variant =
    asked ??
    data.variants.findLast((item) => figures.variant(item).whole) ??
    data.variants.findLast((item) => figures.variant(item).top) ??
    null;
  if (variant) {
    const context = figures.variant(variant);
    return { experiment: context.whole, context };
  }
  return { experiment: farthestExperiments(figures).at(-1) ?? null, context: null };
}

export function experimentByNumber(figures: StudyFigures, number: number): StudyExperiment {
  const found = figures.data.experiments.find((item) => item.number === number);
  if (!found) throw new NotFound();
  return found;
}

export function variantByCode(figures: StudyFigures, code: string): StudyFigures['data']['variants'][number] {
  const found = figures.data.variants.find((item) => item.code.toLowerCase() === code.toLowerCase());
  if (!found) throw new NotFound();
  return found;
}

export function subjectView(figures: StudyFigures, subject: Subject): SubjectView {
  const variant = subject.context?.variant ?? null;
  return {
    variant: variant && { code: variant.code, name: variant.name },
    experiment: subject.experiment && experimentChoice(figures, subject.experiment),
    variants: figures.data.variants.map((item) => ({
      code: item.code,
      name: item.name,
      measured: figures.variant(item).top !== null
    })),
    experiments: farthestExperiments(figures).map((item) => experimentChoice(figures, item))
  };
}

export function experimentChoice(figures: StudyFigures, experiment: StudyExperiment): ExperimentChoice {
  return {
    number: experiment.number,
    title: experiment.title,
    stageName: stageName(figures, experiment.stageKey)
  };
}

export function stageName(figures: StudyFigures, key: string): string {
  return figures.data.stages.find((stage) => stage.key === key)?.name ?? key;
}

/** The experiments spiked farthest upstream: what a whole method is judged by. */
function farthestExperiments(figures: StudyFigures): StudyExperiment[] {
  const { stages, experiments } = figures.data;
  const farthest = [...stages]
    .reverse()
    .find((stage) => experiments.some((item) => item.stageKey === stage.key));
  return experiments.filter((item) => item.stageKey === farthest?.key);
}
