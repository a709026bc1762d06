import { buffer } from 'node:stream/consumers';
import ExcelJS from 'exceljs';
import { describe, expect, it } from 'vitest';
import { readingLimits } from '../../../src/lib/server/imports/limits';
import { readWorkbook } from '../../../src/lib/server/imports/read-workbook';
import { cellAt } from '../../../src/lib/server/imports/sheet';
import type { Problem, Workbook } from '../../../src/lib/server/imports/types';
import { annotatedCopy } from '../../../src/lib/server/reports/annotated-copy';

async function source(): Promise<Workbook> {
  const book = new ExcelJS.Workbook();
  const areas = book.addWorksheet('Areas');
  areas.addRows([
    ['Sample', 'Area', 'Run'],
    ['S1', 12.5, new Date(Date.UTC(2026, 2, 1, 9, 30))],
    ['S2', '48,2l3', null]
  ]);
  book.addWorksheet('To mend').addRow(['a sheet of the lab']);
  return readWorkbook(Buffer.from(await book.xlsx.writeBuffer()), readingLimits);
}

const problem = (cell: string | null, severity: Problem['severity'], message: string): Problem => ({
  severity,
  code: 'not a number',
  sheet: cell === null ? null : 'Areas',
  cell,
  found: '“48,2l3”',
  expected: 'an area',
  message,
  fix: 'Correct the cell.',
  answer: null
});

async function copyOf(workbook: Workbook, problems: readonly Problem[]): Promise<ExcelJS.Workbook> {
  const book = new ExcelJS.Workbook();
  const bytes = await buffer(annotatedCopy(workbook, problems, ['A copy of areas.xlsx']));
  await book.xlsx.load(bytes as unknown as ArrayBuffer);
  return book;
}

const noteOf = (cell: ExcelJS.Cell | undefined): string => {
  const note = cell?.note;
  return typeof note === 'string' ? note : (note?.texts ?? []).map(({ text }) => text).join('');
};

describe('an annotated copy', () => {
  it('colours and notes the cell that is wrong, an empty one too', async () => {
    const copy = await copyOf(await source(), [
      problem('B3', 'question', 'B3 looks odd.'),
      problem('B3', 'error', 'B3 is no number.'),
      problem('D5', 'note', 'D5 is empty.')
    ]);
    const sheet = copy.getWorksheet('Areas');
    expect(noteOf(sheet?.getCell('B3'))).toBe(
      'B3 looks odd. Correct the cell.\nB3 is no number. Correct the cell.'
    );
    expect(sheet?.getCell('B3').fill).toMatchObject({ fgColor: { argb: 'FFF6D5CF' } });
    expect(noteOf(sheet?.getCell('D5'))).toContain('D5 is empty.');
    expect(sheet?.getCell('B2').fill?.type).toBeUndefined();
  });

  it('lists every problem first, with a way to its cell, beside whatever the file calls its own sheets', async () => {
    const copy = await copyOf(await source(), [
      problem('B3', 'error', 'x'),
      problem(null, 'question', 'The whole.')
    ]);
    expect(copy.worksheets.map(({ name }) => name)).toEqual(['To mend 2', 'Areas', 'To mend']);
    const list = copy.getWorksheet('To mend 2');
    expect(list?.getCell('A1').value).toBe('A copy of areas.xlsx');
    expect(list?.getCell('B4').value).toMatchObject({ text: 'B3', hyperlink: "#'Areas'!B3" });
    expect(list?.getRow(5).values).toEqual(expect.arrayContaining(['whole file', 'asks for a look']));
  });

  it('reads back as the file it was made from', async () => {
    const workbook = await source();
    const bytes = await buffer(annotatedCopy(workbook, [problem('B3', 'error', 'x')], []));
    const again = await readWorkbook(bytes, readingLimits);
    const areas = (of: Workbook) => of.sheets.find(({ name }) => name === 'Areas');
    for (let row = 0; row < 4; row++) {
      for (let column = 0; column < 4; column++) {
        const cell = (of: Workbook) => {
          const sheet = areas(of);
          return sheet ? cellAt(sheet, row, column) : null;
        };
        expect(cell(again)).toEqual(cell(workbook));
      }
    }
  });
});
