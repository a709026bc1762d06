import ExcelJS from 'exceljs';
import { beforeAll, describe, expect, it } from 'vitest';
import type { Actor } from '../../../src/lib/domain/actor';
import type { Invalid } from '../../../src/lib/server/errors';
import { Conflict, Forbidden, NotFound } from '../../../src/lib/server/errors';
import { Experiment } from '../../../src/lib/server/db/models/experiment';
import { Measurement } from '../../../src/lib/server/db/models/measurement';
import type { Lab } from '../../../src/lib/server/db/models/lab';
import type { Study } from '../../../src/lib/server/db/models/study';
import { readStudyMeasurements } from '../../../src/lib/server/db/measurement-read';
import { createExperiment } from '../../../src/lib/server/services/experiments';
import { experimentTemplate } from '../../../src/lib/server/services/data-templates';
import { previewImport } from '../../../src/lib/server/services/import-preview';
import { storeImport } from '../../../src/lib/server/services/import-storing';
import {
  declareAboutImport,
  dropImport,
  importFile,
  listImports,
  receiveFile,
  withdrawImport
} from '../../../src/lib/server/services/imports';
import { makeExperimentForm } from '../../factories/experiment-form';
import { makeLab } from '../../factories/lab';
import { makeMember } from '../../factories/member';
import { makePanelEntry } from '../../factories/panel-entry';
import { makeStudy } from '../../factories/study';
import { oneHugeCell } from '../../fixtures/workbooks/bombs';

type Cells = readonly (readonly (string | number | null)[])[];

const header = ['Sample', 'Fraction', 'Analyte', 'Amount (ng)'];
const firstWindow = { sheet: null, fromRow: 1, fromRecord: 0 };
const unasked = { questionsConfirmed: false, reason: '' };

let lab: Lab;
let chemist: Actor;
let analyst: Actor;
let study: Study;
let experimentNumber: number;

async function workbook(rows: Cells): Promise<Buffer> {
  const book = new ExcelJS.Workbook();
  const sheet = book.addWorksheet('Values');
  for (const row of rows) sheet.addRow([...row]);
  return Buffer.from(await book.xlsx.writeBuffer());
}

/** Every place of the experiment with a value, changed by `change` where a test wants another. */
const allRows = (change: Readonly<Record<string, string | number | null>> = {}): Cells => [
  header,
  ...['S1', 'S2', 'S3'].flatMap((sample, replicate) =>
    ['Alpha', 'Beta'].map((analyte, index) => {
      const key = `${sample} ${analyte}`;
      return [sample, 'Elution', analyte, key in change ? (change[key] ?? null) : 40 + 5 * replicate + index];
    })
  )
];

async function receive(rows: Cells, as: Actor = analyst, fileName = 'values.xlsx'): Promise<string> {
  const bytes = await workbook(rows);
  return (await receiveFile(as, study.code, { fileName, bytes, experimentNumber })).importId;
}

const counting = async (): Promise<readonly (number | null)[]> => {
  const rows = await readStudyMeasurements({ labId: study.labId, studyId: study.id });
  return rows.map(({ reported }) => reported).sort((a, b) => (a ?? 0) - (b ?? 0));
};

async function problemsOf(work: Promise<unknown>): Promise<Invalid['problems']> {
  const error: unknown = await work.then(
    () => null,
    (thrown: unknown) => thrown
  );
  expect(error).toMatchObject({ name: 'Invalid' });
  return (error as Invalid).problems;
}

/** A study of its own for each test: two targets, three spiked portions, one fraction. */
async function freshStudy(): Promise<void> {
  ({ study } = await makeStudy(chemist));
  await makePanelEntry(study, { name: 'Alpha' });
  await makePanelEntry(study, { name: 'Beta' });
  experimentNumber = await createExperiment(
    chemist,
    study.code,
    makeExperimentForm({
      replicates: [{ kind: 'spiked', count: 3, labels: 'S1\nS2\nS3' }],
      spikes: [{ kind: 'spiked', targetsNg: '50' }]
    })
  );
}

