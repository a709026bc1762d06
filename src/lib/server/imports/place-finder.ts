import { NameMatcher } from './name-matcher';
import type {
  Expectation,
  ExperimentExpectation,
  FractionExpectation,
  Place,
  ReplicateExpectation
} from './types';

export type FoundPlace =
  | {
      readonly kind: 'replicate';
      readonly experiment: ExperimentExpectation;
      readonly replicate: ReplicateExpectation;
    }
  | Exclude<Place, { readonly kind: 'extract' }>
  | { readonly kind: 'many'; readonly places: readonly string[] }
  | { readonly kind: 'none'; readonly nearest: string | null };

interface Labelled {
  readonly place: Exclude<FoundPlace, { readonly kind: 'many' | 'none' }>;
  readonly described: string;
}

/** Finds the replicate, the calibration level or the check that a sample label means. */
export class PlaceFinder {
  readonly #experiments: readonly ExperimentExpectation[];
  readonly #preferred: ExperimentExpectation | null;
  readonly #titles = new NameMatcher<ExperimentExpectation>();
  readonly #labels = new Map<string, NameMatcher<Labelled>>();
  readonly #levels = new NameMatcher<Labelled>();
  readonly #fractions = new Map<string, NameMatcher<FractionExpectation>>();
  readonly #known = new Map<string, FoundPlace>();

  /** @param templateExperimentId on our own template labels are looked up in its experiment only */
  constructor(expectation: Expectation, templateExperimentId: string | null) {
    this.#experiments = expectation.experiments.filter(
      ({ id }) => templateExperimentId === null || id === templateExperimentId
    );
    const preferredId = templateExperimentId ?? expectation.experimentId;
    this.#preferred = this.#experiments.find(({ id }) => id === preferredId) ?? null;
    for (const experiment of this.#experiments) this.#addExperiment(experiment);
    for (const set of expectation.calibrationSets) {
      for (const level of set.levels) {
        this.#levels.add(
          {
            place: { kind: 'level', calibrationSetId: set.id, levelId: level.id },
            described: `level ${level.name} of calibration ${set.name}`
          },
          [level.name]
        );
      }
      for (const check of set.checks) {
        this.#levels.add(
          {
            place: {
              kind: 'check',
              calibrationSetId: set.id,
              checkStandardId: check.id,
              checkKind: check.kind
            },
            described: `${check.name} (${checkWords[check.kind]}) of calibration ${set.name}`
          },
          [check.name]
        );
      }
    }
  }

  #addExperiment(experiment: ExperimentExpectation): void {
    this.#titles.add(experiment, [experiment.title]);
    const labels = new NameMatcher<Labelled>();
    for (const replicate of experiment.replicates) {
      labels.add(
        {
          place: { kind: 'replicate', experiment, replicate },
          described: `${replicate.label} of ${experiment.title}`
        },
        [replicate.label]
      );
    }
    this.#labels.set(experiment.id, labels);
    const fractions = new NameMatcher<FractionExpectation>();
    for (const fraction of experiment.fractions) fractions.add(fraction, [fraction.name]);
    this.#fractions.set(experiment.id, fractions);
  }

  /** @returns null where the title is that of no experiment, or of several */
  experimentByTitle(title: string): ExperimentExpectation | null {
    const match = this.#titles.match(title);
    return match.kind === 'one' ? match.value : null;
  }

  /** @param experiment the one the row names; null: it names none */
  find(label: string, experiment: ExperimentExpectation | null): FoundPlace {
    const key = `${experiment?.id ?? ''}\u0000${label}`;
    const known = this.#known.get(key);
    if (known) return known;
    const found = this.#find(label, experiment);
    this.#known.set(key, found);
    return found;
  }

  #find(label: string, experiment: ExperimentExpectation | null): FoundPlace {
    const first = experiment ?? this.#preferred;
    const levels = experiment ? [] : ofItsSet(candidates(this.#levels, label), first);
    const anywhere = (): readonly Labelled[] =>
      this.#experiments.flatMap((each) => this.#labelled(each, label));
    const own = [...(first ? this.#labelled(first, label) : anywhere()), ...levels];
    const all = own.length > 0 || experiment ? own : anywhere();
    const [one] = all;
    if (one === undefined) return { kind: 'none', nearest: this.#nearest(label, first) };
    return all.length === 1 ? one.place : { kind: 'many', places: all.map(({ described }) => described) };
  }

  #labelled(experiment: ExperimentExpectation, label: string): readonly Labelled[] {
    const matcher = this.#labels.get(experiment.id);
    return matcher ? candidates(matcher, label) : [];
  }

  #nearest(label: string, first: ExperimentExpectation | null): string | null {
    const experiments = first ? [first] : this.#experiments;
    for (const { id } of experiments) {
      const nearest = this.#labels.get(id)?.nearest(label);
      if (nearest) return nearest;
    }
    return this.#levels.nearest(label);
  }

  fractions(experiment: ExperimentExpectation): NameMatcher<FractionExpectation> {
    return this.#fractions.get(experiment.id) ?? new NameMatcher();
  }
}

const checkWords = {
  'second source': 'second-source check',
  continuing: 'continuing check',
  'instrument blank': 'instrument blank'
} as const;

/** Sets name their levels and checks alike (L1, CCV): in a file of an experiment, those of its own set are meant. */
function ofItsSet(found: readonly Labelled[], experiment: ExperimentExpectation | null): readonly Labelled[] {
  const setId = experiment?.calibrationSetId ?? null;
  const own = found.filter(({ place }) => place.kind !== 'replicate' && place.calibrationSetId === setId);
  return own.length > 0 ? own : found;
}

function candidates(matcher: NameMatcher<Labelled>, label: string): readonly Labelled[] {
  const match = matcher.match(label);
  if (match.kind === 'one') return [match.value];
  return match.kind === 'many' ? match.values : [];
}
