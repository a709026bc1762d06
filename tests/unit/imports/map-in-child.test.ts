import { expect, it } from 'vitest';
import { recogniseColumnMap } from '../../../src/lib/server/imports/column-map';
import { mapRecords } from '../../../src/lib/server/imports/map-records';
import { mapInChild } from '../../../src/lib/server/imports/read-in-child';
import { readWorkbook } from '../../../src/lib/server/imports/read-workbook';
import { offered } from '../../fixtures/workbooks/odd-files/odd-file';

const bytes = Buffer.from(
  'Sample;Fraction;Analyte;Area;Height\nS1;Elution 1;Caffeine;12;3\nS2;Elution 1;Caffeine;ND;4\n'
);

it('reads in the child by the map it is given, and says what it read by', async () => {
  const workbook = await readWorkbook(bytes);
  const recognised = recogniseColumnMap(workbook, offered);
  const given = {
    ...recognised,
    tables: recognised.tables.map((table) => ({
      ...table,
      columns: table.columns.map((column) =>
        column.header === 'Height' ? { ...column, means: 'signal to noise' as const } : column
      )
    }))
  };
  const maps = { given, saved: [], mends: [] };
  const { mapped } = await mapInChild(bytes, offered, { maps });
  expect(mapped).toEqual(mapRecords(workbook, offered, maps));
  expect(mapped.map).toEqual(given);
  expect(mapped.records.map(({ qualifiers }) => qualifiers?.signalToNoise)).toEqual([3, 4]);
  expect(mapped.valueMeanings.map(({ meaning }) => meaning)).toEqual([
    'number written as text',
    'not detected'
  ]);
  expect(mapped.labels.map(({ label, how }) => [label, how])).toEqual([
    ['S1', 'name'],
    ['S2', 'name']
  ]);
}, 60_000);
