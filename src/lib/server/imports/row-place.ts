import { cellAddress } from './cell-address';
import type { FoundLabel } from './label-reader';
import type { CellReader } from './merged-cells';
import type { SinglePlace } from './place-finder';
import { placeOfName, textOf } from './sheet-mapping';
import type { SheetMapping } from './sheet-mapping';
import type { ExperimentExpectation, Place } from './types';

export interface RowPlace {
  readonly place: Place;
  readonly name: string;
  /** What the label says besides; null where it says nothing. */
  readonly injection: number | null;
  readonly dilution: number | null;
}

/**
 * @returns 'left out' for a row whose label was said to be none of ours; null where the row names no place, or several: the problem
 * is reported
 */
export function placeOf(
  mapping: SheetMapping,
  merged: CellReader,
  row: number
): RowPlace | 'left out' | null {
  const { sheet, plan, labels, carried, isTurned, problems } = mapping;
  const label = plan.sample === null ? (carried.sample?.text ?? '') : textOf(merged(row, plan.sample));
  const at = { sheet: sheet.name, ...placeOfName(carried.sample, row, plan.sample) };
  if (label === '') {
    problems.oncePer(plan.sample === null ? 'no column' : String(row), 'error', {
      code: 'missing sample',
      ...at,
      found: 'an empty cell',
      expected: 'a sample label, a calibration level or a check',
      what: `This ${isTurned ? 'column' : 'row'} has results but no sample.`,
      fix: `Write the label of the sample, or remove the ${isTurned ? 'column' : 'row'}.`
    });
    return null;
  }
  const experiment = experimentOf(mapping, merged, row);
  if (experiment === 'unknown') return null;
  const read = labels.read(label, experiment, () => ({ sheet: sheet.name, cell: addressOf(at, isTurned) }));
  switch (read.kind) {
    case 'found':
      return placed(mapping, merged, row, read, label);
    case 'left out':
      return 'left out';
    case 'many':
      problems.oncePer(label, 'error', {
        code: 'ambiguous sample',
        ...at,
        found: `“${label}”`,
        expected: 'a label that means one sample',
        what: `“${label}” can be ${read.places.slice(0, 4).join(', or ')}.`,
        fix: 'Say which one is meant in the list of samples, bring the file from the page of the experiment, or add a column “Experiment” with its title.'
      });
      return null;
    case 'none':
      problems.oncePer(label, 'error', {
        code: 'unknown sample',
        ...at,
        found: `“${label}”`,
        expected: 'the label of a replicate, a calibration level or a check',
        what: `No replicate, calibration level or check is called “${label}”.${read.nearest.length > 0 ? ` Is ${read.nearest.join(' or ')} meant?` : ''}`,
        fix: 'Correct the label, say what it means in the list of samples, add the replicate to its experiment or the check to its calibration set, or remove the rows.'
      });
      return null;
  }
}

function addressOf(
  at: { readonly row?: number; readonly column?: number },
  isTurned: boolean
): string | null {
  if (at.row === undefined || at.column === undefined) return null;
  return isTurned ? cellAddress(at.column, at.row) : cellAddress(at.row, at.column);
}

function experimentOf(
  mapping: SheetMapping,
  merged: CellReader,
  row: number
): ExperimentExpectation | null | 'unknown' {
  const { sheet, plan, places, fixed, problems } = mapping;
  const title =
    (plan.experiment === null ? '' : textOf(merged(row, plan.experiment))) || (fixed.experiment ?? '');
  if (title === '') return null;
  const found = places.experimentByTitle(title);
  if (found) return found;
  problems.oncePer(title, 'error', {
    code: 'unknown experiment',
    sheet: sheet.name,
    ...(plan.experiment === null ? {} : { row, column: plan.experiment }),
    found: `“${title}”`,
    expected: 'the title of one experiment that this file may hold',
    what: `No experiment that this file may hold is called “${title}”, or several are.`,
    fix: 'Correct the title, or leave the cell empty where the label alone is enough.'
  });
  return 'unknown';
}

