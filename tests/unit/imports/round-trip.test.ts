import ExcelJS from 'exceljs';
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { nameKey } from '../../../src/lib/domain/name-key';
import { mapRecords } from '../../../src/lib/server/imports/map-records';
import { readWorkbook } from '../../../src/lib/server/imports/read-workbook';
import type {
  Expectation,
  MappedImport,
  PanelExpectation,
  ProblemCode
} from '../../../src/lib/server/imports/types';
import { writeTemplate } from '../../../src/lib/server/imports/write-template';
import type { TemplateLayout } from '../../../src/lib/server/imports/write-template';
import {
  experimentExpectation,
  expectation,
  panelExpectation,
  replicateExpectation
} from '../../factories/expectation';

/** Any number can stand in a cell: that it looks odd is asked, and is no fault of the reading. */
const looksOdd: readonly ProblemCode[] = [
  'outside calibration range',
  'internal standard outside window',
  'far from its fellows',
  'ten times off'
];

/** Names as people give them: with the marks of chemistry, words of headers, units and Greek letters in them. */
const nameParts = [
  'Caffeine',
  'α',
  '2,4-D',
  'acid',
  'area',
  '(E)',
  'ng',
  'IS',
  'ß',
  'Testol',
  'd5',
  "2'",
  'RT',
  'µ',
  'sample'
];
const name = fc
  .array(fc.constantFrom(...nameParts), { minLength: 1, maxLength: 3 })
  .map((parts) => parts.join(' '));
const label = fc
  .tuple(fc.constantFrom('S', 'P-', 'MB ', 'Ä', 'spike_'), fc.integer({ min: 1, max: 99 }))
  .map(([letters, number]) => `${letters}${number}`);

/** No two that a person could take for one. */
const distinct = (
  names: fc.Arbitrary<string>,
  minLength: number,
  maxLength: number
): fc.Arbitrary<string[]> =>
  fc.uniqueArray(names, { minLength, maxLength, selector: (text) => nameKey(text) || text });

const experiment: fc.Arbitrary<Expectation> = fc
  .record({
    labels: distinct(label, 1, 4),
    fractions: distinct(
      fc.constantFrom('Elution 1', 'Elution 2', 'Aqueous layer', 'Bottle rinse', 'Wash', 'E1'),
      1,
      3
    ),
    analytes: distinct(name, 1, 5),
    hasStandard: fc.boolean(),
    isStandardSolution: fc.boolean()
  })
  .map(({ labels, fractions, analytes, hasStandard, isStandardSolution }) => {
    const standard = panelExpectation('Invented-d9', { role: 'injection internal standard' });
    const targets = analytes.map((analyte, index): PanelExpectation =>
      panelExpectation(analyte, {
        internalStandard: hasStandard && index % 2 === 0 ? { panelEntryId: standard.id, point: 'vial' } : null
      })
    );
    return expectation({
      experiments: [
        experimentExpectation({
          replicates: labels.map((each, index) =>
            isStandardSolution && index === 0
              ? replicateExpectation(each, { kind: 'solvent standard', takesFraction: false })
              : replicateExpectation(each)
          ),
          fractions: fractions.map((each) => ({ id: `fraction ${each}`, name: each }))
        })
      ],
      panel: hasStandard ? [...targets, standard] : targets,
      experimentId: 'experiment 1'
    });
  });

interface Filled {
  readonly bytes: Buffer;
  /** Cell → the number that was written there. */
  readonly written: ReadonlyMap<string, number>;
  readonly rows: ReadonlyMap<number, Readonly<Record<string, number>>>;
}

const perExtract = ['Final volume (mL)', 'Dilution', 'Aliquot share'] as const;

/** Fills every number column of a template; what belongs to an extract is the same in all of its rows. */
async function fill(template: Buffer, draw: (header: string) => number): Promise<Filled> {
  const workbook = new ExcelJS.Workbook();
  await workbook.xlsx.load(template as unknown as ArrayBuffer);
  const sheet = workbook.getWorksheet('Results');
  if (!sheet) throw new Error('the template has no sheet Results');
  const headers = new Map<number, string>();
  sheet.getRow(3).eachCell((cell, column) => headers.set(column, String(cell.value)));
  const written = new Map<string, number>();
  const rows = new Map<number, Record<string, number>>();
  const ofExtract = new Map<string, Record<string, number>>();
  for (let row = 4; row <= sheet.rowCount; row++) {
    const key = `${sheet.getRow(row).getCell(1).value} ${sheet.getRow(row).getCell(2).value}`;
    const shared = ofExtract.get(key) ?? Object.fromEntries(perExtract.map((each) => [each, draw(each)]));
    ofExtract.set(key, shared);
    const own: Record<string, number> = {};
    for (const [column, header] of headers) {
      if (!/area$|^Area$|volume|Dilution|share/.test(header) || /^(?:Sample|Analyte)$/.test(header)) continue;
      const cell = sheet.getRow(row).getCell(column);
      const value = shared[header] ?? draw(header);
      cell.value = value;
      own[header] = value;
      written.set(cell.address, value);
    }
    rows.set(row - 1, own);
  }
  return { bytes: Buffer.from(await workbook.xlsx.writeBuffer()), written, rows };
}

const positive = fc.double({ min: Number.MIN_VALUE, max: 1e300, noNaN: true });
const numbers: Readonly<Record<string, fc.Arbitrary<number>>> = {
  'Final volume (mL)': positive,
  Dilution: fc.double({ min: 1, max: 1e12, noNaN: true }),
  'Aliquot share': fc.double({ min: Number.MIN_VALUE, max: 1, noNaN: true })
};

describe('any experiment, its template filled with any numbers', () => {
  it.each<TemplateLayout>(['long', 'wide'])(
    'comes back from the %s layout with every value to the last bit, at its place',
    async (layout) => {
      await fc.assert(
        fc.asyncProperty(experiment, fc.gen(), async (offered, draw) => {
          const template = await writeTemplate(offered, 'experiment 1', layout);
          const { bytes, written, rows } = await fill(template, (header) =>
            draw(() => numbers[header] ?? positive)
          );
          const result: MappedImport = mapRecords(await readWorkbook(bytes), offered);
          expect(
            result.problems.filter(({ severity, code }) => severity !== 'note' && !looksOdd.includes(code))
          ).toEqual([]);
          const [sheet] = offered.experiments;
          const extracts = (sheet?.replicates ?? []).reduce(
            (sum, { takesFraction }) => sum + (takesFraction ? (sheet?.fractions.length ?? 0) : 1),
            0
          );
          const analytes = offered.panel.filter(
            ({ role }) => layout === 'wide' || role !== 'injection internal standard'
          );
          expect(result.records).toHaveLength(extracts * analytes.length);
          const places = new Set(
            result.records.map(({ place, panelEntryId }) => JSON.stringify([place, panelEntryId]))
          );
          expect(places.size).toBe(result.records.length);
          for (const record of result.records) {
            const row = rows.get(record.row);
            expect(record.reported.value).toBe(written.get(record.cell));
            expect(record.finalVolumeMl).toBe(row?.['Final volume (mL)']);
            expect(record.dilution).toBe(row?.Dilution);
            expect(record.aliquotShare).toBe(row?.['Aliquot share']);
            const entry = offered.panel.find(({ id }) => id === record.panelEntryId);
            if (entry?.internalStandard)
              expect(record.reported.internalArea).toBe(
                row?.[layout === 'long' ? 'Internal standard area' : 'Invented-d9 area']
              );
          }
        }),
        { numRuns: 15 }
      );
    },
    120_000
  );
});
