import { nameKey } from '../../domain/name-key';
import type { CarriedName } from '../../schemas/column-map';
import { nameIn, namedText } from './named-text';
import type { NamedText } from './named-text';
import type { PlannedTable } from './plan-tables';
import type { Problems } from './problems';
import type { RecogniseContext } from './recognise-table';
import { cellAt } from './sheet';
import type { Section } from './sheet-sections';

/** The names that a sheet, a title or a block carries for the rows of a section. */
export function carriedBy(
  { table, view, problems }: PlannedTable,
  section: Section,
  names: RecogniseContext
): Partial<Record<CarriedName, NamedText>> {
  const found: Partial<Record<CarriedName, NamedText>> = {};
  const ofSheet: NamedText = { text: view.name, row: null, column: null };
  for (const carried of table.carried) {
    const titles: readonly NamedText[] =
      carried.from === 'sheet name'
        ? [ofSheet]
        : carried.from === 'block title'
          ? section.titles
          : [
              {
                text: cellAt(view, carried.row, carried.column)?.raw ?? '',
                row: carried.row,
                column: carried.column
              }
            ];
    const text = namedText(titles, carried.names, names);
    if (!text) continue;
    found[carried.names] = text;
    if (carried.from !== 'sheet name') askAboutSheetName(text, carried.names, view.name, names, problems);
  }
  return found;
}

function askAboutSheetName(
  title: NamedText,
  what: CarriedName,
  sheetName: string,
  names: RecogniseContext,
  problems: Problems
): void {
  const other = what === 'sample' ? null : nameIn(sheetName, what, names);
  if (other === null || isSame(other, title.text, what, names)) return;
  problems.oncePer(`${what} ${title.text}`, 'question', {
    code: 'title contradicts',
    sheet: sheetName,
    ...(title.row === null || title.column === null ? {} : { row: title.row, column: title.column }),
    found: `“${title.text}”`,
    expected: `the ${what} that the sheet’s name says, ${other}`,
    what: `The title says ${title.text}, the name of the sheet says ${other}. It is read as ${title.text}; is that right?`,
    fix: 'Confirm, or correct the one that is wrong.'
  });
}

function isSame(one: string, other: string, what: CarriedName, { analytes }: RecogniseContext): boolean {
  if (nameKey(one) === nameKey(other)) return true;
  if (what !== 'analyte') return false;
  const [first, second] = [analytes.match(one), analytes.match(other)];
  return first.kind === 'one' && second.kind === 'one' && first.value === second.value;
}
