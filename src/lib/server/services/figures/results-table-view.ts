import type { ResultRow, ResultsTableView } from '../../../views/findings';
import type { Link } from './addresses';
import { criteriaFor, limitsOf, showsWholeMethod } from './criteria';
import { criteriaText, intervalOf, plainEnd, ruleView } from './figure-parts';
import { flaggedText } from './flagged-text';
import { incompleteSentence } from './mass-balance-view';
import type { StudyExperiment, StudyPanelEntry } from './study-data';
import type { EntryFigures, StudyFigures } from './study-figures';
import { experimentChoice } from './subject';

/** Method recovery of every target of one experiment, held against its criteria; panel order. */
export function resultsTableOf(
  figures: StudyFigures,
  experiment: StudyExperiment,
  link: Link
): ResultsTableView {
  const { rules } = figures.data.criteriaSet;
  const used: readonly string[] = ['mean recovery', 'relative standard deviation', 'minimum preparations'];
  const rows = figures.targets.flatMap((entry) => {
    const found = figures.entry(experiment.id, entry.id);
    return !found.ready && found.kind === 'not spiked'
      ? []
      : [rowOf(figures, experiment, entry, found, link)];
  });
  const notes = commonNotes(rows);
  return {
    experiment: experimentChoice(figures, experiment),
    rows: rows.map((row) => ({ ...row, notes: row.notes.filter((note) => !notes.includes(note)) })),
    notes,
    rules: showsWholeMethod(figures.data, experiment)
      ? rules.filter((rule) => used.includes(rule.type)).map(ruleView)
      : []
  };
}

/** What is said of every row with a figure, of two at least, is said once. */
function commonNotes(rows: readonly ResultRow[]): string[] {
  const [first, ...others] = rows.filter(({ n }) => n !== null);
  if (!first || others.length === 0) return [];
  return first.notes.filter((note) => others.every(({ notes }) => notes.includes(note)));
}

function rowOf(
  figures: StudyFigures,
  experiment: StudyExperiment,
  entry: StudyPanelEntry,
  found: EntryFigures,
  link: Link
): ResultRow {
  const applied = criteriaFor(figures.data, entry);
  const criteria = showsWholeMethod(figures.data, experiment)
    ? `${criteriaText(applied.criteria)}${applied.overrideReason ? ` (of its own: ${applied.overrideReason})` : ''}`
    : 'none';
  const base = {
    panelEntryId: entry.id,
    name: entry.name,
    role: entry.role,
    class: entry.class ?? '',
    criteria,
    limits: limitsOf(applied.criteria),
    flagged: flaggedText(figures, experiment, entry)
  };
  const nothing = { n: null, mean: null, sd: null, rsd: null, interval: null, subtracted: null };
  if (!found.ready) {
    const relative = found.relative?.available ? found.relative : null;
    return {
      ...base,
      ...nothing,
      verdict: null,
      reasons: [found.reason],
      relative: relative && {
        mean: relative.estimate.estimate ?? relative.description.mean,
        n: relative.description.n,
        standard: relative.standardName
      },
      notes: found.relative
        ? found.relative.available
          ? [...found.relative.notes]
          : [found.relative.reason]
        : [],
      href: link({ kind: relative ? 'relative' : 'recovery', experiment: experiment.number, entry: entry.id })
    };
  }
  const { method } = found.balance;
  return {
    ...base,
    ...(method
      ? { n: method.n, mean: method.mean, sd: method.sd, rsd: method.rsd, interval: intervalOf(method) }
      : nothing),
    subtracted: found.input.subtracted?.meanPercent ?? null,
    verdict: found.verdict,
    reasons: found.reasons,
    relative: null,
    notes: notesOf(found),
    href: link({ kind: 'recovery', experiment: experiment.number, entry: entry.id })
  };
}

function notesOf(found: Extract<EntryFigures, { ready: true }>): string[] {
  const aside = found.input.portions
    .filter((portion) => portion.exclusion)
    .map((portion) => `${portion.replicate.label} is set aside: ${plainEnd(portion.exclusion?.cause ?? '')}`);
  const lacking = found.incomplete.method.map(
    (item) => `${item.portion.replicate.label} lacks ${item.lacks.join(' and ')}`
  );
  const balance = incompleteSentence(found);
  return [
    ...aside,
    ...lacking,
    ...(balance && lacking.length === 0 ? [balance] : []),
    ...(found.input.subtracted?.notes ?? [])
  ];
}
