import { describe, expect, it } from 'vitest';
import { readingLimits } from '../../../src/lib/server/imports/limits';
import { mapRecords } from '../../../src/lib/server/imports/map-records';
import { readCsv } from '../../../src/lib/server/imports/read-csv';
import { readWorkbook } from '../../../src/lib/server/imports/read-workbook';
import type { Expectation, MappedImport, MappedRecord, Problem } from '../../../src/lib/server/imports/types';
import {
  experimentExpectation,
  expectation,
  panelExpectation,
  replicateExpectation
} from '../../factories/expectation';
import { inMemory } from '../../fixtures/workbooks/exceljs-files';
import type { Rows } from '../../fixtures/workbooks/exceljs-files';
import { handMadeWorkbook } from '../../fixtures/workbooks/hand-made';

/** Maps a table whose cells are parted by | and whose lines are those of the text. */
function map(table: string, over: Partial<Expectation> = {}): MappedImport {
  const csv = table
    .trim()
    .split('\n')
    .map((line) =>
      line
        .split('|')
        .map((cell) => `"${cell.trim()}"`)
        .join(';')
    )
    .join('\n');
  return mapRecords(readCsv(Buffer.from(csv), readingLimits), expectation(over));
}

async function mapSheets(
  sheets: Readonly<Record<string, Rows>>,
  over: Partial<Expectation> = {}
): Promise<MappedImport> {
  return mapRecords(await readWorkbook(await inMemory(sheets)), expectation(over));
}

const codes = ({ problems }: MappedImport): readonly string[] =>
  problems.map(({ severity, code, cell }) => `${severity} ${code} ${cell}`);
const values = ({ records }: MappedImport): readonly unknown[] =>
  records.map(({ cell, reported }) => [cell, reported.value]);

function only<T>(list: readonly T[]): T {
  expect(list).toHaveLength(1);
  return list[0] as T;
}

function problem(mapped: MappedImport, code: string): Problem {
  const found = mapped.problems.filter((each) => each.code === code);
  expect(
    found.map(({ code: each }) => each),
    JSON.stringify(mapped.problems)
  ).toEqual([code]);
  return found[0] as Problem;
}

const standard = panelExpectation('Testol-d5', { role: 'injection internal standard' });
const withStandard = (point: 'vial' | 'extract' | 'sample'): Partial<Expectation> => ({
  panel: [panelExpectation('Caffeine', { internalStandard: { panelEntryId: standard.id, point } }), standard]
});

