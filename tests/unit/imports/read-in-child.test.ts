import { fork, type ChildProcess } from 'node:child_process';
import { once } from 'node:events';
import { beforeEach, describe, expect, it, vi } from 'vitest';
import { mapRecords } from '../../../src/lib/server/imports/map-records';
import { mapInChild, prepareChild, readInChild } from '../../../src/lib/server/imports/read-in-child';
import { readWorkbook } from '../../../src/lib/server/imports/read-workbook';
import { Refusal } from '../../../src/lib/server/imports/refusal';
import { expectation } from '../../factories/expectation';
import { lyingSize } from '../../fixtures/workbooks/bombs';
import { streamed } from '../../fixtures/workbooks/exceljs-files';

// The real one, counted.
vi.mock('node:child_process', async (importOriginal) => {
  const original = await importOriginal<{ readonly fork: typeof fork }>();
  return { ...original, fork: vi.fn(original.fork) };
});

const rows = [
  ['Sample', 'Fraction', 'Analyte', 'Area', 'Final volume (mL)'],
  ['S1', 'Elution 1', 'Caffeine', 0.1 + 0.2, 1],
  ['S2', 'Elution 1', 'Nobodyine', '48,2l3', 1]
];
const file = (): Promise<Buffer> => streamed({ Areas: rows, Second: [['x']] }, { useSharedStrings: true });

/** A text table of many different numbers: more than a small heap holds. */
const manyTexts = (): Buffer =>
  Buffer.from(Array.from({ length: 900_000 }, (_, index) => `${index},${index}.5`).join('\n'));

async function refusalOf(reading: Promise<unknown>): Promise<Refusal> {
  const error = await reading.catch((reason: unknown) => reason);
  expect(error).toBeInstanceOf(Refusal);
  return error as Refusal;
}

describe('reading in a process of its own', () => {
  it('gives the same workbook as reading here', async () => {
    const bytes = await file();
    expect(await readInChild(bytes)).toEqual(await readWorkbook(bytes));
  }, 60_000);

  it('gives the same records and problems as mapping here', async () => {
    const bytes = await file();
    const { workbook, mapped } = await mapInChild(bytes, expectation());
    expect(mapped).toEqual(mapRecords(workbook, expectation()));
    expect(mapped.records).toHaveLength(1);
    expect(mapped.problems.map(({ code }) => code).sort()).toEqual([
      'looks like a number',
      'sheet not read',
      'unknown analyte'
    ]);
  }, 60_000);

  it('passes a refusal on with its sentence', async () => {
    const refusal = await refusalOf(readInChild(lyingSize()));
    expect(refusal.code).toBe('damaged');
    expect(refusal.message).toContain('larger than it says');
  }, 60_000);

  it('refuses without a process what the first bytes give away', async () => {
    expect(await refusalOf(readInChild(Buffer.alloc(0), { timeoutMs: 0 }))).toMatchObject({ code: 'empty' });
  });

  it('is ended when it takes too long, with a sentence', async () => {
    const refusal = await refusalOf(readInChild(await file(), { timeoutMs: 1 }));
    expect(refusal.code).toBe('took too long');
    expect(refusal.message).toMatch(/^Reading this file took longer .*\.$/);
  }, 60_000);

  it('is ended when it takes too much memory, with a sentence; an ordinary file stays far below', async () => {
    const options = { memoryMb: 64 };
    await expect(readInChild(await file(), options)).resolves.toMatchObject({ kind: 'xlsx' });
    const refusal = await refusalOf(readInChild(manyTexts(), options));
    expect(refusal.code).toBe('took too much memory');
    expect(refusal.message).toMatch(/Nothing was stored/);
  }, 120_000);

  it('can be called off', async () => {
    const calling = new AbortController();
    const reading = readInChild(await file(), { signal: calling.signal });
    calling.abort(new Error('called off'));
    await expect(reading).rejects.toThrow('called off');
    await expect(readInChild(await file(), { signal: calling.signal })).rejects.toThrow('called off');
  }, 60_000);
});

describe('a process prepared for a file that is on its way', () => {
  const started = vi.mocked(fork);
  beforeEach(() => {
    started.mockClear();
  });

  it('is one at most, and reads the next file', async () => {
    const bytes = await file();
    prepareChild();
    prepareChild();
    expect(started).toHaveBeenCalledTimes(1);
    expect(await readInChild(bytes)).toEqual(await readWorkbook(bytes));
    expect(started).toHaveBeenCalledTimes(1);
    await readInChild(bytes);
    expect(started).toHaveBeenCalledTimes(2);
  }, 60_000);

  it('is not waited for when it has ended meanwhile', async () => {
    const bytes = await file();
    prepareChild();
    const child = started.mock.results[0]!.value as ChildProcess;
    child.kill('SIGKILL');
    await once(child, 'exit');
    expect(await readInChild(bytes)).toEqual(await readWorkbook(bytes));
    expect(started).toHaveBeenCalledTimes(2);
  }, 60_000);

  it('is left for another file by a reading that wants other memory', async () => {
    const bytes = await file();
    prepareChild();
    await readInChild(bytes, { memoryMb: 300 });
    expect(started).toHaveBeenCalledTimes(2);
    await readInChild(bytes);
    expect(started).toHaveBeenCalledTimes(2);
  }, 60_000);
});
