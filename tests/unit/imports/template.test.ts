import ExcelJS from 'exceljs';
import { describe, expect, it } from 'vitest';
import { mapRecords } from '../../../src/lib/server/imports/map-records';
import { readWorkbook } from '../../../src/lib/server/imports/read-workbook';
import { cellAt } from '../../../src/lib/server/imports/sheet';
import type { Expectation, MappedImport, MappedRecord } from '../../../src/lib/server/imports/types';
import { writeTemplate } from '../../../src/lib/server/imports/write-template';
import {
  experimentExpectation,
  expectation,
  panelExpectation,
  replicateExpectation
} from '../../factories/expectation';
import { convert, libreOffice } from '../../fixtures/workbooks/libreoffice';

type Layout = 'long' | 'wide';

const standard = panelExpectation('Testol-d5', { role: 'injection internal standard' });

function offered(over: Partial<Expectation> = {}): Expectation {
  return expectation({
    experiments: [
      experimentExpectation({
        replicates: [
          ...['S1', 'S2'].map((label) => replicateExpectation(label)),
          replicateExpectation('STD', { kind: 'solvent standard', takesFraction: false })
        ]
      }),
      experimentExpectation({ id: 'experiment 2', title: 'Drying' })
    ],
    panel: [
      panelExpectation('Caffeine', { internalStandard: { panelEntryId: standard.id, point: 'vial' } }),
      panelExpectation('2,4-Testol area', {}),
      panelExpectation('Testol IS'),
      standard
    ],
    ...over
  });
}

/** Fills the named columns of the template's rows, as a person would, and saves it. */
async function fill(
  bytes: Buffer,
  cellOf: (header: string, row: number) => ExcelJS.CellValue | undefined
): Promise<Buffer> {
  const workbook = new ExcelJS.Workbook();
  await workbook.xlsx.load(bytes as unknown as ArrayBuffer);
  const sheet = workbook.getWorksheet('Results');
  if (!sheet) throw new Error('no sheet Results');
  const headerRow = 3;
  const headers = sheet.getRow(headerRow).values as string[];
  for (let row = headerRow + 1; row <= sheet.rowCount; row++) {
    headers.forEach((header, column) => {
      const value = cellOf(header, row - headerRow - 1);
      if (value !== undefined) sheet.getRow(row).getCell(column).value = value;
    });
  }
  return Buffer.from(await workbook.xlsx.writeBuffer());
}

async function mapped(bytes: Buffer, over: Partial<Expectation> = {}): Promise<MappedImport> {
  return mapRecords(await readWorkbook(bytes), offered(over));
}

const key = ({ place, panelEntryId, injection }: MappedRecord): string =>
  place.kind === 'extract'
    ? `${place.replicateId}|${place.fractionId}|${panelEntryId}|${injection}`
    : 'level';

describe('the template', () => {
  it.each<Layout>(['long', 'wide'])(
    'in the %s layout is prefilled, recognised, and empty cells are missing',
    async (layout) => {
      const result = await mapped(await writeTemplate(offered(), 'experiment 1', layout));
      expect(result.problems).toEqual([]);
      expect(result.reading.template).toEqual({ experimentId: 'experiment 1', layout });
      expect(result.reading.sheets).toMatchObject([
        { sheet: 'Results', layout, headerRow: 2, basis: 'area' }
      ]);
      // Two replicates of two fractions and a standard; the injection standard has no row of its own in the long layout.
      expect(result.records).toHaveLength(5 * (layout === 'long' ? 3 : 4));
      expect(new Set(result.records.map(key)).size).toBe(result.records.length);
      expect(result.records.every(({ state, rawText }) => state === 'missing' && rawText === '')).toBe(true);
    }
  );

  it('keeps ND, limits and empty cells apart when filled', async () => {
    const fillings = ['ND', '<0,5', '>max', null, 'n/a'];
    const bytes = await fill(await writeTemplate(offered(), 'experiment 1', 'wide'), (header, at) => {
      if (header === '2,4-Testol area area') return fillings[at];
      return header === 'Final volume (mL)' ? 1 : undefined;
    });
    const result = await mapped(bytes);
    expect(result.problems).toEqual([]);
    expect(
      result.records
        .filter(({ panelEntryId }) => panelEntryId === 'entry 2,4-Testol area')
        .map(({ state, limit }) => [state, limit])
    ).toEqual([
      ['not detected', null],
      ['below', 0.5],
      ['above', null],
      ['missing', null],
      ['missing', null]
    ]);
  });

  it('of another experiment is refused as a whole', async () => {
    const bytes = await writeTemplate(offered(), 'experiment 2', 'long');
    const result = await mapped(bytes, { experimentId: 'experiment 1' });
    expect(result.records).toEqual([]);
    expect(result.problems).toMatchObject([
      { severity: 'error', code: 'other experiment', sheet: null, cell: null }
    ]);
    expect(result.problems[0]?.message).toMatch(/made for Drying, and was brought to Extraction at pH 7/);
    const elsewhere = await mapped(bytes, { experiments: [experimentExpectation()] });
    expect(elsewhere.problems).toMatchObject([{ code: 'other experiment' }]);
    expect((await mapped(bytes)).reading.template?.experimentId).toBe('experiment 2');
  });

  it('takes labels from its own experiment only', async () => {
    const bytes = await writeTemplate(offered(), 'experiment 2', 'wide');
    const result = await mapped(bytes);
    expect(result.problems).toEqual([]);
    expect(
      new Set(result.records.map(({ place }) => place.kind === 'extract' && place.experimentId))
    ).toEqual(new Set(['experiment 2']));
  });

  it('says on itself what it is, what cells mean, and that demo data are invented', async () => {
    const workbook = await readWorkbook(
      await writeTemplate(offered(), 'experiment 1', 'long', { demoLabel: 'invented demo data' })
    );
    const [results, readMe, mark] = workbook.sheets;
    if (!results || !readMe || !mark) throw new Error('a sheet is missing');
    expect(cellAt(results, 0, 0)?.raw).toBe('Extraction at pH 7 (invented demo data)');
    const texts = readMe.texts.join('\n');
    expect(texts).toContain('never taken for not detected');
    expect(texts).toContain('experiment 1');
    expect(readMe.hidden).toBe(false);
    expect(mark.hidden).toBe(true);
  });

  it('guards the columns of the preparation', async () => {
    const workbook = new ExcelJS.Workbook();
    await workbook.xlsx.load(
      (await writeTemplate(offered(), 'experiment 1', 'long')) as unknown as ArrayBuffer
    );
    const sheet = workbook.getWorksheet('Results');
    expect(sheet?.getCell('G4').dataValidation).toMatchObject({ type: 'decimal', operator: 'greaterThan' });
    expect(sheet?.getCell('J4').dataValidation).toMatchObject({ type: 'whole' });
  });

  it.skipIf(!libreOffice)(
    'comes back whole when LibreOffice has opened and saved it',
    async () => {
      const filled = await fill(await writeTemplate(offered(), 'experiment 1', 'long'), (header, at) =>
        header === 'Area' || header === 'Internal standard area'
          ? at + 0.125
          : header === 'Final volume (mL)'
            ? 0.5
            : undefined
      );
      const direct = await mapped(filled);
      expect(direct.records.some(({ reported }) => reported.value === 7.125)).toBe(true);
      expect(await mapped(convert(filled, 'xlsx', 'xlsx'))).toEqual(direct);
    },
    120_000
  );

  it('needs an experiment that is offered', async () => {
    await expect(writeTemplate(offered(), 'experiment 9', 'long')).rejects.toThrow(RangeError);
  });
});