describe('the long layout', () => {
  const head = 'Sample | Fraction | Analyte | Area | Final volume (mL)';

  it('becomes one record for each row, at its cell', () => {
    const mapped = map(`${head}\nS1 | Elution 1 | Caffeine | 1204.5 | 0.5\nS2|Aqueous layer|α-Testol|33|1`);
    expect(mapped.problems).toEqual([]);
    expect(mapped.records).toEqual<readonly MappedRecord[]>([
      {
        sheet: 'Table',
        row: 1,
        column: 3,
        cell: 'D2',
        place: {
          kind: 'extract',
          experimentId: 'experiment 1',
          replicateId: 'replicate S1',
          fractionId: 'fraction Elution 1'
        },
        panelEntryId: 'entry Caffeine',
        injection: 1,
        reported: { kind: 'area', value: 1204.5, internalArea: null },
        state: 'value',
        limit: null,
        rawText: '1204.5',
        finalVolumeMl: 0.5,
        dilution: null,
        aliquotShare: null,
        acquiredAt: null,
        qualifiers: null
      },
      {
        sheet: 'Table',
        row: 2,
        column: 3,
        cell: 'D3',
        place: {
          kind: 'extract',
          experimentId: 'experiment 1',
          replicateId: 'replicate S2',
          fractionId: 'fraction Aqueous layer'
        },
        panelEntryId: 'entry α-Testol',
        injection: 1,
        reported: { kind: 'area', value: 33, internalArea: null },
        state: 'value',
        limit: null,
        rawText: '33',
        finalVolumeMl: 1,
        dilution: null,
        aliquotShare: null,
        acquiredAt: null,
        qualifiers: null
      }
    ]);
    expect(mapped.reading.sheets).toMatchObject([
      { sheet: 'Table', layout: 'long', headerRow: 0, basis: 'area', recordCount: 2 }
    ]);
  });

  it('matches names written differently, synonyms and CAS numbers', () => {
    const mapped = map(
      `sample label | FRACTION | Compound | Peak-Area | Final Volume, mL
       s-1 | elution-1 | CAFFEINE | 1 | 1
       S1 | Elution_1 | alpha testol | 2 | 1
       S 2 | ELUTION 1 | 58–08–2 | 3 | 1
       S2 | aqueous  layer | 1,3,7-Trimethylxanthine | 4 | 1`
    );
    expect(mapped.problems).toEqual([]);
    expect(mapped.records.map(({ panelEntryId }) => panelEntryId)).toEqual([
      'entry Caffeine',
      'entry α-Testol',
      'entry Caffeine',
      'entry Caffeine'
    ]);
  });

  it('takes the analyte from a CAS column where there is no name', () => {
    const mapped = map(`Sample | Fraction | CAS number | Area | Final volume (mL)\nS1|Elution 1|58-08-2|7|1`);
    expect(mapped.problems).toEqual([]);
    expect(only(mapped.records).panelEntryId).toBe('entry Caffeine');
  });

  it('reads titles above the header and further columns, and says what it leaves out', () => {
    const mapped = map(
      `Areas of the week\n\nSample | Fraction | Analyte | Area | Final volume (mL) | Peak height\nS1|Elution 1|Caffeine|7|1|5.5`
    );
    expect(values(mapped)).toEqual([['D4', 7]]);
    expect(codes(mapped)).toEqual(['note column not used F3']);
  });

  it('converts the units in the headers', () => {
    const mapped = map(
      `Sample | Fraction | Analyte | Concentration in the vial (µg/mL) | Final volume (µL) | Aliquot share (%) | Dilution
       S1 | Elution 1 | Caffeine | 0,3 | 300 | 25 | 10`
    );
    expect(mapped.problems).toEqual([]);
    expect(only(mapped.records)).toMatchObject({
      reported: { kind: 'vial', value: 300 },
      finalVolumeMl: 0.3,
      aliquotShare: 0.25,
      dilution: 10
    });
  });

  it.each<[string, string, number]>([
    ['Amount (ng)', 'ng', 12],
    ['Amount (µg)', 'ng', 12_000],
    ['ng/L', 'ng_per_l', 12],
    ['Concentration in the sample (µg/L)', 'ng_per_l', 12_000],
    ['Concentration in vial [ng/mL]', 'vial', 12],
    ['ng/mL in the vial', 'vial', 12]
  ])('takes the basis from the header %s', (header, kind, value) => {
    const mapped = map(
      `Sample | Fraction | Analyte | ${header} | Final volume (mL)\nS1|Elution 1|Caffeine|12|1`
    );
    expect(mapped.problems).toEqual([]);
    expect(only(mapped.records).reported).toEqual({ kind, value, internalArea: null });
  });

  it.each(['Result', 'Concentration (µg/L)', 'Concentration (ng/mL)', 'Amount'])(
    'asks what the numbers under %s are',
    (header) => {
      const table = `Sample | Fraction | Analyte | ${header} | Final volume (mL)\nS1|Elution 1|Caffeine|12|1`;
      const mapped = map(table);
      expect(problem(mapped, 'basis unknown')).toMatchObject({
        severity: 'question',
        answer: 'declare basis',
        cell: 'D1'
      });
      expect(mapped.records).toEqual([]);
      const declared = map(table, { declared: { basis: 'vial', decimal: null } });
      expect(declared.problems).toEqual([]);
      expect(only(declared.records).reported).toMatchObject({ kind: 'vial', value: 12 });
    }
  );

  it('does not read areas as what they are not, whatever is declared', () => {
    const mapped = map(`${head}\nS1|Elution 1|Caffeine|12|1`, { declared: { basis: 'ng', decimal: null } });
    expect(problem(mapped, 'basis contradicts').severity).toBe('error');
    expect(mapped.records).toEqual([]);
  });

  it('asks which of two results is meant, and leaves the other out when told', () => {
    const table = `Sample | Fraction | Analyte | Area | ng/L | Final volume (mL)\nS1|Elution 1|Caffeine|12|3|1`;
    expect(problem(map(table), 'basis unknown').answer).toBe('declare basis');
    const declared = map(table, { declared: { basis: 'ng_per_l', decimal: null } });
    expect(values(declared)).toEqual([['E2', 3]]);
    expect(codes(declared)).toEqual(['note column not used D1']);
  });

  it('places calibration levels and their injections', () => {
    const mapped = map(
      `Sample | Analyte | Area | Injection
       Level 1 | Caffeine | 10 | 1
       level 1 | Caffeine | 11 | 2
       Level 2 | Caffeine | 20 |`
    );
    expect(mapped.problems).toEqual([]);
    expect(mapped.records.map(({ place, injection }) => [place, injection])).toEqual([
      [{ kind: 'level', calibrationSetId: 'calibration 1', levelId: 'level 1' }, 1],
      [{ kind: 'level', calibrationSetId: 'calibration 1', levelId: 'level 1' }, 2],
      [{ kind: 'level', calibrationSetId: 'calibration 1', levelId: 'level 2' }, 1]
    ]);
  });

  it('keeps what each cell says apart: values, limits, missing', () => {
    const mapped = map(
      `${head}
       S1|Elution 1|Caffeine|ND|1
       S1|Elution 1|α-Testol|<0,5|1
       S1|Aqueous layer|Caffeine|>500|1
       S1|Aqueous layer|α-Testol||1
       S2|Elution 1|Caffeine|n/a|1
       S2|Elution 1|α-Testol|1 204,5|1`
    );
    expect(mapped.problems).toEqual([]);
    expect(mapped.records.map(({ state, limit, reported }) => [state, limit, reported.value])).toEqual([
      ['not detected', null, null],
      ['below', 0.5, null],
      ['above', 500, null],
      ['missing', null, null],
      ['missing', null, null],
      ['value', null, 1204.5]
    ]);
  });

  it('keeps the time of acquisition from a date cell', async () => {
    const mapped = await mapSheets({
      A: [
        ['Sample', 'Fraction', 'Analyte', 'Area', 'Final volume (mL)', 'Acquired at'],
        ['S1', 'Elution 1', 'Caffeine', 7, 1, new Date(Date.UTC(2026, 2, 4, 16, 20))]
      ]
    });
    expect(mapped.problems).toEqual([]);
    expect(only(mapped.records).acquiredAt).toBe('2026-03-04T16:20:00');
  });

  it('lets a merged sample cell stand for all its rows, but not a merged area', async () => {
    const mapped = mapRecords(
      await readWorkbook(
        handMadeWorkbook({
          sheets: [
            {
              name: 'A',
              data: `<row r="1">${['Sample', 'Fraction', 'Analyte', 'Area', 'Final volume (mL)'].map((t) => `<c t="str"><v>${t}</v></c>`).join('')}</row>
                <row r="2"><c t="str"><v>S1</v></c><c t="str"><v>Elution 1</v></c><c t="str"><v>Caffeine</v></c><c><v>5</v></c><c><v>1</v></c></row>
                <row r="3"><c r="C3" t="str"><v>α-Testol</v></c></row>`,
              after:
                '<mergeCells><mergeCell ref="A2:A3"/><mergeCell ref="B2:B3"/><mergeCell ref="D2:D3"/></mergeCells>'
            }
          ]
        })
      ),
      expectation()
    );
    expect(mapped.problems).toEqual([]);
    expect(mapped.records.map(({ cell, state, reported }) => [cell, state, reported.value])).toEqual([
      ['D2', 'value', 5],
      ['D3', 'missing', null]
    ]);
  });
});

