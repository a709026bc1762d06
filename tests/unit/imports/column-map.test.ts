import { describe, expect, it } from 'vitest';
import { columnMap } from '../../../src/lib/schemas/column-map';
import type { ColumnMap, MapColumn, TableMap } from '../../../src/lib/schemas/column-map';
import { applySavedMap, recogniseColumnMap } from '../../../src/lib/server/imports/column-map';
import { mapRecords } from '../../../src/lib/server/imports/map-records';
import { readByColumnMap } from '../../../src/lib/server/imports/read-by-column-map';
import type { Expectation, MappedImport, Workbook } from '../../../src/lib/server/imports/types';
import { experimentExpectation, expectation, replicateExpectation } from '../../factories/expectation';
import { asRead, rows } from '../../fixtures/workbooks/as-read';

const offered = (over: Partial<Expectation> = {}): Expectation =>
  expectation({
    experiments: [
      experimentExpectation({
        replicates: ['S1', 'S2'].map((label) => replicateExpectation(label, { finalVolumeMl: 1 }))
      })
    ],
    experimentId: 'experiment 1',
    ...over
  });

const book = (text: string, name = 'A'): Workbook => asRead({ [name]: rows(text) });
const recognise = (text: string): ColumnMap => recogniseColumnMap(book(text), offered());

/** The map with the columns of one header changed. */
function changed(map: ColumnMap, header: string, over: Partial<MapColumn>): ColumnMap {
  return {
    ...map,
    tables: map.tables.map((table) => ({
      ...table,
      columns: table.columns.map((column) => (column.header === header ? { ...column, ...over } : column))
    }))
  };
}

const values = ({ records }: MappedImport): readonly unknown[] =>
  records.map(({ cell, reported }) => [cell, reported.value]);
const codes = ({ problems }: MappedImport): readonly string[] =>
  problems.map(({ severity, code, cell }) => `${severity} ${code} ${cell}`);

const long = 'Sample|Fraction|Analyte|Area|Height\nS1|Elution 1|Caffeine|12|3';
const wide = 'Sample|Fraction|Caffeine (ng)|α-Testol (ng)\nS1|Elution 1|1|2';

describe('a column map', () => {
  it('is plain data that its schema takes, and reads the same after a way through JSON', () => {
    for (const text of [long, wide, 'Sample|S1\nFraction|Elution 1\nCaffeine|1']) {
      const map = recognise(text);
      const back = columnMap.parse(JSON.parse(JSON.stringify(map)));
      expect(back).toEqual(map);
      expect(readByColumnMap(book(text), back, offered())).toEqual(mapRecords(book(text), offered()));
    }
  });

  it('says what each column means, and reading by it gives what reading by itself does', () => {
    const map = recognise(long);
    expect(map.tables).toMatchObject([
      {
        sheets: ['A'],
        orientation: 'long',
        headerLines: [0],
        carried: [],
        blocks: null,
        columns: [
          { header: 'Sample', means: 'sample' },
          { header: 'Fraction', means: 'fraction' },
          { header: 'Analyte', means: 'analyte' },
          { header: 'Area', means: 'area' },
          { header: 'Height', means: 'ignored' }
        ]
      }
    ]);
    expect(values(readByColumnMap(book(long), map, offered()))).toEqual([['D2', 12]]);
  });

  it('can be changed in every reading: another column, another basis, another analyte, another header', () => {
    const height = changed(changed(recognise(long), 'Area', { means: 'ignored' }), 'Height', {
      means: 'amount',
      basis: 'ng',
      unit: 'µg'
    });
    expect(values(readByColumnMap(book(long), height, offered()))).toEqual([['E2', 3000]]);
    const renamed = changed(recognise('Sample|Fraction|Peak 7\nS1|Elution 1|5'), 'Peak 7', {
      means: 'area',
      analyte: 'Caffeine'
    });
    expect(renamed.tables).toEqual([]);
    const table: TableMap = {
      sheets: ['A'],
      orientation: 'analytes across',
      headerLines: [0],
      columns: [
        { column: 0, header: 'x', means: 'sample', analyte: null, basis: null, unit: null },
        { column: 1, header: 'y', means: 'area', analyte: 'Caffeine', basis: null, unit: null }
      ],
      carried: [],
      blocks: null,
      leftOut: [3],
      fingerprint: 'by hand'
    };
    const byHand: ColumnMap = {
      ...recognise(long),
      tables: [table],
      fixed: { experiment: 'Extraction at pH 7', fraction: 'Aqueous layer' }
    };
    const read = readByColumnMap(book('x|y\nS1|5\nS2|6\nMean|5.5'), byHand, offered());
    expect(read.records.map(({ place, reported }) => [place, reported.value])).toEqual([
      [
        {
          kind: 'extract',
          experimentId: 'experiment 1',
          replicateId: 'replicate S1',
          fractionId: 'fraction Aqueous layer'
        },
        5
      ],
      [expect.objectContaining({ replicateId: 'replicate S2' }), 6]
    ]);
    expect(codes(read)).toEqual(['note column not used A4']);
  });

  it('that lacks what a table needs says so, and reads nothing', () => {
    const without = changed(recognise(long), 'Sample', { means: 'ignored' });
    const read = readByColumnMap(book(long), without, offered());
    expect(codes(read)).toEqual(['error missing part of the map A1']);
    expect(read.problems[0]?.message).toContain('the sample');
    expect(read.records).toEqual([]);
  });

  it('of an analyte that the panel has no longer is an error at its column', () => {
    const gone = changed(recognise(wide), 'Caffeine (ng)', { analyte: 'Nixol' });
    const read = readByColumnMap(book(wide), gone, offered());
    expect(codes(read)).toEqual(['error unknown analyte C1', 'note column not used C1']);
    expect(values(read)).toEqual([['D2', 2]]);
  });

  it('of a sheet read turned counts rows as columns', () => {
    const down = 'Sample|S1|S2\nFraction|Elution 1|Elution 1\nCaffeine (ng)|1|2\nα-Testol (ng)|3|4';
    const map = recognise(down);
    expect(map.tables[0]).toMatchObject({ orientation: 'analytes down', headerLines: [0], leftOut: [] });
    const without = { ...map, tables: map.tables.map((table) => ({ ...table, leftOut: [2] })) };
    expect(values(readByColumnMap(book(down), without, offered()))).toEqual([
      ['B3', 1],
      ['B4', 3]
    ]);
  });
});

