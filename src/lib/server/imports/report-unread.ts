import { cellAddress } from './cell-address';
import { findLayout, isLayout } from './find-layout';
import type { NameMatcher } from './name-matcher';
import type { Problems } from './problems';
import type { Expectation, Sheet, Workbook } from './types';

export function noteEncoding(workbook: Workbook, problems: Problems): void {
  problems.note({
    code: 'text encoding',
    sheet: workbook.sheets[0]?.name ?? null,
    found: 'text that is not UTF-8',
    expected: 'UTF-8',
    what: 'This text file is not in UTF-8 and was read as Western European text.',
    fix: 'Look whether µ, accents and dashes came out right; if not, save the file as UTF-8.'
  });
}

export function isTemplateWelcome(
  experimentId: string,
  expectation: Expectation,
  problems: Problems
): boolean {
  const made = expectation.experiments.find(({ id }) => id === experimentId);
  const wanted = expectation.experiments.find(({ id }) => id === expectation.experimentId);
  if (made && (!wanted || wanted.id === made.id)) return true;
  problems.error({
    code: 'other experiment',
    sheet: null,
    found: made ? `the template of ${made.title}` : 'the template of an experiment that is not in this study',
    expected: wanted ? `the template of ${wanted.title}` : 'the template of an experiment of this study',
    what: made
      ? `This template was made for ${made.title}, and was brought to ${wanted?.title ?? 'another experiment'}.`
      : 'This template was made for an experiment that is not in this study.',
    fix: made
      ? `Bring it to ${made.title}, or download the template anew.`
      : 'Bring it to its own study, or download the template anew.'
  });
  return false;
}

export function noteHidden(sheet: Sheet, problems: Problems): void {
  problems.note({
    code: 'sheet not read',
    sheet: sheet.name,
    found: 'a hidden sheet',
    expected: 'visible sheets',
    what: 'This sheet is hidden and was not read.',
    fix: 'Show it and bring the file again if its results belong to the import.'
  });
}

export function reportNothing(problems: Problems): void {
  problems.error({
    code: 'nothing recognised',
    sheet: null,
    found: 'no visible sheet with a table',
    expected: 'a table with a header line',
    what: 'No visible sheet of this file holds a table.',
    fix: 'Show the sheet with the results, or fill in the template of the experiment.'
  });
}

export function reportUnread(
  sheet: Sheet,
  analytes: NameMatcher<string>,
  severity: 'error' | 'note',
  problems: Problems
): void {
  const add = severity === 'error' ? problems.error.bind(problems) : problems.note.bind(problems);
  const partial = findLayout(sheet, analytes);
  if (partial && !isLayout(partial)) {
    const missing = partial.missing.join(' and ');
    add({
      code: severity === 'error' ? 'missing column' : 'sheet not read',
      sheet: sheet.name,
      row: partial.headerRow,
      column: 0,
      found: partial.seen.map((text) => `“${text}”`).join(', '),
      expected: missing,
      what: `Row ${partial.headerRow + 1} looks like the header line, but ${missing} is missing.`,
      fix: 'Add it, name it as in the template, or say in the column map where it stands.'
    });
    return;
  }
  add({
    code: severity === 'error' ? 'nothing recognised' : 'sheet not read',
    sheet: sheet.name,
    found: 'no header line',
    expected: 'a header line with the sample, and the analyte with its result or a column for each analyte',
    what: `No header line was found in the first rows (to ${cellAddress(Math.min(sheet.rowCount, 60) - 1, Math.max(sheet.columnCount - 1, 0))}).`,
    fix: 'Head the columns as in the template of the experiment; titles above the header are fine.'
  });
}