function placed(
  mapping: SheetMapping,
  merged: CellReader,
  row: number,
  found: FoundLabel,
  label: string
): RowPlace | null {
  const said = { injection: found.injection, dilution: found.dilution };
  if (found.place.kind !== 'replicate') return { place: found.place, name: label, ...said };
  const fraction = fractionOf(mapping, merged, row, found, found.place, label);
  if (!fraction) return null;
  const { experiment, replicate } = found.place;
  const name = found.how === 'name' ? label : replicate.label;
  return {
    place: {
      kind: 'extract',
      experimentId: experiment.id,
      replicateId: replicate.id,
      fractionId: fraction.id
    },
    name: fraction.name === null ? name : `${name}, ${fraction.name}`,
    ...said
  };
}

type ReplicatePlace = Extract<SinglePlace, { readonly kind: 'replicate' }>;

/** The row's own fraction first, then the label's, the sheet's or block's, and what was fixed for the file. */
function fractionOf(
  { sheet, plan, places, carried, fixed, isTurned, problems }: SheetMapping,
  merged: CellReader,
  row: number,
  found: FoundLabel,
  { experiment, replicate }: ReplicatePlace,
  label: string
): { readonly id: string | null; readonly name: string | null } | null {
  const own = plan.fraction === null ? '' : textOf(merged(row, plan.fraction));
  const text = own || (found.fraction ?? '') || (carried.fraction?.text ?? '') || (fixed.fraction ?? '');
  const at = {
    sheet: sheet.name,
    ...(own !== '' || plan.fraction !== null
      ? { row, column: plan.fraction ?? 0 }
      : carried.fraction
        ? placeOfName(carried.fraction, row, null)
        : placeOfName(carried.sample, row, plan.sample))
  };
  const { title } = experiment;
  const names = experiment.fractions.map(({ name }) => name).join(', ');
  if (!replicate.takesFraction) {
    // What a sheet or the person says for all rows is not meant for standards.
    if (own === '' || /^[-–—]$/.test(own)) return { id: null, name: null };
    problems.oncePer(`${label} ${own}`, 'error', {
      code: 'fraction not expected',
      ...at,
      found: `“${own}”`,
      expected: 'an empty cell',
      what: `${label} is a standard and has no fractions, but “${own}” is given as one.`,
      fix: 'Empty the cell.'
    });
    return null;
  }
  const assigned = experiment.fractions.find(({ id }) => id === found.fractionId);
  const [single, second] = experiment.fractions;
  if (text === '') {
    if (assigned) return assigned;
    if (single && !second) return { id: single.id, name: null };
    problems.oncePer(`${experiment.id} missing`, 'error', {
      code: 'missing fraction',
      ...at,
      found: plan.fraction === null ? 'no column with the fraction' : 'an empty cell',
      expected: names === '' ? 'an experiment with fractions' : `one of: ${names}`,
      what:
        names === ''
          ? `${title} has no fractions yet, so that nothing of ${label} can be placed.`
          : `${label} has several fractions, and this ${isTurned ? 'column' : 'row'} does not say which one it is.`,
      fix: names === '' ? 'Add the fractions to the experiment first.' : 'Name the fraction in each row.'
    });
    return null;
  }
  const matcher = places.fractions(experiment);
  const match = matcher.match(text);
  if (match.kind === 'one') {
    const said = found.fraction === null ? null : matcher.match(found.fraction);
    const other = assigned ?? (said?.kind === 'one' ? said.value : null);
    if (!other || other.id === match.value.id) return match.value;
    problems.oncePer(`${label} ${text} contradicts`, 'error', {
      code: 'title contradicts',
      ...at,
      found: `“${text}”`,
      expected: other.name,
      what: `The fraction is ${match.value.name} here, but “${label}” means ${other.name}.`,
      fix: 'Correct the one that is wrong.'
    });
    return null;
  }
  const nearest = match.kind === 'none' ? matcher.nearest(text) : null;
  problems.oncePer(`${experiment.id} ${text}`, 'error', {
    code: match.kind === 'many' ? 'ambiguous fraction' : 'unknown fraction',
    ...at,
    found: `“${text}”`,
    expected: names === '' ? 'an experiment with fractions' : `one of: ${names}`,
    what:
      match.kind === 'many'
        ? `“${text}” can be more than one fraction of ${title}.`
        : `${title} has no fraction called “${text}”.${nearest ? ` Is ${nearest} meant?` : ''}`,
    fix: 'Correct the name, or add the fraction to the experiment.'
  });
  return null;
}
