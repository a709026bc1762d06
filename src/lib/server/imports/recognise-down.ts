import type { Carried, MapColumn } from '../../schemas/column-map';
import type { HeaderColumn, SheetLayout } from './find-layout';
import { fingerprintOf, mapColumn } from './map-column';
import { mergeAwareReader } from './merged-cells';
import { nameIn } from './named-text';
import { readHeader } from './read-header';
import type { RecogniseContext, SheetMap } from './recognise-table';
import { cellAt, rowCells } from './sheet';
import { turnedSheet } from './turned-sheet';
import type { Sheet } from './types';

/** How many columns can stand before the samples in a sheet with the analytes down. */
const linesBefore = 12;

/** Analytes in rows, samples in columns: the sheet is looked at turned. */
export function recogniseDown(sheet: Sheet, context: RecogniseContext): SheetMap | null {
  const turned = turnedSheet(sheet);
  if (!turned) return null;
  for (const line of turned.rowNumbers.subarray(0, linesBefore)) {
    const columns = rowCells(turned, line).flatMap(({ column, cell }): readonly HeaderColumn[] =>
      cell.kind === 'text' && cell.value.length <= 300
        ? [{ column, text: cell.value.trim(), header: readHeader(cell.value, context.analytes) }]
        : []
    );
    const firstAnalyte = columns.find(({ header }) => header.meaning === 'value' && header.analyte !== null);
    if (!firstAnalyte) continue;
    const table = tableDown(turned, line, columns, firstAnalyte.column, context);
    if (table) return table;
  }
  return null;
}

function tableDown(
  turned: Sheet,
  line: number,
  columns: readonly HeaderColumn[],
  firstAnalyte: number,
  context: RecogniseContext
): SheetMap | null {
  const lines = [...turned.rowNumbers].filter((each) => each > line);
  const textsOf = (column: number): readonly string[] =>
    lines.flatMap((each) => {
      const cell = cellAt(turned, each, column);
      return cell && cell.raw.trim() !== '' ? [cell.raw.trim()] : [];
    });
  const mostly = (column: number, names: (text: string) => boolean): boolean => {
    const texts = textsOf(column);
    return texts.length > 0 && texts.filter(names).length * 2 >= texts.length;
  };
  const found = new Map(columns.map((column) => [column.column, column]));
  const meanings = new Map<number, 'sample' | 'fraction'>();
  for (let column = 0; column < firstAnalyte; column++) {
    const meaning = found.get(column)?.header.meaning;
    const taken = [...meanings.values()];
    if (meaning === 'sample' || meaning === 'fraction') meanings.set(column, meaning);
    else if (!taken.includes('sample') && mostly(column, context.isSample)) meanings.set(column, 'sample');
    else if (!taken.includes('fraction') && mostly(column, (text) => context.places.hasFraction(text)))
      meanings.set(column, 'fraction');
  }
  const sampleLine = [...meanings].find(([, meaning]) => meaning === 'sample')?.[0];
  if (sampleLine === undefined) return null;

  const titleKind = kindAbove(columns, firstAnalyte, turned.name, context);
  const headed = [...new Set([...found.keys(), ...meanings.keys()])].sort((one, other) => one - other);
  const mapped = headed.map((column): MapColumn => {
    const head = found.get(column) ?? { column, text: '', header: { meaning: 'unknown', unit: null } };
    const meaning = meanings.get(column);
    const read = mapColumn(head, { columns, titleKind }, context);
    if (meaning) return { ...read, means: meaning, analyte: null, basis: null, unit: null };
    // Titles, and the corner of the table, are read by people.
    return column < firstAnalyte &&
      (read.means === 'area' || read.means === 'amount' || read.means === 'analyte')
      ? { ...read, means: 'ignored', basis: null, unit: null }
      : read;
  });
  // Columns that describe the analytes (CAS number, formula, unit) hold no sample.
  const labelled = mergeAwareReader(turned);
  const leftOut = lines.filter((each) => {
    const label = labelled(each, sampleLine)?.raw.trim() ?? '';
    if (label !== '') return !context.isSample(label) && isHeaderWord(label, context);
    return Array.from({ length: firstAnalyte }, (_, column) => cellAt(turned, each, column)?.raw ?? '').some(
      (text) => text !== '' && isHeaderWord(text, context)
    );
  });
  const base = { orientation: 'analytes down' as const, headerLines: [line], columns: mapped, leftOut };
  const needs = context.needsFraction && ![...meanings.values()].includes('fraction');
  const fraction = needs && nameIn(turned.name, 'fraction', context) !== null;
  const carried: Carried[] = fraction ? [{ names: 'fraction', from: 'sheet name' }] : [];
  return { ...base, blocks: null, carried, fingerprint: fingerprintOf({ ...base, carried }) };
}

function isHeaderWord(text: string, { analytes }: RecogniseContext): boolean {
  const header = readHeader(text, analytes);
  return header.meaning !== 'unknown' && !('analyte' in header && header.analyte !== null);
}

/** What a title, the corner of the table or the sheet's name says the numbers are. */
function kindAbove(
  columns: readonly HeaderColumn[],
  firstAnalyte: number,
  sheetName: string,
  { analytes }: RecogniseContext
): SheetLayout['titleKind'] {
  const above = columns
    .filter(({ column }) => column < firstAnalyte)
    .map(({ text, header }) => ({ text, header }));
  for (const { text, header } of [...above, { text: sheetName, header: readHeader(sheetName, analytes) }]) {
    if (header.meaning === 'value' && header.analyte === null && header.kind !== 'result')
      return { kind: header.kind, unit: header.unit };
    if (header.meaning === 'analyte' && header.unit !== null) {
      const unitAlone = readHeader(text.replace(/^[^([]*/, ''), analytes);
      if (unitAlone.meaning === 'value' && unitAlone.kind !== 'result')
        return { kind: unitAlone.kind, unit: unitAlone.unit };
    }
  }
  return null;
}