beforeAll(async () => {
  lab = await makeLab();
  chemist = await makeMember({ lab, role: 'chemist' });
  analyst = await makeMember({ lab, role: 'analyst' });
});

describe('a file on its way in', () => {
  it('is kept byte for byte before anything of it is read', async () => {
    await freshStudy();
    const bytes = await workbook(allRows());
    const { importId } = await receiveFile(analyst, study.code, {
      fileName: 'C:\\runs\\values.xlsx',
      bytes,
      experimentNumber
    });
    const kept = await importFile(chemist, study.code, importId);
    expect(kept.fileName).toBe('values.xlsx');
    expect(kept.bytes.equals(bytes)).toBe(true);
    expect(await counting()).toEqual([]);
  });

  it('shows what it will become beside the sheet, without storing it', async () => {
    await freshStudy();
    const importId = await receive(allRows({ 'S2 Beta': 'ND', 'S3 Alpha': null }));
    const preview = await previewImport(analyst, study.code, importId, firstWindow);
    expect(preview.recordCount).toBe(6);
    expect(preview.stateCounts).toMatchObject({ value: 4, missing: 1 });
    expect(preview.window?.map?.lines.map(({ name, means }) => [name, means])).toEqual([
      ['A', 'sample'],
      ['B', 'fraction'],
      ['C', 'analyte'],
      ['D', 'amount']
    ]);
    expect(preview.window?.rows[1]?.cells.map(({ text }) => text)).toEqual(['S1', 'Elution', 'Alpha', '40']);
    expect(preview.records[0]).toMatchObject({
      cell: 'D2',
      sample: 'S1',
      fraction: 'Elution',
      analyte: 'Alpha',
      value: 40
    });
    expect(await Measurement.count({ where: { importId } })).toBe(0);
  });

  it('is stored whole, and each number knows its sheet and cell', async () => {
    await freshStudy();
    const importId = await receive(allRows());
    const stored = await storeImport(analyst, study.code, importId, unasked);
    expect(stored).toMatchObject({ recordCount: 6, experimentNumbers: [experimentNumber] });
    expect(await counting()).toEqual([40, 41, 45, 46, 50, 51]);
    const rows = await Measurement.findAll({ where: { importId, reported: 46 } });
    expect(rows[0]).toMatchObject({ sheet: 1, sheetRow: 5, sheetColumn: 4, rawText: '46', basis: 'ng' });
  });

  it('is stored once however often it is confirmed', async () => {
    await freshStudy();
    const importId = await receive(allRows());
    const outcomes = await Promise.allSettled([
      storeImport(analyst, study.code, importId, unasked),
      storeImport(analyst, study.code, importId, unasked)
    ]);
    expect(outcomes.filter(({ status }) => status === 'fulfilled')).toHaveLength(1);
    const refused = outcomes.find(({ status }) => status === 'rejected') as PromiseRejectedResult;
    expect(refused.reason).toBeInstanceOf(Conflict);
    expect(await counting()).toHaveLength(6);
  });

  it('changes nothing when the same bytes come again, and says when they came', async () => {
    await freshStudy();
    const bytes = await workbook(allRows());
    const once = await receiveFile(analyst, study.code, { fileName: 'a.xlsx', bytes, experimentNumber });
    await storeImport(analyst, study.code, once.importId, unasked);
    const again = await receiveFile(chemist, study.code, { fileName: 'b.xlsx', bytes, experimentNumber });
    expect(again.importId).toBe(once.importId);
    expect(again.storedBefore?.by).toBe(analyst.name);
    expect(await counting()).toHaveLength(6);
    expect(await listImports(chemist, study.code)).toHaveLength(1);
  });
});

