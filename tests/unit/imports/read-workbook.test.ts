import ExcelJS from 'exceljs';
import { describe, expect, it } from 'vitest';
import { cellAddress, columnLetters, parseAddress } from '../../../src/lib/server/imports/cell-address';
import { isDateFormat } from '../../../src/lib/server/imports/number-formats';
import { readWorkbook } from '../../../src/lib/server/imports/read-workbook';
import { cellAt, isoToSerial, rowCells, serialToIso } from '../../../src/lib/server/imports/sheet';
import type { Sheet, Workbook } from '../../../src/lib/server/imports/types';
import { inMemory, streamed } from '../../fixtures/workbooks/exceljs-files';
import { handMadeWorkbook, inOrder, workbookParts } from '../../fixtures/workbooks/hand-made';
import { convert, libreOffice } from '../../fixtures/workbooks/libreoffice';
import { zip } from '../../fixtures/workbooks/zip';

function sheetOf(workbook: Workbook, index = 0): Sheet {
  const sheet = workbook.sheets[index];
  if (!sheet) throw new Error(`no sheet ${index}`);
  return sheet;
}

/** Address → kind and value of every filled cell. */
function contents(sheet: Sheet): Record<string, unknown> {
  return Object.fromEntries(
    [...sheet.rowNumbers].flatMap((row) =>
      rowCells(sheet, row).map(({ column, cell }) => [cellAddress(row, column), cell.value ?? cell.raw])
    )
  );
}

const read = async (
  data: string,
  more: Partial<Parameters<typeof handMadeWorkbook>[0]> = {}
): Promise<Sheet> =>
  sheetOf(await readWorkbook(handMadeWorkbook({ sheets: [{ name: 'Areas', data }], ...more })));

