import type { CellReader } from './merged-cells';
import { textOf } from './sheet-mapping';
import type { SheetMapping } from './sheet-mapping';
import type { ExperimentExpectation, Place } from './types';

export interface RowPlace {
  readonly place: Place;
  readonly name: string;
}

/** @returns null where the row names no place, or several; the problem is reported */
export function placeOf(mapping: SheetMapping, merged: CellReader, row: number): RowPlace | null {
  const { sheet, plan, places, problems } = mapping;
  const label = textOf(merged(row, plan.sample));
  const at = { sheet: sheet.name, row, column: plan.sample };
  if (label === '') {
    problems.error({
      code: 'missing sample',
      ...at,
      found: 'an empty cell',
      expected: 'a sample label, a calibration level or a check',
      what: 'This row has results but no sample.',
      fix: 'Write the label of the sample, or remove the row.'
    });
    return null;
  }
  const experiment = experimentOf(mapping, merged, row);
  if (experiment === 'unknown') return null;
  const found = places.find(label, experiment);
  switch (found.kind) {
    case 'level':
    case 'check':
      return { place: found, name: label };
    case 'replicate':
      return replicatePlace(
        mapping,
        merged,
        row,
        found.experiment,
        found.replicate.id,
        found.replicate.takesFraction,
        label
      );
    case 'many':
      problems.oncePer(label, 'error', {
        code: 'ambiguous sample',
        ...at,
        found: `“${label}”`,
        expected: 'a label that means one sample',
        what: `“${label}” can be ${found.places.slice(0, 4).join(', or ')}.`,
        fix: 'Bring the file from the page of the experiment, or add a column “Experiment” with its title.'
      });
      return null;
    case 'none':
      problems.oncePer(label, 'error', {
        code: 'unknown sample',
        ...at,
        found: `“${label}”`,
        expected: 'the label of a replicate, a calibration level or a check',
        what: `No replicate, calibration level or check is called “${label}”.${found.nearest ? ` Is ${found.nearest} meant?` : ''}`,
        fix: 'Correct the label, add the replicate to its experiment or the check to its calibration set, or remove the rows.'
      });
      return null;
  }
}

function experimentOf(
  mapping: SheetMapping,
  merged: CellReader,
  row: number
): ExperimentExpectation | null | 'unknown' {
  const { sheet, plan, places, problems } = mapping;
  const title = plan.experiment === null ? '' : textOf(merged(row, plan.experiment));
  if (title === '' || plan.experiment === null) return null;
  const found = places.experimentByTitle(title);
  if (found) return found;
  problems.oncePer(title, 'error', {
    code: 'unknown experiment',
    sheet: sheet.name,
    row,
    column: plan.experiment,
    found: `“${title}”`,
    expected: 'the title of one experiment that this file may hold',
    what: `No experiment that this file may hold is called “${title}”, or several are.`,
    fix: 'Correct the title, or leave the cell empty where the label alone is enough.'
  });
  return 'unknown';
}

function replicatePlace(
  { sheet, plan, places, problems }: SheetMapping,
  merged: CellReader,
  row: number,
  experiment: ExperimentExpectation,
  replicateId: string,
  takesFraction: boolean,
  label: string
): RowPlace | null {
  const text = plan.fraction === null ? '' : textOf(merged(row, plan.fraction));
  const at = { sheet: sheet.name, row, column: plan.fraction ?? plan.sample };
  const place = (fractionId: string | null, name: string): RowPlace => ({
    place: { kind: 'extract', experimentId: experiment.id, replicateId, fractionId },
    name
  });
  const names = experiment.fractions.map(({ name }) => name).join(', ');
  if (!takesFraction) {
    if (text === '' || /^[-–—]$/.test(text)) return place(null, label);
    problems.oncePer(`${label} ${text}`, 'error', {
      code: 'fraction not expected',
      ...at,
      found: `“${text}”`,
      expected: 'an empty cell',
      what: `${label} is a standard and has no fractions, but “${text}” is given as one.`,
      fix: 'Empty the cell.'
    });
    return null;
  }
  const [single, second] = experiment.fractions;
  if (text === '') {
    if (single && !second) return place(single.id, label);
    problems.oncePer(`${experiment.id} missing`, 'error', {
      code: 'missing fraction',
      ...at,
      found: plan.fraction === null ? 'no column with the fraction' : 'an empty cell',
      expected: names === '' ? 'an experiment with fractions' : `one of: ${names}`,
      what:
        names === ''
          ? `${experiment.title} has no fractions yet, so that nothing of ${label} can be placed.`
          : `${label} has several fractions, and this row does not say which one it is.`,
      fix: names === '' ? 'Add the fractions to the experiment first.' : 'Name the fraction in each row.'
    });
    return null;
  }
  const match = places.fractions(experiment).match(text);
  if (match.kind === 'one') return place(match.value.id, `${label}, ${match.value.name}`);
  const nearest = match.kind === 'none' ? places.fractions(experiment).nearest(text) : null;
  problems.oncePer(`${experiment.id} ${text}`, 'error', {
    code: match.kind === 'many' ? 'ambiguous fraction' : 'unknown fraction',
    ...at,
    found: `“${text}”`,
    expected: names === '' ? 'an experiment with fractions' : `one of: ${names}`,
    what:
      match.kind === 'many'
        ? `“${text}” can be more than one fraction of ${experiment.title}.`
        : `${experiment.title} has no fraction called “${text}”.${nearest ? ` Is ${nearest} meant?` : ''}`,
    fix: 'Correct the name, or add the fraction to the experiment.'
  });
  return null;
}
