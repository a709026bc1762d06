import type { ColumnPlan } from './column-plan';
import type { SheetLayout } from './find-layout';
import type { NameMatcher } from './name-matcher';
import { parseValue } from './parse-value';
import type { ProblemList } from './problems';
import { cellAt } from './sheet';
import type { Sheet } from './types';

/**
 * Says which columns are left out. In the wide layout a column of numbers under an unknown name is probably an
 * analyte that is not on the panel: an error, since its results would be lost without a word.
 */
export function reportUnusedColumns(
  sheet: Sheet,
  layout: SheetLayout,
  plan: ColumnPlan,
  analytes: NameMatcher<string>,
  isTemplate: boolean,
  problems: ProblemList
): void {
  const headed = new Map(layout.columns.map((column) => [column.column, column]));
  const used = new Set(
    plan.recognised.filter(({ meaning }) => meaning !== 'not used').map(({ column }) => column)
  );
  const contents = contentsBelow(sheet, layout.headerRow, used);
  for (const [column, { isNumeric }] of [...contents].sort(([one], [other]) => one - other)) {
    const head = headed.get(column);
    const at = { sheet: sheet.name, row: layout.headerRow, column };
    // Our own templates have columns that are there to be read by people.
    if (isTemplate && head?.header.meaning === 'ignored') continue;
    if (layout.layout === 'wide' && head?.header.meaning === 'unknown' && isNumeric) {
      reportUnknownAnalyte(at, head.text, analytes, problems);
      continue;
    }
    problems.note({
      code: 'column not used',
      ...at,
      found: head ? `“${head.text}”` : 'a column without a header',
      expected: 'columns that the import knows',
      what: head ? `“${head.text}” is not used by the import.` : 'This column has no header and is not used.',
      fix: 'Nothing, if it is not meant to be stored. The file itself is kept whole.'
    });
  }
}

function reportUnknownAnalyte(
  at: { readonly sheet: string; readonly row: number; readonly column: number },
  text: string,
  analytes: NameMatcher<string>,
  problems: ProblemList
): void {
  const isMany = analytes.match(text).kind === 'many';
  const nearest = isMany ? null : analytes.nearest(text);
  problems.error({
    code: isMany ? 'ambiguous analyte' : 'unknown analyte',
    ...at,
    found: `“${text}”`,
    expected: 'a name, synonym or CAS number of the panel',
    what: isMany
      ? `“${text}” can be more than one analyte of the panel.`
      : `“${text}” heads a column of numbers but is not on the panel.${nearest ? ` Is ${nearest} meant?` : ''}`,
    fix: 'Correct the name, add it to the panel, or remove the column.'
  });
}

/** Which of the other columns hold something below the header, and whether that is numbers. */
function contentsBelow(
  sheet: Sheet,
  headerRow: number,
  used: ReadonlySet<number>
): ReadonlyMap<number, { readonly isNumeric: boolean }> {
  const contents = new Map<number, { isNumeric: boolean }>();
  for (let at = 0; at < sheet.rowNumbers.length; at++) {
    const row = sheet.rowNumbers[at] ?? 0;
    if (row <= headerRow) continue;
    for (let index = sheet.rowStarts[at] ?? 0; index < (sheet.rowStarts[at + 1] ?? 0); index++) {
      const column = sheet.columns[index] ?? 0;
      if (used.has(column) || contents.get(column)?.isNumeric) continue;
      const { state } = parseValue(cellAt(sheet, row, column), null);
      if (state !== 'missing')
        contents.set(column, { isNumeric: state === 'value' || state === 'ambiguous' });
    }
  }
  return contents;
}