describe('readWorkbook on workbooks', () => {
  const shared = {
    sheets: [
      {
        name: 'Areas',
        data: '<row r="1"><c r="A1" t="s"><v>1</v></c><c r="B1" t="s"><v>0</v></c><c r="C1"><v>1</v></c></row>'
      }
    ],
    sharedStrings: ['<t>Caffeine</t>', '<t>S1</t>']
  };

  it.each([
    ['before the sheets', ['xl/sharedStrings.xml', 'xl/worksheets/sheet1.xml']],
    ['behind the sheets', ['xl/worksheets/sheet1.xml', 'xl/workbook.xml', 'xl/sharedStrings.xml']]
  ])('gives texts, never their numbers, with the shared texts %s', async (_, order) => {
    const workbook = await readWorkbook(zip(inOrder(workbookParts(shared), order)));
    expect(contents(sheetOf(workbook))).toEqual({ A1: 'S1', B1: 'Caffeine', C1: 1 });
  });

  it.each([
    ['in one piece', (rows: ExcelJS.CellValue[][]) => inMemory({ Areas: rows })],
    [
      'row by row with shared texts',
      (rows: ExcelJS.CellValue[][]) => streamed({ Areas: rows }, { useSharedStrings: true })
    ],
    [
      'row by row with inline texts',
      (rows: ExcelJS.CellValue[][]) => streamed({ Areas: rows }, { useSharedStrings: false })
    ]
  ])('reads what exceljs wrote %s', async (_, write) => {
    const workbook = await readWorkbook(
      await write([
        ['Sample', 'Area', 'Done'],
        ['S 1 <&> é', 0.1 + 0.2, true],
        [
          { richText: [{ text: 'Caf' }, { font: { bold: true }, text: 'feine' }] },
          { formula: 'B2*2', result: 0.6 },
          { error: '#N/A' }
        ],
        [null, new Date(Date.UTC(2026, 2, 4, 16, 20)), 'a\nb']
      ])
    );
    expect(contents(sheetOf(workbook))).toEqual({
      A1: 'Sample',
      B1: 'Area',
      C1: 'Done',
      A2: 'S 1 <&> é',
      B2: 0.1 + 0.2,
      C2: true,
      A3: 'Caffeine',
      B3: 0.6,
      C3: '#N/A',
      B4: isoToSerial('2026-03-04T16:20'),
      C4: 'a\nb'
    });
    expect(cellAt(sheetOf(workbook), 3, 1)).toMatchObject({ kind: 'date', raw: '2026-03-04T16:20:00' });
    expect(cellAt(sheetOf(workbook), 2, 2)?.kind).toBe('error');
  });

  it.skipIf(!libreOffice)(
    'reads what LibreOffice saved of it',
    async () => {
      const rows = [
        ['Sample', 'Area'],
        ['S1', 12.5],
        ['Käse µ', { formula: 'B2*3' } as ExcelJS.CellValue]
      ];
      const workbook = await readWorkbook(
        convert(await inMemory({ Areas: rows, Second: [['x']] }), 'xlsx', 'xlsx')
      );
      expect(workbook.sheets.map(({ name }) => name)).toEqual(['Areas', 'Second']);
      expect(contents(sheetOf(workbook))).toEqual({
        A1: 'Sample',
        B1: 'Area',
        A2: 'S1',
        B2: 12.5,
        A3: 'Käse µ',
        B3: 37.5
      });
      const csv = await readWorkbook(convert(await inMemory({ Areas: rows.slice(0, 2) }), 'xlsx', 'csv'));
      expect(contents(sheetOf(csv))).toEqual({ A1: 'Sample', B1: 'Area', A2: 'S1', B2: '12.5' });
    },
    120_000
  );

  it('reads inline texts, rich texts and escaped characters, without the hints for pronouncing', async () => {
    const sheet = await read(
      `<row r="2"><c r="B2" t="inlineStr"><is><r><t>Caf</t></r><r><t xml:space="preserve">feine </t></r></is></c>
       <c r="C2" t="s"><v>0</v></c><c r="D2" t="str"><v>a_x0041_b</v></c></row>`,
      { sharedStrings: ['<r><t>東</t></r><rPh sb="0" eb="1"><t>ひがし</t></rPh>'] }
    );
    expect(contents(sheet)).toEqual({ B2: 'Caffeine ', C2: '東', D2: 'aAb' });
  });

  it('takes formulas by their stored results and tells those without one', async () => {
    const sheet = await read(
      `<row r="1"><c r="A1"><f t="shared" ref="A1:A2" si="0">B1*2</f><v>4</v></c><c r="B1"><f>1+1</f></c><c r="C1" t="str"><f>""</f><v></v></c></row>
       <row r="2"><c r="A2"><f t="shared" si="0"/><v>6</v></c><c r="B2" t="e"><f>1/0</f><v>#DIV/0!</v></c></row>`
    );
    expect(contents(sheet)).toEqual({ A1: 4, B1: '=1+1', A2: 6, B2: '#DIV/0!' });
    expect(cellAt(sheet, 0, 1)?.kind).toBe('formula');
  });

  it('counts dates from 1900 or 1904 as the file says, and leaves numbers alone', async () => {
    const formats = [
      { id: 0 },
      { id: 14 },
      { id: 164, code: 'yyyy\\-mm\\-dd hh:mm' },
      { id: 165, code: '0.0&quot; days&quot;' }
    ];
    const data =
      '<row r="1"><c r="A1" s="1"><v>1462</v></c><c r="B1" s="2"><v>1462.5</v></c><c r="C1" s="3"><v>1462</v></c><c r="D1" s="0"><v>1462</v></c></row>';
    const from1900 = await read(data, { cellFormats: formats });
    const from1904 = await read(data, { cellFormats: formats, date1904: true });
    expect([0, 1, 2, 3].map((column) => cellAt(from1900, 0, column)?.raw)).toEqual([
      '1904-01-01',
      '1904-01-01T12:00:00',
      '1462',
      '1462'
    ]);
    expect([0, 1, 2, 3].map((column) => cellAt(from1904, 0, column)?.raw)).toEqual([
      '1908-01-02',
      '1908-01-02T12:00:00',
      '1462',
      '1462'
    ]);
  });

  it('reads dates written as ISO text', async () => {
    const sheet = await read('<row r="1"><c r="A1" t="d"><v>2026-03-04T00:00:00</v></c></row>');
    expect(cellAt(sheet, 0, 0)).toEqual({ kind: 'date', value: 46085, raw: '2026-03-04' });
  });

  it('reads cells and rows without addresses, and rows out of order', async () => {
    const sheet = await read(
      '<row><c><v>1</v></c><c><v>2</v></c></row><row r="9"><c r="C9"><v>3</v></c></row><row r="4"><c><v>4</v></c></row>'
    );
    expect(contents(sheet)).toEqual({ A1: 1, B1: 2, C9: 3, A4: 4 });
    expect([...sheet.rowNumbers]).toEqual([0, 3, 8]);
    expect(sheet.rowCount).toBe(9);
    expect(sheet.columnCount).toBe(3);
  });

  it('keeps numbers to the last bit and shows them at their shortest', async () => {
    const sheet = await read(
      '<row r="1"><c r="A1"><v>0.10000000000000001</v></c><c r="B1"><v>1.7976931348623157E308</v></c></row>'
    );
    expect(cellAt(sheet, 0, 0)).toEqual({ kind: 'number', value: 0.1, raw: '0.1' });
    expect(cellAt(sheet, 0, 1)?.value).toBe(Number.MAX_VALUE);
  });

  it('keeps merged blocks, hidden sheets and the widest sheets that there can be', async () => {
    const workbook = await readWorkbook(
      handMadeWorkbook({
        sheets: [
          {
            name: 'Wide',
            data: '<row r="1"><c r="A1"><v>1</v></c><c r="XFD1"><v>2</v></c></row>',
            after: '<mergeCells count="1"><mergeCell ref="A1:C2"/></mergeCells>'
          },
          { name: 'Hidden', data: '<row r="1"><c r="A1"><v>1</v></c></row>', state: 'hidden' },
          { name: 'Deep', data: '', state: 'veryHidden' }
        ]
      })
    );
    expect(workbook.sheets.map(({ hidden }) => hidden)).toEqual([false, true, true]);
    expect(sheetOf(workbook).merges).toEqual([{ top: 0, left: 0, bottom: 1, right: 2 }]);
    expect(sheetOf(workbook).columnCount).toBe(16_384);
    expect(contents(sheetOf(workbook))).toEqual({ A1: 1, XFD1: 2 });
  });

  it('reads elements with a prefix and parts in UTF-16', async () => {
    const xml =
      '<?xml version="1.0" encoding="UTF-16"?><x:worksheet xmlns:x="http://schemas.openxmlformats.org/spreadsheetml/2006/main"><x:sheetData><x:row r="1"><x:c r="A1" t="inlineStr"><x:is><x:t>é</x:t></x:is></x:c></x:row></x:sheetData></x:worksheet>';
    const parts = workbookParts({ sheets: [{ name: 'A', data: '' }] }).map((part) =>
      part.name === 'xl/worksheets/sheet1.xml'
        ? { ...part, content: Buffer.concat([Buffer.from([0xff, 0xfe]), Buffer.from(xml, 'utf16le')]) }
        : part
    );
    expect(contents(sheetOf(await readWorkbook(zip(parts))))).toEqual({ A1: 'é' });
  });
});