describe('a corrected file', () => {
  it('covers the places it fills, with a reason, and gives them back when withdrawn', async () => {
    await freshStudy();
    await storeImport(analyst, study.code, await receive(allRows()), unasked);
    const corrected = await receive([header, ['S1', 'Elution', 'Alpha', 44.5]], analyst, 'corrected.xlsx');
    const preview = await previewImport(analyst, study.code, corrected, firstWindow);
    expect(preview.coveredCount).toBe(1);
    expect(preview.coveredFiles).toEqual(['values.xlsx']);

    const problems = await problemsOf(storeImport(analyst, study.code, corrected, unasked));
    expect(problems[0]?.path).toBe('reason');
    await storeImport(analyst, study.code, corrected, {
      questionsConfirmed: false,
      reason: 'peak integrated anew'
    });
    expect(await counting()).toEqual([41, 44.5, 45, 46, 50, 51]);

    await withdrawImport(analyst, study.code, corrected, 'wrong vial after all');
    expect(await counting()).toEqual([40, 41, 45, 46, 50, 51]);
  });

  it('is withdrawn only by who stored it, or by a chemist or manager, and only with a reason', async () => {
    await freshStudy();
    const importId = await receive(allRows(), chemist);
    await storeImport(chemist, study.code, importId, unasked);
    await expect(withdrawImport(analyst, study.code, importId, 'not mine')).rejects.toBeInstanceOf(Forbidden);
    expect((await problemsOf(withdrawImport(chemist, study.code, importId, ' ')))[0]?.path).toBe('reason');
    await withdrawImport(chemist, study.code, importId, 'wrong sequence');
    await expect(withdrawImport(chemist, study.code, importId, 'twice')).rejects.toBeInstanceOf(Conflict);
    expect(await counting()).toEqual([]);
  });
});

describe('a wrong file', () => {
  it('names each problem with its cell and stores nothing', async () => {
    await freshStudy();
    const importId = await receive([
      header,
      ['S1', 'Elution', 'Alpha', '48,2l3'],
      ['S9', 'Elution', 'Alpha', 40],
      ['S2', 'Elution', 'Gamma', 40],
      ['S2', 'Elution', 'Beta', 41],
      ['S2', 'Elution', 'Beta', 42]
    ]);
    const problems = await problemsOf(storeImport(analyst, study.code, importId, unasked));
    const at = problems.map(({ path }) => path);
    expect(at).toContain('Values!D2');
    expect(at).toContain('Values!A3');
    expect(at).toContain('Values!C4');
    expect(at.some((path) => path === 'Values!D6' || path === 'Values!A6')).toBe(true);
    expect(problems.find(({ path }) => path === 'Values!D2')).toMatchObject({ found: '“48,2l3”' });
    expect(await counting()).toEqual([]);
    expect((await listImports(analyst, study.code))[0]).toMatchObject({ state: 'received', valueCount: 0 });
  });

  it.each([
    ['not a workbook', Buffer.from([0x25, 0x50, 0x44, 0x46, 0x2d, 0x31, 0x2e, 0x37, 0x0a, 0x00, 0xff])],
    ['a bomb', oneHugeCell()],
    ['protected by a password', Buffer.concat([Buffer.from('d0cf11e0a1b11ae1', 'hex'), Buffer.alloc(600)])]
  ])('is refused in one sentence when it is %s', async (_name, bytes) => {
    await freshStudy();
    const { importId } = await receiveFile(analyst, study.code, {
      fileName: 'wrong.xlsx',
      bytes,
      experimentNumber
    });
    const preview = await previewImport(analyst, study.code, importId, firstWindow);
    expect(preview.refusal).toMatch(/^[A-Z].*\.$/s);
    expect((await problemsOf(storeImport(analyst, study.code, importId, unasked)))[0]?.message).toBe(
      preview.refusal
    );
    expect(await counting()).toEqual([]);
  });

  it('is refused before it is kept when it is empty', async () => {
    await freshStudy();
    const sent = receiveFile(analyst, study.code, {
      fileName: 'e.xlsx',
      bytes: Buffer.alloc(0),
      experimentNumber
    });
    expect((await problemsOf(sent))[0]?.path).toBe('file');
    expect(await listImports(analyst, study.code)).toEqual([]);
  });

  it("is told apart from this experiment's file when it is the template of another study's", async () => {
    await freshStudy();
    const foreign = await experimentTemplate(chemist, study.code, { experimentNumber, layout: 'long' });
    await freshStudy();
    const { importId } = await receiveFile(analyst, study.code, { ...foreign, experimentNumber });
    const preview = await previewImport(analyst, study.code, importId, firstWindow);
    expect(preview.problems.map(({ code }) => code)).toContain('other experiment');
    expect(preview.recordCount).toBe(0);
  });

  it('asks before it takes a bare not-detected that has no limit', async () => {
    await freshStudy();
    const importId = await receive(allRows({ 'S1 Alpha': 'ND' }));
    const problems = await problemsOf(storeImport(analyst, study.code, importId, unasked));
    expect(problems[0]).toMatchObject({ path: 'Values!D2', found: '“ND”' });
  });
});

