import ExcelJS from 'exceljs';
import { beforeEach, describe, expect, it } from 'vitest';
import { Lab } from '../../../src/lib/server/db/models/lab';
import { Conflict, Forbidden, Invalid, NotFound } from '../../../src/lib/server/errors';
import { annotatedImport } from '../../../src/lib/server/services/annotated-imports';
import {
  keepColumnMap,
  listColumnMaps,
  setColumnMapRetired
} from '../../../src/lib/server/services/column-maps';
import {
  assignLabel,
  changeMap,
  mendCell,
  resetMap,
  unmendCell
} from '../../../src/lib/server/services/import-mapping';
import { previewImport } from '../../../src/lib/server/services/import-preview';
import { storeImport } from '../../../src/lib/server/services/import-storing';
import { importFile, receiveFile } from '../../../src/lib/server/services/imports';
import type { FileMapView, ImportPreviewView } from '../../../src/lib/views/imports';
import { makeMember } from '../../factories/member';
import { openBench, portions, type Bench, type Row } from '../by-hand/bench';

/* How a waiting file is read, changed by a person: columns, header, labels, single cells; kept for the next file. */

let bench: Bench;
let number: number;

beforeEach(async () => {
  bench = await openBench();
  await bench.entry('Alpha');
  await bench.entry('Beta');
  number = await bench.experiment({
    spikes: [{ kind: 'spiked', targetsNg: '100' }],
    replicates: [portions('spiked', ['S1', 'S2', 'S3', 'S4', 'S5'])]
  });
});

const firstWindow = { sheet: null, fromRow: 1, fromRecord: 0 };

async function receive(rows: readonly Row[], name = 'run.csv'): Promise<string> {
  const text = rows.map((row) => row.map((cell) => cell ?? '').join(';')).join('\n');
  const bytes = Buffer.from(text, 'utf8');
  return (await receiveFile(bench.actor, bench.code, { fileName: name, bytes, experimentNumber: number }))
    .importId;
}

const preview = (id: string): Promise<ImportPreviewView> =>
  previewImport(bench.actor, bench.code, id, firstWindow);

async function mapOf(id: string): Promise<FileMapView> {
  const { map } = await preview(id);
  if (!map) throw new Error('the file was not read');
  return map;
}

const store = (id: string) =>
  storeImport(bench.actor, bench.code, id, { questionsConfirmed: true, reason: 'read again' });

const table: readonly Row[] = [
  ['Sample', 'Fraction', 'Analyte', 'Amount (ng)', 'Wert'],
  ...[90, 91, 92, 93, 94].map((ng, index): Row => [`S${index + 1}`, 'Elution', 'Alpha', ng, ng + 5])
];

describe('a column', () => {
  it('means what a person says, from then on and in what is stored', async () => {
    const id = await receive(table);
    const sheet = (await preview(id)).window?.name ?? '';
    const column = { analyte: null, basis: null, unit: null };
    await changeMap(bench.actor, bench.code, id, {
      what: 'column',
      sheet,
      column: { ...column, column: 3, means: 'ignored' }
    });
    await changeMap(bench.actor, bench.code, id, {
      what: 'column',
      sheet,
      column: { ...column, column: 4, means: 'amount', basis: 'ng', unit: 'ng' }
    });
    const after = await preview(id);
    expect(after.map?.source).toBe('changed');
    expect(after.records.map(({ value }) => value)).toEqual([95, 96, 97, 98, 99]);
    await store(id);
    // By hand: the mean of 95 to 99 ng of 100 ng.
    expect((await bench.result(number, 'Alpha')).mean).toBeCloseTo(97, 12);
  });

  it('is read as recognised again when that is taken back', async () => {
    const id = await receive(table);
    const sheet = (await preview(id)).window?.name ?? '';
    await changeMap(bench.actor, bench.code, id, {
      what: 'column',
      sheet,
      column: { column: 3, means: 'ignored', analyte: null, basis: null, unit: null }
    });
    expect((await preview(id)).recordCount).toBe(0);
    await resetMap(bench.actor, bench.code, id);
    expect((await preview(id)).recordCount).toBe(5);
  });

  it('is refused in a sheet that the file does not have', async () => {
    const id = await receive(table);
    const change = changeMap(bench.actor, bench.code, id, {
      what: 'sheet',
      sheet: 'Elsewhere',
      isRead: true
    });
    await expect(change).rejects.toBeInstanceOf(Invalid);
  });
});

