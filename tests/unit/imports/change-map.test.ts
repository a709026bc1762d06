import { describe, expect, it } from 'vitest';
import type { ColumnMap } from '../../../src/lib/schemas/column-map';
import { changedMap, type MapChange, type MapColumnChange } from '../../../src/lib/server/imports/change-map';
import { recogniseColumnMap } from '../../../src/lib/server/imports/column-map';
import { readingLimits } from '../../../src/lib/server/imports/limits';
import { readByColumnMap } from '../../../src/lib/server/imports/read-by-column-map';
import { readWorkbook } from '../../../src/lib/server/imports/read-workbook';
import type { Workbook } from '../../../src/lib/server/imports/types';
import { expectation as makeExpectation } from '../../factories/expectation';

/* What a person changes about a reading, step by step, until a sheet that was not understood gives its records. */

const unknown = 'Vessel,Peak 1,Remark\nS1,95,a\nS2,96,b\n';
const read = (text: string): Promise<Workbook> => readWorkbook(Buffer.from(text, 'utf8'), readingLimits);
const nothing = { analyte: null, basis: null, unit: null } as const;

async function steps(text: string, ...changes: readonly ((sheet: string) => MapChange)[]) {
  const workbook = await read(text);
  const expectation = makeExpectation();
  const sheet = workbook.sheets[0]?.name ?? '';
  const first = recogniseColumnMap(workbook, expectation);
  const map = changes.reduce<ColumnMap>(
    (now, change) => changedMap(now, change(sheet), workbook, expectation),
    first
  );
  return { map, first, expectation, workbook };
}

const isRead = (sheet: string): MapChange => ({ what: 'sheet', sheet, isRead: true });
const column =
  (change: MapColumnChange) =>
  (sheet: string): MapChange => ({ what: 'column', sheet, column: change });

describe('a sheet that was not understood', () => {
  it('is read once its columns have their meaning; columns that name analytes stand side by side', async () => {
    const [analyte] = makeExpectation().panel;
    const { map, first, workbook, expectation } = await steps(
      unknown,
      isRead,
      column({ column: 0, means: 'sample', ...nothing }),
      column({ column: 1, means: 'amount', analyte: analyte?.name ?? '', basis: 'ng', unit: 'ng' }),
      column({ column: 2, means: 'ignored', ...nothing }),
      () => ({
        what: 'labels',
        samplePattern: null,
        matching: 'names',
        fixed: { experiment: null, fraction: 'Elution 1' }
      })
    );
    expect(first.tables).toEqual([]);
    expect(map.tables[0]).toMatchObject({ orientation: 'analytes across', headerLines: [0] });
    const { records } = readByColumnMap(workbook, map, expectation);
    expect(records.map(({ cell, reported }) => [cell, reported.kind, reported.value])).toEqual([
      ['B2', 'ng', 95],
      ['B3', 'ng', 96]
    ]);
  });

  it('becomes a row for each analyte again when a column names it', async () => {
    const [analyte] = makeExpectation().panel;
    const { map } = await steps(
      unknown,
      isRead,
      column({ column: 1, means: 'area', ...nothing, analyte: analyte?.name ?? '' }),
      column({ column: 2, means: 'analyte', ...nothing })
    );
    expect(map.tables[0]?.orientation).toBe('long');
  });

  it('is left out again', async () => {
    const { map } = await steps(unknown, isRead, (sheet) => ({ what: 'sheet', sheet, isRead: false }));
    expect(map.tables).toEqual([]);
  });
});

describe('a header', () => {
  it('that is moved keeps what was chosen for columns of the same text', async () => {
    const { map } = await steps(
      `a title\n${unknown}`,
      isRead,
      (sheet) => ({ what: 'table', sheet, orientation: 'long', headerLines: [1], blocks: null, carried: [] }),
      column({ column: 1, means: 'area', ...nothing }),
      (sheet) => ({
        what: 'table',
        sheet,
        orientation: 'long',
        headerLines: [0, 1],
        blocks: null,
        carried: []
      }),
      (sheet) => ({ what: 'table', sheet, orientation: 'long', headerLines: [1], blocks: null, carried: [] })
    );
    expect(map.tables[0]?.columns.map(({ header, means }) => [header, means])).toEqual(
      expect.arrayContaining([['Peak 1', 'area']])
    );
  });
});

describe('a change', () => {
  it('of a sheet that is not there is refused, and the map it was made for stays as it is', async () => {
    const { map, workbook, expectation } = await steps(unknown, isRead);
    const before = JSON.stringify(map);
    const other = { column: 0, means: 'sample', ...nothing } as const;
    expect(() =>
      changedMap(map, { what: 'column', sheet: 'Elsewhere', column: other }, workbook, expectation)
    ).toThrow(RangeError);
    changedMap(
      map,
      { what: 'column', sheet: map.tables[0]?.sheets[0] ?? '', column: other },
      workbook,
      expectation
    );
    expect(JSON.stringify(map)).toBe(before);
  });

  it('of the labels counts as looked at', async () => {
    const { map } = await steps(unknown, isRead, () => ({
      what: 'labels',
      samplePattern: '{sample}_{injection}',
      matching: 'names',
      fixed: { experiment: null, fraction: 'Elution' }
    }));
    expect(map).toMatchObject({
      samplePattern: '{sample}_{injection}',
      isPatternConfirmed: true,
      fixed: { fraction: 'Elution' }
    });
  });
});