describe('the wide layout', () => {
  it('becomes one record for each row and analyte column', () => {
    const mapped = map(
      `Sample | Fraction | Final volume (mL) | Caffeine area | Testol alpha
       S1 | Elution 1 | 0.5 | 12 | 3`
    );
    expect(codes(mapped)).toEqual(['error unknown analyte E1']);
    const right = map(
      `Sample | Fraction | Final volume (mL) | Caffeine area | α-Testol\nS1|Elution 1|0.5|12|ND\nS1|Aqueous layer|1|13|`
    );
    expect(right.problems).toEqual([]);
    expect(right.records.map(({ cell, panelEntryId, state }) => [cell, panelEntryId, state])).toEqual([
      ['D2', 'entry Caffeine', 'value'],
      ['E2', 'entry α-Testol', 'not detected'],
      ['D3', 'entry Caffeine', 'value'],
      ['E3', 'entry α-Testol', 'missing']
    ]);
    expect(right.reading.sheets[0]).toMatchObject({ layout: 'wide', basis: 'area' });
  });

  it.each<[string, string]>([
    [
      'a column of its own beside',
      'Sample | Fraction | Final volume (mL) | Caffeine area | IS area\nS1|Elution 1|1|12|100'
    ],
    [
      'a column with the analyte in its header',
      'Sample | Fraction | Final volume (mL) | Caffeine IS area | Caffeine area\nS1|Elution 1|1|100|12'
    ],
    [
      'the standard as an analyte',
      'Sample | Fraction | Final volume (mL) | Caffeine area | Testol-d5 area\nS1|Elution 1|1|12|100'
    ],
    [
      'two header lines',
      ' | | | Caffeine |\nSample | Fraction | Final volume (mL) | Area | IS area\nS1|Elution 1|1|12|100'
    ]
  ])('finds the area of the internal standard in %s', (_, table) => {
    const mapped = map(table, withStandard('vial'));
    expect(mapped.problems).toEqual([]);
    expect(mapped.records.find(({ panelEntryId }) => panelEntryId === 'entry Caffeine')?.reported).toEqual({
      kind: 'area',
      value: 12,
      internalArea: 100
    });
  });

  it('reads analyte names merged over their columns', async () => {
    const texts = (row: number, cells: readonly (string | number)[]): string =>
      `<row r="${row}">${cells
        .map((cell, index) => {
          const address = `${String.fromCharCode(65 + index)}${row}`;
          if (cell === '') return '';
          return typeof cell === 'number'
            ? `<c r="${address}"><v>${cell}</v></c>`
            : `<c r="${address}" t="str"><v>${cell}</v></c>`;
        })
        .join('')}</row>`;
    const mapped = mapRecords(
      await readWorkbook(
        handMadeWorkbook({
          sheets: [
            {
              name: 'A',
              data:
                texts(1, ['Sample', 'Fraction', 'Final volume (mL)', 'Caffeine', '', 'α-Testol', '']) +
                texts(2, ['', '', '', 'Area', 'IS area', 'Area', 'IS area']) +
                texts(3, ['S1', 'Elution 1', 1, 12, 100, 3, 200]),
              after:
                '<mergeCells><mergeCell ref="A1:A2"/><mergeCell ref="B1:B2"/><mergeCell ref="C1:C2"/><mergeCell ref="D1:E1"/><mergeCell ref="F1:G1"/></mergeCells>'
            }
          ]
        })
      ),
      expectation()
    );
    expect(mapped.problems).toEqual([]);
    expect(
      mapped.records.map(({ cell, panelEntryId, reported }) => [
        cell,
        panelEntryId,
        reported.value,
        reported.internalArea
      ])
    ).toEqual([
      ['D3', 'entry Caffeine', 12, 100],
      ['F3', 'entry α-Testol', 3, 200]
    ]);
    expect(mapped.reading.sheets[0]?.headerRow).toBe(1);
  });

  it('takes what the numbers are from a title, else asks', async () => {
    const rows = [
      ['Sample', 'Fraction', 'Final volume (mL)', 'Caffeine'],
      ['S1', 'Elution 1', 1, 12]
    ];
    expect((await mapSheets({ 'Peak areas': rows })).records).toMatchObject([{ reported: { kind: 'area' } }]);
    expect((await mapSheets({ Data: [['Amount (µg)'], ...rows] })).records).toMatchObject([
      { reported: { kind: 'ng', value: 12_000 } }
    ]);
    expect(codes(await mapSheets({ Data: rows }))).toEqual(['question basis unknown D1']);
  });

  it('does without a fraction where there is one only', () => {
    const one = experimentExpectation({ fractions: [{ id: 'fraction E', name: 'Extract' }] });
    const mapped = map(`Sample | Final volume (mL) | Caffeine area\nS1|1|12`, { experiments: [one] });
    expect(mapped.problems).toEqual([]);
    expect(only(mapped.records).place).toMatchObject({ fractionId: 'fraction E' });
  });

  it('does without a fraction for standards', () => {
    const experiment = experimentExpectation({
      replicates: [replicateExpectation('STD', { kind: 'solvent standard', takesFraction: false })]
    });
    const table = (fraction: string): string =>
      `Sample | Fraction | Final volume (mL) | Caffeine area\nSTD|${fraction}|1|12`;
    const mapped = map(table(''), { experiments: [experiment] });
    expect(mapped.problems).toEqual([]);
    expect(only(mapped.records).place).toMatchObject({ fractionId: null });
    expect(codes(map(table('Elution 1'), { experiments: [experiment] }))).toEqual([
      'error fraction not expected B2'
    ]);
  });
});