describe('readWorkbook on text tables', () => {
  const table = async (bytes: Buffer | string): Promise<Workbook> =>
    readWorkbook(Buffer.from(bytes as string));
  const cells = async (bytes: Buffer | string): Promise<Record<string, unknown>> =>
    contents(sheetOf(await table(bytes)));
  const expected = { A1: 'Sample', B1: 'Area', A2: 'S1', B2: '48,2' };

  it.each([
    ['semicolons', 'Sample;Area\nS1;48,2\n', ';'],
    ['tabs', 'Sample\tArea\r\nS1\t48,2\r\n', '\t'],
    ['commas and quotation marks', 'Sample,Area\r\nS1,"48,2"', ','],
    ['a declared separator', 'sep=;\nSample;Area\nS1;48,2\n', ';']
  ])('reads %s', async (_, text, separator) => {
    const workbook = await table(text);
    expect(workbook.separator).toBe(separator);
    expect(Object.values(contents(sheetOf(workbook)))).toEqual(Object.values(expected));
  });

  it('counts the line that declares the separator as a row, so that addresses are those of the file', async () => {
    expect(await cells('sep=;\nSample;Area\n')).toEqual({ A2: 'Sample', B2: 'Area' });
  });

  const text = 'Sample;Area µ\nS1;48,2\n';
  it.each([
    ['UTF-8 with a mark', Buffer.concat([Buffer.from([0xef, 0xbb, 0xbf]), Buffer.from(text)]), 'utf-8'],
    ['UTF-8', Buffer.from(text), 'utf-8'],
    [
      'UTF-16 with a mark',
      Buffer.concat([Buffer.from([0xff, 0xfe]), Buffer.from(text, 'utf16le')]),
      'utf-16le'
    ],
    [
      'UTF-16 the other way round',
      Buffer.concat([Buffer.from([0xff, 0xfe]), Buffer.from(text, 'utf16le')]).swap16(),
      'utf-16be'
    ],
    ['UTF-16 without a mark', Buffer.from(text, 'utf16le'), 'utf-16le'],
    ['latin1', Buffer.from(text, 'latin1'), 'windows-1252']
  ])('reads %s', async (_, bytes, encoding) => {
    const workbook = await table(bytes);
    expect(workbook.encoding).toBe(encoding);
    expect(contents(sheetOf(workbook))).toEqual({ A1: 'Sample', B1: 'Area µ', A2: 'S1', B2: '48,2' });
  });

  it('keeps rows where they are: blank lines, line ends in cells, doubled quotation marks', async () => {
    expect(await cells('a;b\n\n"x\ny";"say ""q"""\nS1;5" tube\n')).toEqual({
      A1: 'a',
      B1: 'b',
      A3: 'x\ny',
      B3: 'say "q"',
      A4: 'S1',
      B4: '5" tube'
    });
  });

  it('is not misled by commas inside numbers or by titles', async () => {
    const workbook = await table(
      'Run of the week, first part\n\nSample;Area;Volume\nS1;1,5;0,5\nS2;1,6;0,5\n'
    );
    expect(workbook.separator).toBe(';');
  });
});