describe('who may bring data', () => {
  it('refuses a reviewer and answers another lab as if nothing were there', async () => {
    await freshStudy();
    const importId = await receive(allRows());
    const reviewer = await makeMember({ lab, role: 'reviewer' });
    const stranger = await makeMember({ role: 'manager' });
    const bytes = await workbook(allRows());
    const file = { fileName: 'x.xlsx', bytes, experimentNumber };
    await expect(receiveFile(reviewer, study.code, file)).rejects.toBeInstanceOf(Forbidden);
    await expect(storeImport(reviewer, study.code, importId, unasked)).rejects.toBeInstanceOf(Forbidden);
    for (const attempt of [
      () => receiveFile(stranger, study.code, file),
      () => importFile(stranger, study.code, importId),
      () => previewImport(stranger, study.code, importId, firstWindow),
      () => storeImport(stranger, study.code, importId, unasked),
      () => dropImport(stranger, study.code, importId),
      () => listImports(stranger, study.code)
    ]) {
      await expect(attempt()).rejects.toBeInstanceOf(NotFound);
    }
    expect(await counting()).toEqual([]);
  });

  it("does not find an import under another study's address", async () => {
    await freshStudy();
    const importId = await receive(allRows());
    await freshStudy();
    await expect(importFile(analyst, study.code, importId)).rejects.toBeInstanceOf(NotFound);
    await expect(importFile(analyst, study.code, 'not-an-id')).rejects.toBeInstanceOf(NotFound);
  });
});

describe('what is declared about a file', () => {
  it('says what the numbers are where the header does not', async () => {
    await freshStudy();
    const rows = allRows().map((row, index) =>
      index === 0 ? ['Sample', 'Fraction', 'Analyte', 'Result'] : row
    );
    const importId = await receive(rows);
    const before = await previewImport(analyst, study.code, importId, firstWindow);
    expect(before.problems.map(({ code }) => code)).toContain('basis unknown');
    await declareAboutImport(analyst, study.code, importId, { basis: 'ng', decimal: null });
    const after = await previewImport(analyst, study.code, importId, firstWindow);
    expect(after.errorCount).toBe(0);
    expect(after.records[0]).toMatchObject({ basis: 'ng', value: 40 });
  });

  it('is read anew when the plan changed under it', async () => {
    await freshStudy();
    const importId = await receive(allRows());
    await Experiment.update({ title: 'Renamed meanwhile' }, { where: { studyId: study.id } });
    await storeImport(analyst, study.code, importId, unasked);
    expect(await counting()).toHaveLength(6);
  });
});

describe('the template of an experiment', () => {
  it('left empty, reads as missing at every place, never as zero', async () => {
    await freshStudy();
    const template = await experimentTemplate(analyst, study.code, { experimentNumber, layout: 'wide' });
    const { importId } = await receiveFile(analyst, study.code, { ...template, experimentNumber });
    const preview = await previewImport(analyst, study.code, importId, firstWindow);
    expect(preview.stateCounts).toMatchObject({ missing: 6, value: 0 });
  });
});
