import { cellAt } from './sheet';
import type { Reading, Workbook } from './types';

/** The sheet by which a template says what it was made for: names in column A, values in column B. */
export const markSheet = 'Headwater template';
export const readMeSheet = 'Read me';
export const templateVersion = 1;
export const markNames = {
  version: 'template version',
  experiment: 'experiment id',
  layout: 'layout'
} as const;

/** @returns null for a file that is none of our templates */
export function readTemplateMark(workbook: Workbook): Reading['template'] {
  const sheet = workbook.sheets.find(({ name }) => name === markSheet);
  if (!sheet) return null;
  const marks = new Map<string, string>();
  for (const row of sheet.rowNumbers) {
    const name = cellAt(sheet, row, 0);
    const value = cellAt(sheet, row, 1);
    if (name && value) marks.set(name.raw, value.raw);
  }
  const experimentId = marks.get(markNames.experiment);
  if (experimentId === undefined) return null;
  return { experimentId, layout: marks.get(markNames.layout) === 'wide' ? 'wide' : 'long' };
}