describe('the header', () => {
  it('stands where a person says, and its texts are understood there', async () => {
    const id = await receive([
      ['Sample', 'Analyte', 'Area'],
      ['Sample', 'Analyte', 'Amount (ng)'],
      ...[90, 91].map((ng, index): Row => [`S${index + 1}`, 'Alpha', ng])
    ]);
    const sheet = (await preview(id)).window?.name ?? '';
    await changeMap(bench.actor, bench.code, id, {
      what: 'table',
      sheet,
      orientation: 'long',
      headerLines: [1],
      blocks: null,
      carried: []
    });
    const { records, window } = await preview(id);
    expect(window?.map?.headerLines).toEqual([2]);
    expect(records.map(({ value, basis }) => [value, basis])).toEqual([
      [90, 'ng'],
      [91, 'ng']
    ]);
  });
});

describe('a sample label', () => {
  const odd: readonly Row[] = [
    ['Sample', 'Fraction', 'Analyte', 'Amount (ng)'],
    ['run 17', 'Elution', 'Alpha', 90],
    ['S2', 'Elution', 'Alpha', 91],
    ['rinse', 'Elution', 'Alpha', 3]
  ];

  it('that was not found is listed first, and gets the place that a person gives it', async () => {
    const id = await receive(odd);
    const before = await mapOf(id);
    expect(before.labels.slice(0, 2).map(({ label, how }) => [label, how])).toEqual([
      ['run 17', 'not found'],
      ['rinse', 'not found']
    ]);
    const place = before.places[0]?.places.find(({ label }) => label === 'S1')?.value ?? '';
    await assignLabel(bench.actor, bench.code, id, { label: 'run 17', place, fraction: null });
    await assignLabel(bench.actor, bench.code, id, { label: 'rinse', place: 'left out', fraction: null });
    const after = await preview(id);
    expect(after.errorCount).toBe(0);
    expect(after.records.map(({ sample, value }) => [sample, value])).toEqual([
      ['S1', 90],
      ['S2', 91]
    ]);
    await assignLabel(bench.actor, bench.code, id, { label: 'run 17', place: '', fraction: null });
    expect((await preview(id)).errorCount).toBeGreaterThan(0);
  });

  it('is not given to a place of another study', async () => {
    const id = await receive(odd);
    const elsewhere = await openBench();
    const other = await elsewhere.experiment({ replicates: [portions('spiked', ['X1'])] });
    const foreign = (await elsewhere.places(other)).replicates.get('X1') ?? '';
    const assigned = assignLabel(bench.actor, bench.code, id, {
      label: 'run 17',
      place: `replicate ${foreign}`,
      fraction: null
    });
    await expect(assigned).rejects.toBeInstanceOf(Invalid);
  });
});

describe('a mended cell', () => {
  const faulty: readonly Row[] = table.map((row, index) =>
    index === 2 ? ['S2', 'Elution', 'Alpha', '9l', null] : row
  );

  it('counts in place of what stands in the file, which stays as it came', async () => {
    const id = await receive(faulty);
    const { window, errorCount } = await preview(id);
    expect(errorCount).toBe(1);
    await mendCell(bench.actor, bench.code, id, { sheet: window?.name ?? '', cell: 'd3', text: ' 91 ' });
    const after = await preview(id);
    expect(after.errorCount).toBe(0);
    expect(after.map?.mends).toEqual([{ sheet: window?.name, cell: 'D3', text: '91', original: '9l' }]);
    await store(id);
    expect((await bench.result(number, 'Alpha')).mean).toBeCloseTo(92, 12);
    expect((await importFile(bench.actor, bench.code, id)).bytes.toString('utf8')).toContain('9l');
  });

  it('is read as it stands again when the mend is taken back', async () => {
    const id = await receive(faulty);
    const sheet = (await preview(id)).window?.name ?? '';
    await mendCell(bench.actor, bench.code, id, { sheet, cell: 'D3', text: '91' });
    await unmendCell(bench.actor, bench.code, id, { sheet, cell: 'D3' });
    expect((await preview(id)).errorCount).toBe(1);
  });

  it('keeps what two people mend at the same moment', async () => {
    const id = await receive(faulty);
    const sheet = (await preview(id)).window?.name ?? '';
    await Promise.all([
      mendCell(bench.actor, bench.code, id, { sheet, cell: 'D3', text: '91' }),
      mendCell(bench.actor, bench.code, id, { sheet, cell: 'D4', text: '80' })
    ]);
    expect((await mapOf(id)).mends.map(({ cell }) => cell).sort()).toEqual(['D3', 'D4']);
  });

  it('is not possible any more once the file is stored', async () => {
    const id = await receive(table);
    const sheet = (await preview(id)).window?.name ?? '';
    await store(id);
    const mend = mendCell(bench.actor, bench.code, id, { sheet, cell: 'D3', text: '1' });
    await expect(mend).rejects.toBeInstanceOf(Conflict);
  });
});

