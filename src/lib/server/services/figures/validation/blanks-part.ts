import type { ValidationPart } from '../../../../views/validation';
import type { Verdict } from '../../../../views/verdict';
import type { Link } from '../addresses';
import { plainEnd } from '../figure-parts';
import type { StudyPanelEntry } from '../study-data';
import { column, count, figure, notesOver, percent, words, worstFirst } from './cells';
import type { BlanksOfExperiment, ValidationContext } from './context';
import { partOf } from './part';
import { publishedRules } from './published-rules';
import { variantKey } from './variant-key';

/** One analyte over the experiments of the part; every figure at its worst of them. */
export interface BlankSummary {
  readonly blanks: number;
  readonly foundIn: number;
  readonly highestNg: number | null;
  /** Mean over the blanks of an experiment, percent of its spike. */
  readonly percentOfSpike: number | null;
  /** Highest mean in ng/L, over the detection limit. */
  readonly overLimit: number | null;
  readonly overThird: boolean | null;
  readonly nativeNg: number | null;
  readonly nativeRatio: number | null;
  readonly verdict: Verdict | null;
  readonly why: string;
}

/** What method blanks hold beside the spike and the limits, and how much of each analyte the matrix brings. */
export function blanksPart(context: ValidationContext, link: Link): ValidationPart {
  const { figures } = context;
  const { experiments } = context.evidence('blanks');
  const summaries = figures.targets.map((entry) => ({ entry, of: blankSummary(context, entry) }));
  const rows = summaries.map(({ entry, of }) => ({
    key: entry.id,
    panelEntryId: entry.id,
    name: entry.name,
    href: link({ kind: 'blanks', variant: variantKey(context), entry: entry.id }),
    verdict: of.verdict,
    why: of.why,
    worst: Math.max(of.percentOfSpike ?? 0, 100 * (of.nativeRatio ?? 0)),
    cells: [
      count(of.blanks),
      words(of.blanks === 0 ? null : `${of.foundIn} of ${of.blanks}`),
      figure(of.highestNg),
      percent(of.percentOfSpike),
      figure(of.overLimit),
      figure(of.nativeNg),
      figure(of.nativeRatio, 2)
    ]
  }));
  const blanks = experiments.reduce(
    (sum, item) => sum + item.replicates.filter(({ kind }) => kind === 'method blank').length,
    0
  );
  const unspiked = experiments.reduce(
    (sum, item) => sum + item.replicates.filter(({ kind }) => kind === 'unspiked').length,
    0
  );
  return partOf(context, 'blanks', {
    meaning: [
      'What the laboratory itself adds (method blanks) and what the matrix already holds (unspiked portions), beside the spike: where either is large, a recovery says little. Over several experiments the least favourable stands.',
      'Amounts are summed over the fractions that count for the method; not detected counts as zero.'
    ],
    rests: [`${blanks} method blanks and ${unspiked} unspiked portions in ${experiments.length} experiments`],
    rules: [publishedRules.blanks, publishedRules.nativeAbove],
    missing: [
      ...(blanks === 0 ? ['Method blanks: nothing tells what the laboratory itself adds.'] : []),
      ...(unspiked === 0 && experiments.some(({ medium }) => medium === 'sample matrix')
        ? ['Unspiked portions of the matrix.']
        : [])
    ],
    notes: notesOver(
      figures.targets.flatMap((entry) =>
        partialNotes(context.blanks(entry)).map((note) => [entry.name, note] as const)
      ),
      figures.targets.length
    ),
    tables: [
      {
        key: 'blanks',
        caption: 'Method blanks and native amounts beside the spike',
        judged: true,
        columns: [
          column('blanks', 'Blanks'),
          { key: 'found', label: 'Found in', unit: null, numeric: false },
          column('highest', 'Highest', 'ng'),
          column('share', 'Mean', '% of the spike'),
          column('limit', 'Mean over MDL'),
          column('native', 'Native', 'ng'),
          column('ratio', 'Native over spike')
        ],
        rows: worstFirst(rows)
      }
    ]
  });
}

export function blankSummary(context: ValidationContext, entry: StudyPanelEntry): BlankSummary {
  const found = context.blanks(entry);
  const detection = context.detection(entry);
  const mdl = detection.unit === 'ng/L' ? detection.mdl : null;
  const { spikeNgPerL } = context.confirmation(entry);
  const blanks = found.reduce((sum, item) => sum + item.blanks.counted.length, 0);
  const perLitre = highest(found.map((item) => item.blanks.meanNgPerL));
  const third = spikeNgPerL === null ? null : spikeNgPerL / 3;
  const nativeRatio = highest(
    found.map(({ native, spikeNg }) =>
      native.meanNg === null || spikeNg === null ? null : native.meanNg / spikeNg
    )
  );
  const overThird = perLitre === null || third === null ? null : perLitre >= third;
  return {
    blanks,
    foundIn: found.reduce((sum, item) => sum + item.blanks.foundIn, 0),
    highestNg: highest(found.map((item) => item.blanks.highestNg)),
    percentOfSpike: highest(
      found.map(({ blanks: level, spikeNg }) =>
        level.meanNg === null || spikeNg === null ? null : (100 * level.meanNg) / spikeNg
      )
    ),
    overLimit: perLitre === null || mdl === null || !(mdl > 0) ? null : perLitre / mdl,
    overThird,
    nativeNg: highest(found.map((item) => item.native.meanNg)),
    nativeRatio,
    ...judged(found, overThird, nativeRatio, blanks)
  };
}

function judged(
  found: readonly BlanksOfExperiment[],
  overThird: boolean | null,
  nativeRatio: number | null,
  blanks: number
): Pick<BlankSummary, 'verdict' | 'why'> {
  const partial = found.some((item) => item.blanks.partial.length > 0 || item.native.partial.length > 0);
  const assessable = nativeRatio === null || nativeRatio <= 4;
  const why = [
    ...(overThird ? ['the mean blank is not below a third of the quantitation limit'] : []),
    ...(assessable ? [] : ['native over four times the spike: not assessable']),
    ...(assessable && nativeRatio !== null && nativeRatio > 1 ? ['native above the spike'] : []),
    ...(partial ? ['some sums take in only a part of the fractions'] : [])
  ].join('; ');
  if (overThird) return { verdict: 'outside', why };
  if ((nativeRatio ?? 0) > 1 || partial) return { verdict: 'watch', why };
  if (overThird === false) return { verdict: 'inside', why };
  return {
    verdict: null,
    why: why || (blanks === 0 ? 'no method blank counts' : 'no quantitation limit to hold it against')
  };
}

export function partialNotes(found: readonly BlanksOfExperiment[]): string[] {
  return found.flatMap(({ experiment, blanks, native }) =>
    [...blanks.partial, ...native.partial].map(
      ({ label, partNg, lacks }) =>
        `${label} of experiment ${experiment.number} holds at least ${figure(partNg).text ?? ''} ng, a part of it unknown (${plainEnd(lacks)}); it is not in the mean`
    )
  );
}

function highest(values: readonly (number | null)[]): number | null {
  const known = values.filter((value) => value !== null);
  return known.length === 0 ? null : Math.max(...known);
}
