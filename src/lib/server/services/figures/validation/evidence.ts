import { dayText } from '../../../../domain/moment-text';
import { nameKey } from '../../../../domain/name-key';
import type { ValidationPartKey } from '../../../../domain/validation-parts';
import type { PartEvidence } from '../../../../views/validation';
import { showsWholeMethod } from '../criteria';
import { countsText, listed, plainEnd } from '../figure-parts';
import type { StudyData, StudyExperiment, StudyVariant, ValidationChoice } from '../study-data';

/** The experiments a part rests on. */
export interface ChosenEvidence {
  readonly part: ValidationPartKey;
  readonly experiments: readonly StudyExperiment[];
  readonly view: PartEvidence;
}

interface Suggestion {
  readonly experiments: readonly StudyExperiment[];
  /** Why these, or what is wanted where there are none. */
  readonly why: string;
}

/** The choice on record for a part: of the variant, else that for all variants; empty: nobody chose. */
export function choiceOf(
  data: StudyData,
  part: ValidationPartKey,
  variant: StudyVariant | null
): readonly ValidationChoice[] {
  const ofPart = data.validationEvidence.filter((item) => item.part === part);
  const own = ofPart.filter(({ variantId }) => variantId === (variant?.id ?? null));
  return own.length > 0 ? own : ofPart.filter(({ variantId }) => variantId === null);
}

/** The experiments that a part rests on: those chosen, else a suggestion, always worded as one. */
export function evidenceOf(
  data: StudyData,
  part: ValidationPartKey,
  variant: StudyVariant | null
): ChosenEvidence {
  const chosen = choiceOf(data, part, variant);
  const candidates = candidatesOf(data, part, variant);
  const suggestion = chosen.length > 0 ? null : suggestionOf(data, part, variant, candidates);
  const taken = suggestion
    ? suggestion.experiments
    : data.experiments.filter(({ id }) => chosen.some(({ experimentId }) => experimentId === id));
  const shown = data.experiments.filter((item) => taken.includes(item) || candidates.includes(item));
  return {
    part,
    experiments: taken,
    view: {
      state: suggestion ? (taken.length > 0 ? 'suggested' : 'none') : 'chosen',
      sentence: suggestion ? suggestion.why : chosenSentence(chosen),
      experiments: taken.map((item) => ({
        number: item.number,
        title: item.title,
        href: `/studies/${data.code}/experiments/${item.number}`,
        facts: factsOf(item)
      })),
      candidates: shown.map((item) => ({
        number: item.number,
        title: item.title,
        facts: factsOf(item),
        taken: taken.includes(item)
      })),
      seen: seenOf(data, chosen)
    }
  };
}

/** Numbers of the experiments chosen, as a later choice says that it has seen them. */
export function seenOf(data: StudyData, chosen: readonly ValidationChoice[]): string {
  return data.experiments
    .filter(({ id }) => chosen.some(({ experimentId }) => experimentId === id))
    .map(({ number }) => number)
    .join(',');
}

function chosenSentence(chosen: readonly ValidationChoice[]): string {
  const people = [...new Set(chosen.map(({ by }) => by))];
  const reasons = [...new Set(chosen.map(({ reason }) => plainEnd(reason)))];
  const last =
    chosen
      .map(({ at }) => at)
      .sort()
      .at(-1) ?? '';
  return `Chosen by ${listed(people)}, ${dayText(last)}: ${reasons.join('; ')}.`;
}

/** "5 spiked, 2 method blanks; 200 ng; reagent water; 26 Oct 2026" */
export function factsOf(item: StudyExperiment): string {
  return [
    countsText(item.replicates) || 'no preparations',
    item.levelLabel,
    item.matrix ?? item.medium,
    item.performedOn === null ? 'no date' : dayText(item.performedOn)
  ].join('; ');
}

const has = (item: StudyExperiment, ...kinds: readonly string[]): boolean =>
  item.replicates.some(({ kind }) => kinds.includes(kind));

const spikedIn = (item: StudyExperiment): number =>
  item.replicates.filter(({ kind }) => kind === 'spiked').length;

const asksFor: Readonly<Record<ValidationPartKey, (item: StudyExperiment) => boolean>> = {
  demonstration: (item) => has(item, 'spiked'),
  confirmation: (item) => has(item, 'spiked'),
  detection: (item) => has(item, 'spiked', 'method blank'),
  precision: (item) => has(item, 'spiked'),
  matrix: (item) => has(item, 'post-extraction spike'),
  blanks: (item) => has(item, 'method blank', 'unspiked'),
  control: (item) => has(item, 'spiked', 'unspiked', 'method blank'),
  duplicates: (item) => has(item, 'spiked', 'unspiked')
};

/** Experiments of the whole method that stand for this variant, or for no variant at all. */
export function candidatesOf(
  data: StudyData,
  part: ValidationPartKey,
  variant: StudyVariant | null
): readonly StudyExperiment[] {
  return data.experiments.filter((item) => {
    if (!showsWholeMethod(data, item) || !asksFor[part](item)) return false;
    const serves = data.variants.filter(({ evidence }) =>
      evidence.some((row) => row.experimentId === item.id)
    );
    return variant === null || serves.length === 0 || serves.includes(variant);
  });
}

