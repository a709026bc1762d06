import type { CellReader } from './merged-cells';
import { readHeader } from './read-header';
import { placeOfName, textOf } from './sheet-mapping';
import type { SheetMapping } from './sheet-mapping';

/** @returns the panel entry that a row of the long layout names, or null; the problem is reported */
export function analyteOf(
  { sheet, plan, analytes, carried, isTurned, problems }: SheetMapping,
  merged: CellReader,
  row: number
): string | null {
  const column = plan.analyte ?? plan.cas;
  const cells = [plan.analyte, plan.cas].map((each) => (each === null ? null : merged(row, each)));
  const [name, cas] = cells.map(textOf);
  const text = column === null ? (carried.analyte?.text ?? '') : name || cas || '';
  const at = {
    sheet: sheet.name,
    ...placeOfName(carried.analyte, row, column),
    expected: 'a name, synonym or CAS number of the panel'
  };
  if (text === '') {
    problems.oncePer(column === null ? 'no column' : String(row), 'error', {
      code: 'missing analyte',
      ...at,
      found: 'an empty cell',
      what: `This ${isTurned ? 'column' : 'row'} has no analyte.`,
      fix: `Write the name of the analyte, or remove the ${isTurned ? 'column' : 'row'}.`
    });
    return null;
  }
  const match = analytes.match(text);
  if (match.kind === 'one') return match.value;
  if (column === null) {
    // "Caffeine areas" as the name of a sheet.
    const header = readHeader(text, analytes);
    if (header.meaning === 'value' && header.analyte !== null) return header.analyte;
  }
  const byCas = cas && cas !== text ? analytes.match(cas) : null;
  if (byCas?.kind === 'one') return byCas.value;
  const nearest = match.kind === 'none' ? analytes.nearest(text) : null;
  const isDate = cells.some((cell) => cell?.kind === 'date');
  problems.oncePer(text, 'error', {
    code: match.kind === 'many' ? 'ambiguous analyte' : 'unknown analyte',
    ...at,
    found: `“${text}”`,
    what:
      match.kind === 'many'
        ? `“${text}” can be more than one analyte of the panel.`
        : isDate
          ? `This cell shows the date ${text} where an analyte belongs; some CAS numbers are turned into dates by spreadsheet programs.`
          : `“${text}” is not on the panel.${nearest ? ` Is ${nearest} meant?` : ''}`,
    fix: isDate
      ? 'Format the cell as text and type the number again.'
      : 'Correct the name, add it to the panel, or remove the rows.'
  });
  return null;
}