describe('a kept layout', () => {
  async function changedFile(name: string, first: number): Promise<string> {
    return receive(
      table.map((row, index) => (index === 0 ? row : [row[0] ?? '', 'Elution', 'Alpha', 1, first + index])),
      name
    );
  }
  async function keepIt(): Promise<string> {
    const id = await changedFile('first.csv', 80);
    const sheet = (await preview(id)).window?.name ?? '';
    const column = { analyte: null, basis: null, unit: null };
    for (const each of [
      { ...column, column: 3, means: 'ignored' as const },
      { ...column, column: 4, means: 'amount' as const, basis: 'ng' as const, unit: 'ng' }
    ])
      await changeMap(bench.actor, bench.code, id, { what: 'column', sheet, column: each });
    await keepColumnMap(bench.actor, bench.code, id, 'Instrument 1');
    return id;
  }

  it('is applied by itself to the next file of the layout, and what was stored stays as it was read', async () => {
    await store(await keepIt());
    const next = await changedFile('second.csv', 90);
    const { map, records } = await preview(next);
    expect(map).toMatchObject({ source: 'kept', kept: { name: 'Instrument 1', version: 1 } });
    expect(records.map(({ value }) => value)).toEqual([91, 92, 93, 94, 95]);
    await store(next);
    const [layout] = await listColumnMaps(bench.actor);
    await setColumnMapRetired(bench.actor, layout?.id ?? '', true);
    expect((await preview(next)).records.map(({ value }) => value)).toEqual([91, 92, 93, 94, 95]);
    expect((await mapOf(await changedFile('third.csv', 70))).source).toBe('recognised');
  });

  it('gets a version at each keeping, under whatever capitals', async () => {
    const id = await keepIt();
    expect(await keepColumnMap(bench.actor, bench.code, id, 'INSTRUMENT 1')).toBe(2);
    expect(await listColumnMaps(bench.actor)).toMatchObject([{ name: 'Instrument 1', version: 2 }]);
  });

  it('is of one lab', async () => {
    await keepIt();
    const stranger = await makeMember({ role: 'chemist' });
    expect(await listColumnMaps(stranger)).toEqual([]);
    const [layout] = await listColumnMaps(bench.actor);
    await expect(setColumnMapRetired(stranger, layout?.id ?? '', true)).rejects.toBeInstanceOf(NotFound);
  });
});

describe('who may', () => {
  it('is not a reviewer, and nobody of another lab', async () => {
    const id = await receive(table);
    const lab = await Lab.findByPk(bench.actor.labId);
    if (!lab) throw new Error('the bench has no lab');
    const reviewer = await makeMember({ role: 'reviewer', lab });
    const stranger = await makeMember({ role: 'chemist' });
    const mend = { sheet: 'x', cell: 'A1', text: '' };
    await expect(mendCell(reviewer, bench.code, id, mend)).rejects.toBeInstanceOf(Forbidden);
    await expect(mendCell(stranger, bench.code, id, mend)).rejects.toBeInstanceOf(NotFound);
    await expect(resetMap(stranger, bench.code, id)).rejects.toBeInstanceOf(NotFound);
    await expect(keepColumnMap(reviewer, bench.code, id, 'x')).rejects.toBeInstanceOf(Forbidden);
    await expect(annotatedImport(stranger, bench.code, id)).rejects.toBeInstanceOf(NotFound);
  });
});

