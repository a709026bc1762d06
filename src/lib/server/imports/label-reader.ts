import type { ColumnMap } from '../../schemas/column-map';
import type { PlaceFinder, SinglePlace } from './place-finder';
import {
  dilutionIn,
  injectionIn,
  parsePattern,
  splitLabel,
  usualPatterns,
  withPartsLacking
} from '../../domain/sample-pattern';
import type { PatternToken, SplitLabel } from '../../domain/sample-pattern';
import type { LabelView } from '../../views/imports';
import type { Assignment, ExperimentExpectation } from './types';

/** A label that means one place; what it says besides is null where it says nothing. */
export interface FoundLabel {
  readonly kind: 'found';
  readonly place: SinglePlace;
  /** Name of the fraction in the label. */
  readonly fraction: string | null;
  /** The fraction that was assigned; undefined: none was, the row says. */
  readonly fractionId: string | null | undefined;
  readonly injection: number | null;
  readonly dilution: number | null;
  readonly how: 'name' | 'pattern' | 'run order' | 'assigned';
}

export type ReadLabel =
  | FoundLabel
  | { readonly kind: 'left out' }
  | { readonly kind: 'many'; readonly places: readonly string[] }
  | { readonly kind: 'none'; readonly nearest: readonly string[] };

interface Tally {
  readonly read: ReadLabel;
  readonly label: string;
  readonly sheet: string;
  readonly cell: string | null;
  count: number;
}

export interface LabelRules {
  readonly pattern: string | null;
  readonly assignments: ReadonlyMap<string, Assignment>;
  /** Places by label, where the labels follow a run order; null: they are names. */
  readonly runOrder: ReadonlyMap<string, Assignment> | null;
}

/** Finds what sample labels mean: by what a person assigned, by run order, by name, or by a pattern; and keeps count of them. */
export class LabelReader {
  readonly #places: PlaceFinder;
  readonly #rules: LabelRules;
  readonly #patterns: readonly (readonly (readonly PatternToken[])[])[] | null;
  readonly #known = new Map<string, Tally>();

  constructor(places: PlaceFinder, rules: LabelRules) {
    this.#places = places;
    this.#rules = rules;
    const tokens = rules.pattern === null ? null : parsePattern(rules.pattern);
    this.#patterns = tokens && withPartsLacking(tokens);
  }

  /** @param at where it stands, kept of the first time; cell null: not in a cell of the table */
  read(
    label: string,
    experiment: ExperimentExpectation | null,
    at: () => { readonly sheet: string; readonly cell: string | null }
  ): ReadLabel {
    const key = `${experiment?.id ?? ''}\u0000${label}`;
    const known = this.#known.get(key);
    if (known) {
      known.count++;
      return known.read;
    }
    const read = this.#read(label, experiment);
    this.#known.set(key, { read, label, ...at(), count: 1 });
    return read;
  }

