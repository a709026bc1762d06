import { openArchive } from './archive';
import type { Archive } from './archive';
import { parseAddress } from './cell-address';
import type { ReadingLimits } from './limits';
import { readDateStyles } from './number-formats';
import { damaged, outOfProportion, Refusal } from './refusal';
import { scanXml } from './scan-xml';
import { readSharedStrings, TextPieces, unescapeText } from './shared-strings';
import { isoToSerial } from './sheet';
import { SheetBuilder, TextStore } from './sheet-builder';
import type { Sheet, Workbook } from './types';
import { findWorkbookParts } from './workbook-parts';

/** Days from the start of the 1900 count to that of the 1904 count. */
const daysTo1904 = 1462;

interface Surroundings {
  readonly limits: ReadingLimits;
  readonly store: TextStore;
  readonly sharedStrings: readonly number[];
  readonly dateStyles: readonly boolean[];
  readonly dateOffset: number;
}

/**
 * Reads an XLSX workbook (ECMA-376): values only, formulas by their stored results, every sheet, hidden ones marked.
 *
 * @throws Refusal
 */
export async function readXlsx(bytes: Buffer, limits: ReadingLimits): Promise<Workbook> {
  const archive = await openArchive(bytes, limits);
  const parts = await findWorkbookParts(archive, limits);
  if (parts.sheets.length === 0) {
    throw new Refusal('empty', 'This workbook has no sheet with cells in it. Nothing was stored.');
  }
  const store = new TextStore(limits);
  const surroundings: Surroundings = {
    limits,
    store,
    sharedStrings: parts.sharedStrings
      ? await readSharedStrings(archive, parts.sharedStrings, limits, store)
      : [],
    dateStyles: parts.styles ? await readDateStyles(archive, parts.styles, limits) : [],
    dateOffset: parts.countsFrom1904 ? daysTo1904 : 0
  };
  const sheets: Sheet[] = [];
  for (const { name, hidden, part } of parts.sheets) {
    sheets.push(await readSheet(archive, part, name, hidden, surroundings));
  }
  if (sheets.every((sheet) => sheet.rowCount === 0)) {
    throw new Refusal(
      'empty',
      'This workbook is empty: none of its sheets has a filled cell. Nothing was stored.'
    );
  }
  return { kind: 'xlsx', encoding: null, separator: null, sheets };
}

async function readSheet(
  archive: Archive,
  part: string,
  name: string,
  hidden: boolean,
  { limits, store, sharedStrings, dateStyles, dateOffset }: Surroundings
): Promise<Sheet> {
  const builder = new SheetBuilder(store, limits);
  const inline = new TextPieces();
  let row = -1;
  let column = -1;
  let type = 'n';
  let style = 0;
  let value = '';
  let formula: string | null = null;
  let inCell = false;
  let within: 'v' | 'f' | 'is' | null = null;

  function finishCell(): void {
    if (type === 'n' && value !== '') {
      addNumber(Number(value), dateStyles[style] === true);
    } else if (type === 'inlineStr') {
      const text = inline.take();
      if (text !== '') builder.addText(row, column, 'text', text);
    } else if (value === '') {
      // A formula whose stored result is an empty text is an empty cell.
      if (formula !== null && type !== 'str') builder.addText(row, column, 'formula', `=${formula}`);
    } else if (type === 's') {
      const index = sharedStrings[Number(value)];
      if (index === undefined) throw damaged(`sheet ${name} points to a text that the file does not hold`);
      if (store.texts[index] !== '') builder.add(row, column, 'text', index);
    } else if (type === 'str') {
      builder.addText(row, column, 'text', unescapeText(value));
    } else if (type === 'b') {
      builder.add(row, column, 'boolean', value === '1' || value === 'true' ? 1 : 0);
    } else if (type === 'e') {
      builder.addText(row, column, 'error', value);
    } else
      addNumber(
        type === 'd' ? isoToSerial(value) : Number(value),
        type === 'd' || dateStyles[style] === true
      );
  }

  function addNumber(number: number | null, isDate: boolean): void {
    if (number === null || !Number.isFinite(number)) builder.addText(row, column, 'text', value);
    else if (isDate) builder.add(row, column, 'date', type === 'd' ? number : number + dateOffset);
    else builder.add(row, column, 'number', number);
  }

  function startCell(attributes: Readonly<Record<string, string>>): void {
    if (attributes.r === undefined) column++;
    else {
      const address = parseAddress(attributes.r);
      if (!address) throw damaged(`sheet ${name} has a cell without a valid address`);
      ({ row, column } = address);
    }
    type = attributes.t ?? 'n';
    style = Number(attributes.s ?? 0);
    value = '';
    formula = null;
    inCell = true;
    if (type === 'inlineStr') inline.start();
  }

  await scanXml(archive, part, limits, {
    open(tag, attributes) {
      if (tag === 'c') startCell(attributes);
      else if (inCell) {
        if (tag === 'v' || tag === 'f' || tag === 'is') within = tag;
        if (tag === 'f') formula = '';
        if (within === 'is') inline.open(tag);
      } else if (tag === 'row') {
        row = attributes.r === undefined ? row + 1 : Number(attributes.r) - 1;
        if (!Number.isInteger(row) || row < 0)
          throw damaged(`sheet ${name} has a row without a valid number`);
        column = -1;
      } else if (tag === 'mergeCell') addMerge(builder, attributes.ref ?? '', limits);
    },
    text(text) {
      if (within === 'v') value += text;
      else if (within === 'f') formula = (formula ?? '') + text;
      else if (within === 'is') inline.text(text);
    },
    close(tag) {
      if (!inCell) return;
      if (within === 'is') inline.close(tag);
      if (tag === within) within = null;
      if (tag !== 'c') return;
      inCell = false;
      finishCell();
    }
  });
  return builder.finish(name, hidden);
}

function addMerge(builder: SheetBuilder, reference: string, limits: ReadingLimits): void {
  if (builder.merges.length >= limits.merges) {
    throw outOfProportion(`One sheet of this workbook has more than ${limits.merges} merged blocks.`);
  }
  const [first = '', last = ''] = reference.split(':');
  const from = parseAddress(first);
  const to = parseAddress(last);
  if (!from || !to) return;
  builder.mergedColumns += to.column - from.column + 1;
  if (builder.mergedColumns > limits.mergedColumns) {
    throw outOfProportion('The merged blocks of this workbook cover more columns than a table has.');
  }
  builder.merges.push({ top: from.row, left: from.column, bottom: to.row, right: to.column });
}