describe('decimal marks in texts', () => {
  const table = (...areas: string[]): string =>
    `Sample | Fraction | Analyte | Area | Final volume (mL) | Injection\n${areas
      .map((area, index) => `S1|Elution 1|Caffeine|${area}|1|${index + 1}`)
      .join('\n')}`;

  it('are decided by the other cells of the column', () => {
    expect(values(map(table('1,234', '12,5')))).toEqual([
      ['D2', 1.234],
      ['D3', 12.5]
    ]);
    expect(values(map(table('1,234', '1,234,567')))).toEqual([
      ['D2', 1234],
      ['D3', 1234567]
    ]);
  });

  it('are decided by the rest of the file where the column is silent', () => {
    const mapped = map('Sample|Fraction|Analyte|Area|Final volume (mL)\nS1|Elution 1|Caffeine|1,234|0,5');
    expect(mapped.problems).toEqual([]);
    expect(values(mapped)).toEqual([['D2', 1.234]]);
  });

  it('are asked for where nothing decides, once for the column, and nothing is guessed', () => {
    const mapped = map(table('1,234', '5,678', '7'));
    const question = problem(mapped, 'ambiguous separator');
    expect(question).toMatchObject({
      severity: 'question',
      answer: 'declare decimal',
      cell: 'D2',
      found: '“1,234”'
    });
    expect(question.message).toContain('1234');
    expect(question.message).toContain('1.234');
    expect(question.message).toContain('1 more cell');
    expect(values(mapped)).toEqual([['D4', 7]]);
    expect(values(map(table('1,234', '5,678'), { declared: { basis: null, decimal: 'comma' } }))).toEqual([
      ['D2', 1.234],
      ['D3', 5.678]
    ]);
    expect(values(map(table('1,234', '5,678'), { declared: { basis: null, decimal: 'point' } }))).toEqual([
      ['D2', 1234],
      ['D3', 5678]
    ]);
  });

  it('that differ within a column are asked about', () => {
    const mapped = map(table('1.5', '2,5'));
    expect(problem(mapped, 'mixed separators')).toMatchObject({
      severity: 'question',
      answer: 'confirm',
      cell: 'D1'
    });
    expect(values(mapped)).toEqual([
      ['D2', 1.5],
      ['D3', 2.5]
    ]);
    expect(codes(map(table('1.5', '2,5', '1,234')))).toContain('question ambiguous separator D4');
  });

  it('that contradict what was declared are errors', () => {
    const mapped = map(table('1.5'), { declared: { basis: null, decimal: 'comma' } });
    expect(problem(mapped, 'not a number')).toMatchObject({ severity: 'error', cell: 'D2' });
  });
});