function suggestionOf(
  data: StudyData,
  part: ValidationPartKey,
  variant: StudyVariant | null,
  candidates: readonly StudyExperiment[]
): Suggestion {
  switch (part) {
    case 'demonstration':
      return demonstrationOf(data, variant, candidates);
    case 'confirmation':
    case 'detection':
      return lowLevelOf(data, candidates);
    case 'precision':
      return precisionOf(candidates);
    case 'matrix':
      return candidates.length > 0
        ? { experiments: candidates, why: 'Suggested: every experiment with spikes after the extraction.' }
        : {
            experiments: [],
            why: 'No experiment has extracts spiked after the extraction, so nothing tells the matrix effect.'
          };
    case 'blanks':
      return all(
        candidates,
        'with method blanks or unspiked portions',
        'No experiment has method blanks or unspiked portions.'
      );
    case 'control':
      return all(candidates, 'of the whole method', 'No experiment was spiked in the sample yet.');
    case 'duplicates':
      return all(
        candidates,
        'with spiked or unspiked portions',
        'No experiment has spiked or unspiked portions.'
      );
  }
}

function all(experiments: readonly StudyExperiment[], which: string, none: string): Suggestion {
  return experiments.length > 0
    ? { experiments, why: `Suggested: every experiment ${which}.` }
    : { experiments: [], why: none };
}

function demonstrationOf(
  data: StudyData,
  variant: StudyVariant | null,
  candidates: readonly StudyExperiment[]
): Suggestion {
  const water = candidates.filter(({ medium }) => medium === 'reagent water');
  const levels = levelsOf(water.length > 0 ? water : candidates, data);
  const middle = levels[Math.floor(levels.length / 2)] ?? null;
  const atMiddle = middle?.experiments ?? [];
  const stands = (item: StudyExperiment): boolean =>
    variant?.evidence.some(({ experimentId }) => experimentId === item.id) ?? false;
  const best = [...atMiddle].sort(
    (a, b) => spikedIn(b) - spikedIn(a) || Number(stands(b)) - Number(stands(a)) || b.number - a.number
  )[0];
  if (!best)
    return { experiments: [], why: 'Nothing was spiked in the sample yet, so there is no demonstration.' };
  return {
    experiments: [best],
    why:
      water.length > 0
        ? 'Suggested: the most preparations at a middle level in reagent water.'
        : 'Suggested: the most preparations at a middle level. Nothing was spiked in reagent water.'
  };
}

function lowLevelOf(data: StudyData, candidates: readonly StudyExperiment[]): Suggestion {
  const water = candidates.filter(({ medium }) => medium === 'reagent water');
  const levels = levelsOf(water.length > 0 ? water : candidates, data);
  const [lowest] = levels;
  if (!lowest || levels.length < 2) {
    return {
      experiments: [],
      why: 'Nothing was spiked near a limit: every experiment of the whole method has the same level. A limit wants preparations at 2 to 10 times what it is thought to be.'
    };
  }
  return {
    experiments: lowest.experiments,
    why: `Suggested: the experiments at the lowest level${water.length > 0 ? ' in reagent water' : ''}.`
  };
}

function precisionOf(candidates: readonly StudyExperiment[]): Suggestion {
  const groups = new Map<string, StudyExperiment[]>();
  for (const item of candidates) {
    const key = [item.medium, nameKey(item.matrix ?? ''), nameKey(item.levelLabel)].join(' | ');
    groups.set(key, [...(groups.get(key) ?? []), item]);
  }
  const batches = (items: readonly StudyExperiment[]): number =>
    items.reduce((sum, item) => sum + batchCount(item), 0);
  const best = [...groups.values()].sort(
    (a, b) =>
      batches(b) - batches(a) ||
      b.reduce((sum, item) => sum + spikedIn(item), 0) - a.reduce((sum, item) => sum + spikedIn(item), 0)
  )[0];
  if (!best || batches(best) < 2) {
    return {
      experiments: [],
      why: 'No level and matrix was spiked in two batches or more, so nothing can be said of the scatter between batches.'
    };
  }
  return {
    experiments: best,
    why: 'Suggested: the experiments of one matrix and level with the most batches.'
  };
}

function batchCount(item: StudyExperiment): number {
  return new Set(
    item.replicates.filter(({ kind }) => kind === 'spiked').map(({ batch }) => nameKey(batch ?? ''))
  ).size;
}

/** Experiments by what their spiked preparations received, lowest first; the median over the targets tells it. */
function levelsOf(
  experiments: readonly StudyExperiment[],
  data: StudyData
): { readonly ng: number; readonly experiments: readonly StudyExperiment[] }[] {
  const targets = new Set(data.panel.filter(({ role }) => role === 'target').map(({ id }) => id));
  const levels: { ng: number; experiments: StudyExperiment[] }[] = [];
  for (const item of experiments) {
    const ng = item.spikes
      .filter(({ replicateKind, entryId }) => replicateKind === 'spiked' && targets.has(entryId))
      .map(({ amountNg }) => amountNg)
      .sort((a, b) => a - b);
    const median = ng[Math.floor((ng.length - 1) / 2)];
    if (median === undefined) continue;
    const known = levels.find((level) => Math.abs(level.ng - median) <= 1e-9 * median);
    if (known) known.experiments.push(item);
    else levels.push({ ng: median, experiments: [item] });
  }
  return levels.sort((a, b) => a.ng - b.ng);
}
