import type { TableMap } from '../../schemas/column-map';
import type { ColumnPlan } from './column-plan';
import type { NameMatcher } from './name-matcher';
import { parseValue } from './parse-value';
import type { Problems } from './problems';
import { readHeader } from './read-header';
import { cellAt } from './sheet';
import type { Section } from './sheet-sections';
import type { Sheet } from './types';

export interface UnusedContext {
  readonly table: TableMap;
  readonly plan: ColumnPlan;
  readonly analytes: NameMatcher<string>;
  readonly isTemplate: boolean;
  readonly problems: Problems;
}

/**
 * Says which columns are left out. Where columns are headed by analytes, a column of numbers under an unknown name is probably an
 * analyte that is not on the panel: an error, since its results would be lost without a word.
 */
export function reportUnusedColumns(
  sheet: Sheet,
  sections: readonly Section[],
  { table, plan, analytes, isTemplate, problems }: UnusedContext
): void {
  const isTurned = table.orientation === 'analytes down';
  const headed = new Map(table.columns.map((column) => [column.column, column]));
  const used = new Set(
    plan.recognised.filter(({ meaning }) => meaning !== 'not used').map(({ column }) => column)
  );
  const row = sections[0]?.headerRow ?? 0;
  const leftOut = new Set(table.leftOut);
  const contents = contentsOf(sheet, sections, used, leftOut);
  for (const [column, { isNumeric }] of [...contents].sort(([one], [other]) => one - other)) {
    const head = headed.get(column);
    const text = head?.header ?? '';
    const at = { sheet: sheet.name, row, column };
    // Our own templates have columns that are there to be read by people.
    if (isTemplate && head?.means === 'ignored' && readHeader(text, analytes).meaning === 'ignored') continue;
    if (table.orientation !== 'long' && head?.means === 'not understood' && isNumeric) {
      reportUnknownAnalyte(at, text, isTurned, analytes, problems);
      continue;
    }
    const line = isTurned ? 'row' : 'column';
    problems.note({
      code: 'column not used',
      ...at,
      found: text === '' ? `a ${line} without a header` : `“${text}”`,
      expected: `${line}s that the import knows`,
      what:
        text === '' ? `This ${line} has no header and is not used.` : `“${text}” is not used by the import.`,
      fix: 'Nothing, if it is not meant to be stored. The file itself is kept whole.'
    });
  }
  for (const line of table.leftOut) {
    const cell = plan.sample === null ? null : cellAt(sheet, line, plan.sample);
    problems.note({
      code: 'column not used',
      sheet: sheet.name,
      row: line,
      column: plan.sample ?? 0,
      found: cell ? `“${cell.raw}”` : 'no label',
      expected: `${isTurned ? 'columns' : 'rows'} with results`,
      what: `This ${isTurned ? 'column' : 'row'} is left out.`,
      fix: 'Nothing, if it is not meant to be stored. The file itself is kept whole.'
    });
  }
}

function reportUnknownAnalyte(
  at: { readonly sheet: string; readonly row: number; readonly column: number },
  text: string,
  isTurned: boolean,
  analytes: NameMatcher<string>,
  problems: Problems
): void {
  const line = isTurned ? 'row' : 'column';
  const isMany = analytes.match(text).kind === 'many';
  const nearest = isMany ? null : analytes.nearest(text);
  problems.error({
    code: isMany ? 'ambiguous analyte' : 'unknown analyte',
    ...at,
    found: `“${text}”`,
    expected: 'a name, synonym or CAS number of the panel',
    what: isMany
      ? `“${text}” can be more than one analyte of the panel.`
      : `“${text}” heads a ${line} of numbers but is not on the panel.${nearest ? ` Is ${nearest} meant?` : ''}`,
    fix: `Correct the name, add it to the panel, or remove the ${line}.`
  });
}

/** Which of the other columns hold something in the rows that are read, and whether that is numbers. */
function contentsOf(
  sheet: Sheet,
  sections: readonly Section[],
  used: ReadonlySet<number>,
  leftOut: ReadonlySet<number>
): ReadonlyMap<number, { readonly isNumeric: boolean }> {
  const contents = new Map<number, { isNumeric: boolean }>();
  for (const { from, to } of sections) {
    for (let at = from; at < to; at++) {
      const row = sheet.rowNumbers[at] ?? 0;
      if (leftOut.has(row)) continue;
      for (let index = sheet.rowStarts[at] ?? 0; index < (sheet.rowStarts[at + 1] ?? 0); index++) {
        const column = sheet.columns[index] ?? 0;
        if (used.has(column) || contents.get(column)?.isNumeric) continue;
        const { state } = parseValue(cellAt(sheet, row, column), null);
        if (state !== 'missing')
          contents.set(column, { isNumeric: state === 'value' || state === 'ambiguous' });
      }
    }
  }
  return contents;
}