describe('errors name sheet, cell, what was found and what was expected', () => {
  const row = (cells: string): string =>
    `Sample | Fraction | Analyte | Area | Final volume (mL) | Dilution | Aliquot share | Injection\n${cells}`;

  it.each<[string, string, string, string, RegExp]>([
    ['a letter in an area', 'S1|Elution 1|Caffeine|48,2l3|1|||', 'looks like a number', 'D2', /48,213/],
    ['a word in an area', 'S1|Elution 1|Caffeine|lost|1|||', 'not a number', 'D2', /peak area/],
    ['a unit in an area', 'S1|Elution 1|Caffeine|48 counts|1|||', 'looks like a number', 'D2', /unit/],
    ['a failed formula', 'S1|Elution 1|Caffeine|#DIV/0!|1|||', 'error cell', 'D2', /formula failed/],
    ['an unknown analyte', 'S1|Elution 1|Cafeine|7|1|||', 'unknown analyte', 'C2', /Is Caffeine meant\?/],
    ['an unknown sample', 'S9|Elution 1|Caffeine|7|1|||', 'unknown sample', 'A2', /“S9”/],
    ['an unknown fraction', 'S1|Elution 7|Caffeine|7|1|||', 'unknown fraction', 'B2', /no fraction called/],
    ['no sample', '|Elution 1|Caffeine|7|1|||', 'missing sample', 'A2', /no sample/],
    ['no fraction', 'S1||Caffeine|7|1|||', 'missing fraction', 'B2', /several fractions/],
    ['no analyte', 'S1|Elution 1||7|1|||', 'missing analyte', 'C2', /no analyte/],
    ['a negative area', 'S1|Elution 1|Caffeine|-7|1|||', 'negative', 'D2', /below zero/],
    [
      'no final volume',
      'S1|Elution 1|Caffeine|7||||',
      'final volume missing',
      'E2',
      /final volume of S1, Elution 1/
    ],
    ['a final volume of zero', 'S1|Elution 1|Caffeine|7|0|||', 'not positive', 'E2', /above zero/],
    ['a dilution below one', 'S1|Elution 1|Caffeine|7|1|0.5||', 'dilution below one', 'F2', /1 or more/],
    ['a share above one', 'S1|Elution 1|Caffeine|7|1||1.5|', 'share outside range', 'G2', /up to 1/],
    ['a share of zero', 'S1|Elution 1|Caffeine|7|1||0|', 'share outside range', 'G2', /above 0/],
    [
      'an injection that is no number of one',
      'S1|Elution 1|Caffeine|7|1|||1.5',
      'injection number',
      'H2',
      /no injection number/
    ]
  ])('%s', (_, cells, code, cell, words) => {
    const found = map(row(cells)).problems.find((each) => each.code === code);
    expect(found).toMatchObject({ severity: 'error', sheet: 'Table', cell, answer: null });
    expect(found?.message).toMatch(words);
    expect(found?.message).toMatch(new RegExp(`^Table, ${cell}: .*[.?]$`));
    expect(found?.fix).toMatch(/^[A-Z].*\.$/);
    expect(found?.found).not.toBe('');
    expect(found?.expected).not.toBe('');
  });

  it('all of them at once, and the good cells are still read', () => {
    const mapped = map(
      row(`S1|Elution 1|Caffeine|4l|1|||
           S9|Elution 1|Caffeine|7|1|||
           S1|Nowhere|Caffeine|7|1|||
           S1|Elution 1|Unobtainol|x|1|||
           S2|Elution 1|Caffeine|9|1|||`)
    );
    expect(codes(mapped)).toEqual([
      'error looks like a number D2',
      'error unknown sample A3',
      'error unknown fraction B4',
      'error unknown analyte C5',
      'error not a number D5'
    ]);
    expect(values(mapped)).toEqual([['D6', 9]]);
  });

  it('of one unknown name once, with how often it comes', () => {
    const mapped = map(row(['1', '2', '3'].map((n) => `S9|Elution 1|Caffeine|7|1|||${n}`).join('\n')));
    expect(problem(mapped, 'unknown sample').message).toContain('2 more cells');
  });

  it('of a fault made thousands of times no more than a thousand, and how many there are', () => {
    const mapped = map(
      row(Array.from({ length: 1500 }, (_, index) => `S1|Elution 1|Caffeine|x|1|||${index + 1}`).join('\n'))
    );
    expect(mapped.problems).toHaveLength(1001);
    expect(mapped.problems.at(-1)).toMatchObject({
      severity: 'error',
      code: 'not a number',
      cell: null,
      found: '500 more'
    });
    expect(mapped.problems.at(-1)?.message).toMatch(/^500 more problems/);
  });

  it('the same injection twice, and where it stood first', () => {
    const mapped = map(row('S1|Elution 1|Caffeine|7|1|||\nS1|Elution 1|caffeine|8|1|||1'));
    expect(problem(mapped, 'same injection twice')).toMatchObject({ severity: 'error', cell: 'D3' });
    expect(problem(mapped, 'same injection twice').message).toContain('D2');
    expect(values(mapped)).toEqual([['D2', 7]]);
  });

  it('a final volume that is not the same in all rows of an extract', () => {
    const mapped = map(row('S1|Elution 1|Caffeine|7|1|||\nS1|Elution 1|α-Testol|8|2|||'));
    expect(problem(mapped, 'differs within extract').message).toMatch(
      /final volume of S1, Elution 1 is 2 .* 1 in row 2/
    );
  });

  it('not of a final volume given once for the extract, or on record, or not needed', () => {
    const once = map(row('S1|Elution 1|Caffeine|7|1|||\nS1|Elution 1|α-Testol|8||||'));
    expect(once.problems).toEqual([]);
    expect(once.records.map(({ finalVolumeMl }) => finalVolumeMl)).toEqual([1, 1]);
    const known = experimentExpectation({ replicates: [replicateExpectation('S1', { finalVolumeMl: 0.5 })] });
    expect(map(row('S1|Elution 1|Caffeine|7||||'), { experiments: [known] }).problems).toEqual([]);
    const table = 'Sample | Fraction | Analyte | Area | IS area\nS1|Elution 1|Caffeine|7|100';
    expect(map(table, withStandard('extract')).problems).toEqual([]);
    expect(map(table, withStandard('sample')).problems).toEqual([]);
    expect(codes(map(table, withStandard('vial')))).toEqual(['error final volume missing D2']);
    expect(map('Sample | Fraction | Analyte | ng\nS1|Elution 1|Caffeine|7').problems).toEqual([]);
  });

  it('a missing or useless area of the internal standard', () => {
    const table = (area: string): string =>
      `Sample | Fraction | Analyte | Area | IS area | Final volume (mL)\nS1|Elution 1|Caffeine|7|${area}|1`;
    expect(problem(map(table(''), withStandard('vial')), 'internal standard area missing')).toMatchObject({
      cell: 'E2'
    });
    expect(codes(map(table('0'), withStandard('vial')))).toContain('error not positive E2');
    const none = map(
      'Sample | Fraction | Analyte | Area | Final volume (mL)\nS1|Elution 1|Caffeine|7|1',
      withStandard('vial')
    );
    expect(problem(none, 'internal standard area missing').message).toContain('Testol-d5');
  });

  it('an unusable cell once, and not as a missing one as well', () => {
    const table =
      'Sample | Fraction | Analyte | Area | IS area | Final volume (mL)\nS1|Elution 1|Caffeine|7|1OO|x';
    expect(codes(map(table, withStandard('vial')))).toEqual([
      'error not a number F2',
      'error looks like a number E2'
    ]);
  });

  it('no zero in the column of the standard for an analyte that has none', () => {
    const mapped = map(
      'Sample | Fraction | Analyte | Area | IS area | Final volume (mL)\nS1|Elution 1|Caffeine|7|0|1'
    );
    expect(mapped.problems).toEqual([]);
    expect(only(mapped.records).reported.internalArea).toBeNull();
  });

  it('two different areas of one internal standard', () => {
    const mapped = map(
      'Sample | Fraction | Analyte | Area | IS area | Final volume (mL)\nS1|Elution 1|Caffeine|7|100|1\nS1|Elution 1|Testol-d5|101||1',
      withStandard('vial')
    );
    expect(problem(mapped, 'internal standard area twice')).toMatchObject({
      severity: 'error',
      cell: 'E2',
      found: '100',
      expected: '101'
    });
  });

  it('a formula without a stored result', async () => {
    const mapped = await mapSheets({
      A: [
        ['Sample', 'Fraction', 'Analyte', 'Area', 'Final volume (mL)'],
        ['S1', 'Elution 1', 'Caffeine', { formula: '1+1' } as never, 1]
      ]
    });
    expect(problem(mapped, 'formula without result')).toMatchObject({ cell: 'D2' });
  });

  it('a label that two experiments have, and none where one of them was chosen', () => {
    const experiments = [
      experimentExpectation(),
      experimentExpectation({ id: 'experiment 2', title: 'Drying' })
    ];
    const table = 'Sample | Fraction | Analyte | Area | Final volume (mL)\nS1|Elution 1|Caffeine|7|1';
    expect(problem(map(table, { experiments }), 'ambiguous sample').message).toMatch(
      /Extraction at pH 7, or S1 of Drying/
    );
    expect(map(table, { experiments, experimentId: 'experiment 2' }).records).toMatchObject([
      { place: { experimentId: 'experiment 2' } }
    ]);
    const named = map(
      'Experiment | Sample | Fraction | Analyte | Area | Final volume (mL)\ndrying|S1|Elution 1|Caffeine|7|1',
      { experiments }
    );
    expect(named.problems).toEqual([]);
    expect(named.records).toMatchObject([{ place: { experimentId: 'experiment 2' } }]);
  });

  it('a label that is a level as well', () => {
    const experiments = [experimentExpectation({ replicates: [replicateExpectation('Level 1')] })];
    const mapped = map(
      'Sample | Fraction | Analyte | Area | Final volume (mL)\nLevel 1|Elution 1|Caffeine|7|1',
      { experiments }
    );
    expect(problem(mapped, 'ambiguous sample').severity).toBe('error');
    expect(mapped.records).toEqual([]);
  });

  it('a synonym that two analytes share', () => {
    const panel = [
      panelExpectation('A1', { synonyms: ['twin'] }),
      panelExpectation('B1', { synonyms: ['Twin'] })
    ];
    const mapped = map('Sample | Fraction | Analyte | Area | Final volume (mL)\nS1|Elution 1|TWIN|7|1', {
      panel
    });
    expect(problem(mapped, 'ambiguous analyte').cell).toBe('C2');
  });

  it('one column twice', () => {
    const mapped = map(
      'Sample | Label | Fraction | Analyte | Area | Final volume (mL)\nS1|S1|Elution 1|Caffeine|7|1'
    );
    expect(problem(mapped, 'column twice').message).toMatch(/Columns A and B/);
    const wide = map(
      'Sample | Fraction | Final volume (mL) | Caffeine area | caffeine area\nS1|Elution 1|1|7|8'
    );
    expect(problem(wide, 'column twice').message).toMatch(/Columns D and E/);
    expect(wide.records).toEqual([]);
  });

  it('a unit that measures something else', () => {
    const mapped = map('Sample | Fraction | Analyte | Area | Final volume (gal)\nS1|Elution 1|Caffeine|7|1');
    expect(problem(mapped, 'unknown unit').cell).toBe('E1');
  });

  it('what a header lacks', () => {
    const mapped = map('Sample | Fraction | Area\nS1|Elution 1|7');
    expect(problem(mapped, 'missing column')).toMatchObject({ severity: 'error', cell: 'A1' });
    expect(problem(mapped, 'missing column').message).toContain('a column with the analyte');
  });

  it('a file without a table', async () => {
    expect(codes(map('a | b\n1 | 2'))).toEqual(['error nothing recognised null']);
    const hidden = mapRecords(
      await readWorkbook(
        handMadeWorkbook({
          sheets: [{ name: 'H', state: 'hidden', data: '<row><c t="str"><v>Sample</v></c></row>' }]
        })
      ),
      expectation()
    );
    expect(codes(hidden)).toEqual(['error nothing recognised null', 'note sheet not read null']);
  });
});