describe('a saved map', () => {
  const saved = {
    ...changed(recognise(long), 'Height', { means: 'signal to noise' }),
    isPatternConfirmed: true
  };

  it('is known again by its headers, wherever the table stands and however many rows it has', () => {
    const next = book(`Week 10\n\n${long}\nS2|Elution 1|Caffeine|13|4`, 'Other name');
    const applied = applySavedMap(saved, next, recogniseColumnMap(next, offered()));
    expect(applied?.tables[0]).toMatchObject({ sheets: ['Other name'], headerLines: [2] });
    const read = mapRecords(next, offered(), { given: null, saved: [saved] });
    expect(read.records.map(({ qualifiers }) => qualifiers?.signalToNoise)).toEqual([3, 4]);
    expect(read.map).toEqual(applied);
  });

  it('is not put on another layout', () => {
    for (const other of [wide, long.replace('Height', 'Width')]) {
      expect(applySavedMap(saved, book(other), recognise(other))).toBeNull();
    }
    expect(mapRecords(book(wide), offered(), { given: null, saved: [saved] }).map).toEqual(recognise(wide));
  });

  it('of analytes across holds for another number of them', () => {
    const one = recognise('Sample|Fraction|Caffeine (ng)\nS1|Elution 1|1');
    expect(one.tables[0]?.fingerprint).toBe(recognise(wide).tables[0]?.fingerprint);
    expect(applySavedMap(one, book(wide), recognise(wide))?.tables[0]?.columns).toHaveLength(4);
  });

  it('made by hand for a table that is not recognised is known again by where its headers stand', () => {
    const strange = 'Q|W|E\nS1|Caffeine|5';
    expect(recognise(strange).tables[0]?.columns.some(({ means }) => means === 'area')).not.toBe(true);
    const byHand: ColumnMap = {
      ...recognise(long),
      tables: [
        {
          sheets: ['A'],
          orientation: 'long',
          headerLines: [0],
          columns: (['sample', 'analyte', 'area'] as const).map((means, column) => ({
            column,
            header: 'QWE'[column] ?? '',
            means,
            analyte: null,
            basis: null,
            unit: null
          })),
          carried: [],
          blocks: null,
          leftOut: [],
          fingerprint: 'by hand'
        }
      ],
      fixed: { experiment: null, fraction: 'Elution 1' }
    };
    const next = book(`Title\n${strange}\nS2|Caffeine|6`, 'B');
    const read = mapRecords(next, offered(), { given: null, saved: [byHand] });
    expect(codes(read)).toEqual([]);
    expect(values(read)).toEqual([
      ['C3', 5],
      ['C4', 6]
    ]);
  });
});