describe('cell addresses', () => {
  it.each([
    [0, 'A'],
    [25, 'Z'],
    [26, 'AA'],
    [701, 'ZZ'],
    [702, 'AAA'],
    [16_383, 'XFD']
  ])('writes column %d as %s and reads it back', (column, letters) => {
    expect(columnLetters(column)).toBe(letters);
    expect(parseAddress(`${letters}18`)).toEqual({ row: 17, column });
  });

  it.each(['', 'A', '1', 'A0', 'ABCD1', 'A1B', '$A$1'])('takes %j for no address', (text) => {
    expect(parseAddress(text)).toBeNull();
  });
});

describe('number formats and serial dates', () => {
  it.each(['yyyy-mm-dd', 'd/m/yy', '[h]:mm', '[$-409]h:mm AM/PM', 'mmm'])('takes %s for a date', (code) => {
    expect(isDateFormat(code)).toBe(true);
  });

  it.each(['General', '0.00E+00', '#,##0.00', '0.0" days"', '[Red]0.00;[Blue]-0.00', '0\\h', '_(* #,##0_)'])(
    'takes %s for a number',
    (code) => {
      expect(isDateFormat(code)).toBe(false);
    }
  );

  // 1 March 1900 is day 61 in the count that has a 29 February 1900; 25569 is the start of 1970 (ECMA-376 part 1, 18.17.4.1).
  it.each([
    [61, '1900-03-01'],
    [25_569, '1970-01-01'],
    [46_085.75, '2026-03-04T18:00:00']
  ])('writes %d as %s and back', (serial, iso) => {
    expect(serialToIso(serial)).toBe(iso);
    expect(isoToSerial(iso)).toBe(serial);
  });
});