describe('questions and notes', () => {
  it('a date where a number belongs, with the number underneath', async () => {
    const mapped = await mapSheets({
      A: [
        ['Sample', 'Fraction', 'Analyte', 'Area', 'Final volume (mL)'],
        ['S1', 'Elution 1', 'Caffeine', new Date(Date.UTC(2026, 2, 4)), 1]
      ]
    });
    expect(problem(mapped, 'date in number column')).toMatchObject({
      severity: 'question',
      cell: 'D2',
      answer: 'confirm'
    });
    expect(problem(mapped, 'date in number column').message).toContain('46085');
    expect(values(mapped)).toEqual([['D2', 46085]]);
  });

  it('a CAS number that became a date', async () => {
    const mapped = await mapSheets({
      A: [
        ['Sample', 'Fraction', 'Analyte', 'Area', 'Final volume (mL)'],
        ['S1', 'Elution 1', new Date(Date.UTC(1912, 8, 24)), 7, 1]
      ]
    });
    expect(problem(mapped, 'unknown analyte').message).toContain('CAS');
  });

  it('not detected without any limit', () => {
    const panel = [panelExpectation('Caffeine', { hasLowestLevel: false })];
    const table = (value: string): string =>
      `Sample | Fraction | Analyte | Area | Final volume (mL)\nS1|Elution 1|Caffeine|${value}|1`;
    expect(problem(map(table('ND'), { panel }), 'limit missing')).toMatchObject({
      severity: 'question',
      cell: 'D2'
    });
    expect(map(table('<3'), { panel }).problems).toEqual([]);
    expect(map(table('ND')).problems).toEqual([]);
  });

  it('a dilution or share that the basis does not take, which is then not applied', () => {
    const mapped = map(
      'Sample | Fraction | Analyte | ng | Dilution | Aliquot share\nS1|Elution 1|Caffeine|7|10|0.5\nS2|Elution 1|Caffeine|7|1|1'
    );
    expect(codes(mapped)).toEqual(['question not taken by basis D2', 'question not taken by basis D2']);
    expect(mapped.records.map(({ dilution, aliquotShare }) => [dilution, aliquotShare])).toEqual([
      [null, null],
      [null, null]
    ]);
  });

  it('a final volume without a unit', () => {
    const mapped = map('Sample | Fraction | Analyte | Area | Final volume\nS1|Elution 1|Caffeine|7|0.5');
    expect(problem(mapped, 'unit missing')).toMatchObject({ severity: 'question', cell: 'E1' });
    expect(only(mapped.records).finalVolumeMl).toBe(0.5);
  });

  it('a negative amount, which can be what was calculated', () => {
    const mapped = map('Sample | Fraction | Analyte | ng\nS1|Elution 1|Caffeine|-0.2');
    expect(problem(mapped, 'negative').severity).toBe('question');
    expect(values(mapped)).toEqual([['D2', -0.2]]);
  });

  it('areas of zero once, as a note: they are numbers, not "not detected"', () => {
    const mapped = map(
      'Sample | Fraction | Analyte | Area | Final volume (mL)\nS1|Elution 1|Caffeine|0|1\nS2|Elution 1|Caffeine|0|1'
    );
    expect(problem(mapped, 'zero area')).toMatchObject({ severity: 'note', cell: 'D2', answer: null });
    expect(mapped.records.map(({ state, reported }) => [state, reported.value])).toEqual([
      ['value', 0],
      ['value', 0]
    ]);
  });

  it('hidden sheets and sheets without a table beside one that has it', async () => {
    const mapped = await mapSheets({
      Cover: [['Run 12']],
      A: [
        ['Sample', 'Fraction', 'Analyte', 'Area', 'Final volume (mL)'],
        ['S1', 'Elution 1', 'Caffeine', 7, 1]
      ]
    });
    expect(codes(mapped)).toEqual(['note sheet not read null']);
    expect(only(mapped.records).sheet).toBe('A');
  });

  it('a date of acquisition that could be read in two ways', () => {
    const mapped = map(
      'Sample | Fraction | Analyte | Area | Final volume (mL) | Acquired at\nS1|Elution 1|Caffeine|7|1|03/04/2026'
    );
    expect(problem(mapped, 'date not understood').severity).toBe('question');
    expect(only(mapped.records).acquiredAt).toBeNull();
  });
});
