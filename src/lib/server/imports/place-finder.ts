import { NameMatcher, nearestNames } from './name-matcher';
import type {
  Assignment,
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

export type SinglePlace = Exclude<FoundPlace, { readonly kind: 'many' | 'none' }>;

interface Labelled {
  readonly place: SinglePlace;
  readonly described: string;
}

/** Finds the replicate, the calibration level or the check that a sample label means. */
export class PlaceFinder {
  readonly #experiments: readonly ExperimentExpectation[];
  readonly #preferred: ExperimentExpectation | null;
  readonly #titles = new NameMatcher<ExperimentExpectation>();
  readonly #labels = new Map<string, NameMatcher<Labelled>>();
  readonly #levels = new NameMatcher<Labelled>();
  /** Levels and checks by their ids. */
  readonly #byId = new Map<string, Labelled>();
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
      for (const { id, name } of set.levels) {
        this.#addLevel(id, name, {
          place: { kind: 'level', calibrationSetId: set.id, levelId: id },
          described: `level ${name} of calibration ${set.name}`
        });
      }
      for (const { id, name, kind } of set.checks) {
        this.#addLevel(id, name, {
          place: { kind: 'check', calibrationSetId: set.id, checkStandardId: id, checkKind: kind },
          described: `${name} (${checkWords[kind]}) of calibration ${set.name}`
        });
      }
    }
  }

  #addLevel(id: string, name: string, labelled: Labelled): void {
    this.#levels.add(labelled, [name]);
    this.#byId.set(id, labelled);
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

  /** Whether any experiment that the file may hold has a fraction of this name. */
  hasFraction(name: string): boolean {
    return this.#experiments.some(({ id }) => this.#fractions.get(id)?.match(name).kind === 'one');
  }

  /** The place that was assigned to a label; null where the study has it no longer. */
  assigned(
    assignment: Exclude<Assignment, { readonly kind: 'left out' }>
  ): { readonly place: SinglePlace; readonly fractionId: string | null } | null {
    if (assignment.kind !== 'replicate') {
      const id = assignment.kind === 'level' ? assignment.levelId : assignment.checkStandardId;
      const place = this.#byId.get(id)?.place;
      return place ? { place, fractionId: null } : null;
    }
    const { experimentId, replicateId, fractionId } = assignment;
    const experiment = this.#experiments.find(({ id }) => id === experimentId);
    const replicate = experiment?.replicates.find(({ id }) => id === replicateId);
    if (!experiment || !replicate) return null;
    if (fractionId !== null && !experiment.fractions.some(({ id }) => id === fractionId)) return null;
    return { place: { kind: 'replicate', experiment, replicate }, fractionId };
  }

  /** A place in words: "S1 of Extraction at pH 7". */
  describe(place: SinglePlace): string {
    if (place.kind === 'replicate') return `${place.replicate.label} of ${place.experiment.title}`;
    const id = place.kind === 'level' ? place.levelId : place.checkStandardId;
    return this.#byId.get(id)?.described ?? '';
  }

  /** The names that were perhaps meant, nearest first, of replicates, levels and checks; at most three. */
  nearestNames(label: string, experiment: ExperimentExpectation | null): readonly string[] {
    const first = experiment ?? this.#preferred;
    const experiments = first ? [first] : this.#experiments;
    const names = [
      ...experiments.flatMap(({ replicates }) => replicates.map((replicate) => replicate.label)),
      ...this.#levels.names
    ];
    return nearestNames(label, [...new Set(names)], 3);
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