  #read(label: string, experiment: ExperimentExpectation | null): ReadLabel {
    const assigned = this.#rules.assignments.get(label) ?? this.#rules.runOrder?.get(label);
    if (assigned) {
      if (assigned.kind === 'left out') return { kind: 'left out' };
      const how = this.#rules.assignments.has(label) ? 'assigned' : 'run order';
      const found = this.#places.assigned(assigned);
      if (found) return { kind: 'found', ...nothingSaid, ...found, how };
    }
    if (this.#rules.runOrder) return { kind: 'none', nearest: [] };
    return readByName(label, experiment, this.#places, this.#patterns);
  }

  /** Every label that was read, in the order of the file. */
  readings(): readonly LabelView[] {
    return [...this.#known.values()].map(({ read, label, sheet, cell, count }): LabelView => {
      const base = { label, sheet, cell, count, place: null, nearest: [] };
      switch (read.kind) {
        case 'found':
          return { ...base, how: read.how, place: inWords(read, this.#places) };
        case 'left out':
          return { ...base, how: 'left out' };
        case 'many':
          return { ...base, how: 'ambiguous', nearest: read.places };
        case 'none':
          return { ...base, how: 'not found', nearest: read.nearest };
      }
    });
  }
}

const nothingSaid = { fraction: null, fractionId: undefined, injection: null, dilution: null } as const;

/** "S1 of Extraction at pH 7, Elution 1, injection 2" */
function inWords(
  { place, fraction, fractionId, injection, dilution }: FoundLabel,
  places: PlaceFinder
): string {
  const assigned =
    place.kind === 'replicate' && fractionId
      ? place.experiment.fractions.find(({ id }) => id === fractionId)?.name
      : undefined;
  return [
    places.describe(place),
    assigned ?? fraction,
    injection === null ? null : `injection ${injection}`,
    dilution === null ? null : `diluted ${dilution}-fold`
  ]
    .filter((part) => part !== null)
    .join(', ');
}

function readByName(
  label: string,
  experiment: ExperimentExpectation | null,
  places: PlaceFinder,
  patterns: readonly (readonly (readonly PatternToken[])[])[] | null
): ReadLabel {
  const whole = places.find(label, experiment);
  if (whole.kind === 'many') return whole;
  const byName: FoundLabel | null =
    whole.kind === 'none' ? null : { kind: 'found', ...nothingSaid, place: whole, how: 'name' };
  const split = patterns ? bySplitting(label, experiment, places, patterns) : [];
  const [first, second] = split;
  const isSame = byName && first && samePlace(byName.place, first.place);
  if (first && (second || (byName && !isSame))) {
    const all = byName && !isSame ? [byName, ...split] : split;
    return { kind: 'many', places: all.map((each) => inWords(each, places)) };
  }
  return byName ?? first ?? { kind: 'none', nearest: places.nearestNames(label, experiment) };
}

/** The readings of a label by the pattern that lack least of its parts, each once. */
function bySplitting(
  label: string,
  experiment: ExperimentExpectation | null,
  places: PlaceFinder,
  groups: readonly (readonly (readonly PatternToken[])[])[]
): readonly FoundLabel[] {
  for (const group of groups) {
    const found = new Map<string, FoundLabel>();
    for (const tokens of group) {
      for (const split of splitLabel(label, tokens)) {
        const read = placed(split, experiment, places);
        if (read) found.set(inWords(read, places), read);
      }
    }
    if (found.size > 0) return [...found.values()];
  }
  return [];
}

function placed(
  split: SplitLabel,
  experiment: ExperimentExpectation | null,
  places: PlaceFinder
): FoundLabel | null {
  if (split.sample === undefined) return null;
  const place = places.find(split.sample, experiment);
  if (place.kind === 'many' || place.kind === 'none') return null;
  const fraction = split.fraction ?? null;
  if (fraction !== null) {
    if (place.kind !== 'replicate' || !place.replicate.takesFraction) return null;
    if (places.fractions(place.experiment).match(fraction).kind !== 'one') return null;
  }
  return {
    kind: 'found',
    place,
    fraction,
    fractionId: undefined,
    injection: split.injection === undefined ? null : injectionIn(split.injection),
    dilution: split.dilution === undefined ? null : dilutionIn(split.dilution),
    how: 'pattern'
  };
}

function samePlace(one: FoundLabel['place'], other: FoundLabel['place']): boolean {
  if (one.kind === 'replicate') return other.kind === 'replicate' && other.replicate.id === one.replicate.id;
  return JSON.stringify(one) === JSON.stringify(other);
}

/** How many labels are looked at to find their pattern. */
const labelsTried = 60;

/**
 * The usual pattern that gives a place to most of the labels that are no names themselves; of equal ones the plainest.
 *
 * @param hasFraction the rows or sheets name the fraction
 * @param hasInjection the rows number the injections
 * @returns null where all labels are names, or no pattern places any
 */
export function suggestPattern(
  labels: readonly string[],
  places: PlaceFinder,
  { hasFraction, hasInjection }: { readonly hasFraction: boolean; readonly hasInjection: boolean }
): ColumnMap['samplePattern'] {
  const open = [...new Set(labels)]
    .filter((label) => places.find(label, null).kind === 'none')
    .slice(0, labelsTried);
  if (open.length === 0) return null;
  let best: { pattern: string; count: number } | null = null;
  for (const pattern of usualPatterns) {
    if (hasFraction && pattern.includes('{fraction}')) continue;
    if (hasInjection && pattern.includes('{injection}')) continue;
    const tokens = parsePattern(pattern);
    if (!tokens || open.every((label) => splitLabel(label, tokens).length === 0)) continue;
    // Levels have no fraction in their labels: a pattern is also tried without that part.
    const groups = withPartsLacking(tokens);
    const count = open.filter((label) => {
      const read = bySplitting(label, null, places, groups);
      return read.length === 1 && isWhole(read[0], hasFraction);
    }).length;
    if (count > (best?.count ?? 0)) best = { pattern, count };
  }
  return best?.pattern ?? null;
}

/** A sample that takes a fraction needs one, from the label where from nowhere else. */
function isWhole(read: FoundLabel | undefined, hasFraction: boolean): boolean {
  if (!read) return false;
  if (hasFraction || read.fraction !== null || read.place.kind !== 'replicate') return true;
  return !read.place.replicate.takesFraction || read.place.experiment.fractions.length === 1;
}
