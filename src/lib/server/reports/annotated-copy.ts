import { PassThrough, type Readable } from 'node:stream';
import ExcelJS from 'exceljs';
import { parseAddress } from '../imports/cell-address';
import { rowCells } from '../imports/sheet';
import type { Cell, Problem, Sheet, Workbook } from '../imports/types';

/** Ground colours for spreadsheets; the note and the list say in words what they mean. */
const grounds: Readonly<Record<Problem['severity'], string>> = {
  error: 'FFF6D5CF',
  question: 'FFF6E7C1',
  note: 'FFDCEBEC'
};
const gravity: Readonly<Record<Problem['severity'], number>> = { note: 0, question: 1, error: 2 };
const severityWords: Readonly<Record<Problem['severity'], string>> = {
  error: 'keeps the file from being stored',
  question: 'asks for a look',
  note: 'for your information'
};
const listWidths = [24, 8, 28, 34, 34, 60] as const;

export const annotatedLimits = { cells: 400_000, problems: 5_000 } as const;

/**
 * A copy of a file for mending it at one's desk: every cell as it was read, those with a problem coloured and with a note that says what
 * was found, what was expected and how to mend it, and a sheet that lists all problems. Formats, formulas and pictures of the file are not
 * in it; the file itself stays as it came.
 *
 * @param about lines above the list: which file this is a copy of
 */
export function annotatedCopy(
  workbook: Workbook,
  problems: readonly Problem[],
  about: readonly string[]
): Readable {
  const stream = new PassThrough();
  const book = new ExcelJS.stream.xlsx.WorkbookWriter({ stream, useStyles: true, useSharedStrings: false });
  const write = async (): Promise<void> => {
    const names = new Set(workbook.sheets.map(({ name }) => name.toLowerCase()));
    let listName = 'To mend';
    for (let again = 2; names.has(listName.toLowerCase()); again++) listName = `To mend ${again}`;
    writeList(book, listName, problems, about);
    for (const sheet of workbook.sheets) await writeCopy(book, sheet, problems);
    await book.commit();
  };
  write().catch((error: unknown) =>
    stream.destroy(error instanceof Error ? error : new Error(String(error)))
  );
  return stream;
}

function writeList(
  book: ExcelJS.stream.xlsx.WorkbookWriter,
  name: string,
  problems: readonly Problem[],
  about: readonly string[]
): void {
  const head = about.length + 2;
  const sheet = book.addWorksheet(name, { views: [{ state: 'frozen', ySplit: head }] });
  sheet.columns = listWidths.map((width) => ({ width }));
  for (const line of about) sheet.addRow([line]).commit();
  sheet.addRow([]).commit();
  const heads = sheet.addRow(['Sheet', 'Cell', 'Weight', 'Found', 'Expected', 'How to mend it']);
  heads.font = { bold: true };
  heads.commit();
  for (const problem of problems.slice(0, annotatedLimits.problems)) {
    const row = sheet.addRow([
      problem.sheet ?? 'whole file',
      problem.cell ?? '',
      severityWords[problem.severity],
      problem.found,
      problem.expected,
      problem.fix || problem.message
    ]);
    row.alignment = { wrapText: true, vertical: 'top' };
    row.getCell(3).fill = ground(problem.severity);
    if (problem.sheet !== null && problem.cell !== null) {
      row.getCell(2).value = {
        text: problem.cell,
        hyperlink: `#'${problem.sheet.replaceAll("'", "''")}'!${problem.cell}`
      };
    }
    row.commit();
  }
  if (problems.length > annotatedLimits.problems) {
    sheet.addRow([`${problems.length - annotatedLimits.problems} more are not listed.`]).commit();
  }
  sheet.commit();
}

/** Problems of one sheet by cell. */
function problemsAt(sheet: Sheet, problems: readonly Problem[]): ReadonlyMap<string, readonly Problem[]> {
  const at = new Map<string, Problem[]>();
  for (const problem of problems) {
    const place = problem.sheet === sheet.name && problem.cell !== null ? parseAddress(problem.cell) : null;
    if (!place) continue;
    const key = `${place.row} ${place.column}`;
    const own = at.get(key);
    if (own) own.push(problem);
    else at.set(key, [problem]);
  }
  return at;
}

async function writeCopy(
  book: ExcelJS.stream.xlsx.WorkbookWriter,
  sheet: Sheet,
  problems: readonly Problem[]
): Promise<void> {
  const copy = book.addWorksheet(sheet.name, { state: sheet.hidden ? 'hidden' : 'visible' });
  const marked = problemsAt(sheet, problems);
  const emptyMarked = new Map<number, number[]>();
  for (const key of marked.keys()) {
    const [row = 0, column = 0] = key.split(' ').map(Number);
    emptyMarked.set(row, [...(emptyMarked.get(row) ?? []), column]);
  }
  const rows = [...new Set([...sheet.rowNumbers, ...emptyMarked.keys()])].sort((one, other) => one - other);
  for (const [index, number] of rows.entries()) {
    const row = copy.getRow(number + 1);
    for (const { column, cell } of rowCells(sheet, number)) setValue(row.getCell(column + 1), cell);
    for (const column of emptyMarked.get(number) ?? []) {
      annotate(row.getCell(column + 1), marked.get(`${number} ${column}`) ?? []);
    }
    row.commit();
    // Lets the reader of the stream keep up, and other requests be answered.
    if (index % 2_000 === 1_999) await new Promise<void>((resolve) => setImmediate(resolve));
  }
  copy.commit();
}

function setValue(into: ExcelJS.Cell, cell: Cell): void {
  if (cell.kind === 'date') {
    into.value = cell.value;
    into.numFmt = 'yyyy-mm-dd hh:mm';
  } else into.value = cell.kind === 'number' || cell.kind === 'boolean' ? cell.value : cell.raw;
}

function annotate(cell: ExcelJS.Cell, problems: readonly Problem[]): void {
  const gravest = problems.reduce<Problem | null>(
    (worst, each) => (worst && gravity[worst.severity] >= gravity[each.severity] ? worst : each),
    null
  );
  if (!gravest) return;
  // A cell that holds nothing at all would be left out of the file, with its note.
  cell.value ??= '';
  cell.fill = ground(gravest.severity);
  cell.note = problems.map(({ message, fix }) => `${message}${fix ? ` ${fix}` : ''}`).join('\n');
}

function ground(severity: Problem['severity']): ExcelJS.FillPattern {
  return { type: 'pattern', pattern: 'solid', fgColor: { argb: grounds[severity] } };
}