describe('a copy to mend', () => {
  it('has each problem at its cell', async () => {
    const id = await receive(
      table.map((row, index) => (index === 2 ? ['S2', 'Elution', 'Alpha', '9l', null] : row))
    );
    const { bytes, fileName } = await annotatedImport(bench.actor, bench.code, id);
    expect(fileName).toBe('run-to-mend.xlsx');
    const book = new ExcelJS.Workbook();
    await book.xlsx.load(bytes as unknown as ArrayBuffer);
    const copy = book.worksheets[1];
    expect(copy?.getCell('D3').value).toBe('9l');
    expect(copy?.getCell('D3').note).toBeDefined();
    expect(copy?.getCell('D2').note).toBeUndefined();
  });
});

describe('a corrected file', () => {
  const first: readonly Row[] = [
    ['Sample', 'Fraction', 'Analyte', 'Amount (ng)'],
    ['S1', 'Elution', 'Alpha', 90],
    ['S2', 'Elution', 'Alpha', 91],
    ['S3', 'Elution', 'Alpha', 92],
    ['S1', 'Elution', 'Beta', 50]
  ];
  const corrected: readonly Row[] = [
    ['Sample', 'Fraction', 'Analyte', 'Amount (ng)'],
    ['S1', 'Elution', 'Alpha', 90],
    ['S2', 'Elution', 'Alpha', 95],
    ['S4', 'Elution', 'Alpha', 93]
  ];

  it('is shown as a difference against what counts', async () => {
    await store(await receive(first));
    const { difference } = await preview(await receive(corrected, 'corrected.csv'));
    expect(difference).toMatchObject({
      changed: 1,
      added: 1,
      gone: 2,
      same: 1,
      files: [{ fileName: 'run.csv' }]
    });
    expect(
      difference?.rows.map(({ kind, place, analyte, before, after }) => [
        kind,
        place,
        analyte,
        before.map(({ reported }) => reported),
        after.map(({ reported }) => reported)
      ])
    ).toEqual([
      ['changed', 'S2, Elution', 'Alpha', [91], [95]],
      ['gone', 'S3, Elution', 'Alpha', [92], []],
      ['gone', 'S1, Elution', 'Beta', [50], []],
      ['added', 'S4, Elution', 'Alpha', [], [93]]
    ]);
    expect(difference?.rows[0]?.before[0]?.where).toBe('run.csv, D3');
  });

  it('leaves what it holds nothing for counting, unless it takes the place of the file as a whole', async () => {
    const old = await receive(first);
    await store(old);
    await store(await receive(corrected, 'corrected.csv'));
    expect((await bench.result(number, 'Alpha')).n).toBe(4);
    const whole = await receive([...corrected, ['S5', 'Elution', 'Alpha', 94]], 'whole.csv');
    await expect(
      storeImport(bench.actor, bench.code, whole, { questionsConfirmed: true, reason: '', supersedes: [old] })
    ).rejects.toBeInstanceOf(Invalid);
    await storeImport(bench.actor, bench.code, whole, {
      questionsConfirmed: true,
      reason: 'integrated again',
      supersedes: [old]
    });
    // By hand: S1, S2, S4 and S5 count; S3 stood in the superseded file alone.
    expect((await bench.result(number, 'Alpha')).mean).toBeCloseTo((90 + 95 + 93 + 94) / 4, 12);
    expect((await bench.result(number, 'Beta')).n ?? 0).toBe(0);
  });

  it("does not take the place of somebody else's file for an analyst", async () => {
    const old = await receive(first);
    await store(old);
    const lab = await Lab.findByPk(bench.actor.labId);
    if (!lab) throw new Error('the bench has no lab');
    const analyst = await makeMember({ role: 'analyst', lab });
    const id = await receive(corrected, 'corrected.csv');
    const input = { questionsConfirmed: true, reason: 'integrated again', supersedes: [old] };
    await expect(storeImport(analyst, bench.code, id, input)).rejects.toBeInstanceOf(Forbidden);
    expect((await bench.result(number, 'Alpha')).n).toBe(3);
  });
});