describe('labels', () => {
  const text = 'Label|Caffeine (ng)\nS1_Elution 1|5\nS2_Elution 1|6\nS3_Elution 1|7\nS1_Elution 1|8';
  const patterned: ColumnMap = { ...recognise(text), isPatternConfirmed: true };

  it('are listed with what they mean, how often they come, and what was perhaps meant', () => {
    const { labels, problems } = readByColumnMap(book(text), patterned, offered());
    expect(labels).toEqual([
      {
        label: 'S1_Elution 1',
        sheet: 'A',
        cell: 'A2',
        count: 2,
        how: 'pattern',
        place: 'S1 of Extraction at pH 7, Elution 1',
        nearest: []
      },
      expect.objectContaining({ label: 'S2_Elution 1', how: 'pattern', count: 1 }),
      expect.objectContaining({ label: 'S3_Elution 1', how: 'not found', place: null })
    ]);
    expect(problems.map(({ code }) => code)).toEqual(['unknown sample', 'same injection twice']);
  });

  it('follow a run order when they are told to, one place after the other', () => {
    const run = 'Label|Caffeine (ng)\na|1\nb|2\nwash|9\nc|3\nd|4';
    const map: ColumnMap = { ...recognise(text), matching: 'run order', samplePattern: null };
    const declared = { basis: null, decimal: null, assignments: { wash: { kind: 'left out' } as const } };
    const read = readByColumnMap(book(run), map, offered({ declared }));
    expect(read.problems).toEqual([]);
    expect(read.labels.map(({ label, how, place }) => [label, how, place])).toEqual([
      ['a', 'run order', 'S1 of Extraction at pH 7, Elution 1'],
      ['b', 'run order', 'S1 of Extraction at pH 7, Aqueous layer'],
      ['wash', 'left out', null],
      ['c', 'run order', 'S2 of Extraction at pH 7, Elution 1'],
      ['d', 'run order', 'S2 of Extraction at pH 7, Aqueous layer']
    ]);
    const planned = readByColumnMap(
      book('Label|Caffeine (ng)\na|1\nb|2'),
      map,
      offered({
        runOrder: [
          { kind: 'level', levelId: 'level 2' },
          {
            kind: 'replicate',
            experimentId: 'experiment 1',
            replicateId: 'replicate S2',
            fractionId: 'fraction Elution 1'
          }
        ]
      })
    );
    expect(planned.records.map(({ place }) => place.kind)).toEqual(['level', 'extract']);
  });

  it('that are more or fewer than the places of the run get none at all', () => {
    const map: ColumnMap = { ...recognise(text), matching: 'run order', samplePattern: null };
    const read = readByColumnMap(book('Label|Caffeine (ng)\na|1\nb|2'), map, offered());
    expect(read.records).toEqual([]);
    expect(read.problems[0]).toMatchObject({
      code: 'run order differs',
      found: '2 labels',
      expected: '4 places of the run'
    });
  });

  it('that name a fraction otherwise than the row are an error', () => {
    const both = 'Label|Fraction|Caffeine (ng)\nS1_Elution 1|Aqueous layer|5';
    const map: ColumnMap = {
      ...recognise(both),
      samplePattern: '{sample}_{fraction}',
      isPatternConfirmed: true
    };
    expect(codes(readByColumnMap(book(both), map, offered()))).toEqual(['error title contradicts B2']);
  });
});

describe('what was found in the value cells', () => {
  it('is listed text by text with its meaning, numbers together', () => {
    const text =
      'Sample|Fraction|Analyte|Amount (ng)|Injection\n' +
      ['1', '2.5', 'ND', '<0.5', '-', '', "1'000", 'ND', 'lost', '>9']
        .map((cell, index) => `S1|Elution 1|Caffeine|${cell}|${index + 1}`)
        .join('\n');
    const { valueMeanings } = mapRecords(book(text), offered());
    expect(
      valueMeanings.map(({ text: found, meaning, count, cell }) => [found, meaning, count, cell])
    ).toEqual([
      ['1', 'number', 2, 'D2'],
      ['ND', 'not detected', 2, 'D4'],
      ['<0.5', 'below a limit', 1, 'D5'],
      ['-', 'missing', 1, 'D6'],
      ['', 'missing', 1, 'D7'],
      ["1'000", 'number written as text', 1, 'D8'],
      ['lost', 'not usable', 1, 'D10'],
      ['>9', 'above the range', 1, 'D11']
    ]);
  });

  it('counts the many texts of one meaning together', () => {
    const cells = Array.from(
      { length: 60 },
      (_, index) => `S1|Elution 1|Caffeine|<0.${index + 10}|${index + 1}`
    );
    const { valueMeanings } = mapRecords(
      book(`Sample|Fraction|Analyte|Amount (ng)|Injection\n${cells.join('\n')}`),
      offered()
    );
    expect(valueMeanings).toHaveLength(41);
    expect(valueMeanings.at(-1)).toMatchObject({ meaning: 'below a limit', count: 20, texts: 20 });
  });
});
