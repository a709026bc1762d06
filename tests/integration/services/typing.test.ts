import { beforeEach, describe, expect, it } from 'vitest';
import type { Actor } from '../../../src/lib/domain/actor';
import type { Role } from '../../../src/lib/domain/roles';
import { Lab } from '../../../src/lib/server/db/models/lab';
import { Forbidden, Invalid, NotFound } from '../../../src/lib/server/errors';
import { storeImport } from '../../../src/lib/server/services/import-storing';
import { importFile, withdrawImport } from '../../../src/lib/server/services/imports';
import {
  discardTyped,
  handOnTyped,
  keepTyped,
  planTyping,
  typingGrid
} from '../../../src/lib/server/services/typing';
import type { TypedCells } from '../../../src/lib/domain/typed-cells';
import type { TypingView } from '../../../src/lib/views/typing';
import { makeMember } from '../../factories/member';
import { openBench, portions, type Bench } from '../by-hand/bench';

/* What is typed into the grid of an experiment: kept as it is typed, checked as a file is, stored as an import. */

async function inLabOf(role: Role): Promise<Actor> {
  const lab = await Lab.findByPk(bench.actor.labId);
  if (!lab) throw new Error('the bench has no lab');
  return makeMember({ role, lab });
}

let bench: Bench;
let number: number;
let analyst: Actor;

beforeEach(async () => {
  bench = await openBench();
  await bench.entry('Alpha');
  await bench.entry('Beta');
  analyst = await inLabOf('analyst');
  number = await bench.experiment({
    spikes: [{ kind: 'spiked', targetsNg: '100' }],
    replicates: [portions('spiked', ['S1', 'S2', 'S3', 'S4', 'S5'])]
  });
  await planTyping(analyst, bench.code, number, { basis: 'ng', injections: 1 });
});

const grid = (as: Actor = analyst): Promise<TypingView> => typingGrid(as, bench.code, number);

/** Cells by sample and analyte. */
async function cellsOf(typed: Readonly<Record<string, string>>): Promise<TypedCells> {
  const { rows, columns } = await grid();
  const cells: Record<string, Record<string, string>> = {};
  for (const [place, text] of Object.entries(typed)) {
    const [sample, analyte] = place.split(' ');
    const row = rows.find((item) => item.sample === sample && item.injection === 1);
    const column = columns.find(({ label }) => label === analyte);
    if (!row || !column) throw new Error(`the grid has no ${place}`);
    (cells[row.key] ??= {})[column.key] = text;
  }
  return cells;
}

const keep = async (typed: Readonly<Record<string, string>>, as: Actor = analyst): Promise<string> =>
  keepTyped(as, bench.code, number, await cellsOf(typed));

async function textAt(place: string, as: Actor = analyst): Promise<string | undefined> {
  const cells = await cellsOf({ [place]: 'x' });
  const [row = '', own = {}] = Object.entries(cells)[0] ?? [];
  return (await grid(as)).cells[row]?.[Object.keys(own)[0] ?? ''];
}

async function store(): Promise<string> {
  const handed = await handOnTyped(analyst, bench.code, number);
  if (handed.kind !== 'received') throw new Error(JSON.stringify(handed));
  await storeImport(analyst, bench.code, handed.importId, {
    questionsConfirmed: true,
    reason: 'typed again'
  });
  return handed.importId;
}

describe('what is typed', () => {
  it('is kept as it was typed, cell by cell, beside what was typed before', async () => {
    await keep({ 'S1 Alpha': '91,5', 'S2 Alpha': 'ND' });
    await keep({ 'S2 Alpha': '<0.5', 'S1 Beta': '88' });
    await keep({ 'S1 Beta': '' });
    expect(await textAt('S1 Alpha')).toBe('91,5');
    expect(await textAt('S2 Alpha')).toBe('<0.5');
    expect(await textAt('S1 Beta')).toBeUndefined();
  });

  it('belongs to the one who typed it', async () => {
    await keep({ 'S1 Alpha': '91,5' });
    expect(await textAt('S1 Alpha', bench.actor)).toBeUndefined();
    expect((await grid(bench.actor)).keptAt).toBeNull();
  });

  it('loses nothing to another window that keeps at the same moment', async () => {
    const samples = ['S1', 'S2', 'S3', 'S4', 'S5'];
    await Promise.all(samples.map((sample, index) => keep({ [`${sample} Alpha`]: String(90 + index) })));
    expect(await Promise.all(samples.map((sample) => textAt(`${sample} Alpha`)))).toEqual(
      samples.map((_, index) => String(90 + index))
    );
  });

  it('becomes an import whose file is what was typed, and figures once it is stored', async () => {
    await keep({ 'S1 Alpha': '91', 'S2 Alpha': '92', 'S3 Alpha': '93', 'S4 Alpha': '94', 'S5 Alpha': '95' });
    const importId = await store();
    const { bytes, fileName } = await importFile(analyst, bench.code, importId);
    expect(fileName).toBe(`typed-experiment-${number}.csv`);
    expect(bytes.toString('utf8')).toBe(
      `\uFEFF${[
        'Sample,Fraction,Injection,Alpha (ng)',
        'S1,Elution,1,91',
        'S2,Elution,1,92',
        'S3,Elution,1,93',
        'S4,Elution,1,94',
        'S5,Elution,1,95'
      ].join('\r\n')}\r\n`
    );
    // By hand: the mean of 91 to 95 ng of 100 ng.
    expect((await bench.result(number, 'Alpha')).mean).toBeCloseTo(93, 12);
    // Nobody typed anything of Beta, so it is not even missing.
    expect((await bench.result(number, 'Beta')).n ?? 0).toBe(0);
    const after = await grid();
    expect(after.cells).toEqual({});
    expect(after.stored).toMatchObject({ values: 5, by: analyst.name });
  });

  it('takes decimal commas, ND and limits as a file does', async () => {
    await keep({
      'S1 Alpha': '91,5',
      'S2 Alpha': '92,5',
      'S3 Alpha': '93,5',
      'S4 Alpha': '94,5',
      'S5 Alpha': '95,5'
    });
    await store();
    expect((await bench.result(number, 'Alpha')).mean).toBeCloseTo(93.5, 12);
  });

  it('comes back when its import is withdrawn', async () => {
    await keep({ 'S1 Alpha': '91' });
    const importId = await store();
    expect((await grid()).cells).toEqual({});
    await withdrawImport(analyst, bench.code, importId, 'typed into the wrong experiment');
    expect(await textAt('S1 Alpha')).toBe('91');
  });

  it('begins anew after it was stored, without a trace of the old cells', async () => {
    await keep({ 'S1 Alpha': '91' });
    await store();
    await keep({ 'S2 Alpha': '92' });
    expect(await textAt('S1 Alpha')).toBeUndefined();
    expect(await textAt('S2 Alpha')).toBe('92');
  });

  it('is thrown away on demand only', async () => {
    await keep({ 'S1 Alpha': '91' });
    await discardTyped(analyst, bench.code, number);
    expect((await grid()).keptAt).toBeNull();
  });
});

describe('checking', () => {
  it('tells each error at its cell, and receives nothing', async () => {
    await keep({ 'S1 Alpha': '48,2l3', 'S2 Alpha': '92', 'S3 Beta': '9o' });
    const handed = await handOnTyped(analyst, bench.code, number);
    if (handed.kind !== 'mend') throw new Error('it was taken');
    const at = await cellsOf({ 'S1 Alpha': '', 'S3 Beta': '' });
    const places = Object.entries(at).flatMap(([row, own]) =>
      Object.keys(own).map((column) => `${row}:${column}`)
    );
    expect(Object.keys(handed.check.errors).sort()).toEqual(places.sort());
    expect(handed.check.errors[places[0] ?? '']).toContain('48,2l3');
    expect((await grid()).waiting).toBeNull();
  });

  it('asks for the value in place of a formula', async () => {
    await keep({ 'S1 Alpha': '=2+3' });
    const handed = await handOnTyped(analyst, bench.code, number);
    expect(handed).toMatchObject({ kind: 'mend', check: { other: [] } });
    expect(JSON.stringify(handed)).toContain('Type what the formula gives');
  });

  it('says that nothing was typed', async () => {
    await expect(handOnTyped(analyst, bench.code, number)).rejects.toBeInstanceOf(Invalid);
  });
});

describe('who may type', () => {
  it('is not a reviewer', async () => {
    const reviewer = await inLabOf('reviewer');
    await expect(grid(reviewer)).rejects.toBeInstanceOf(Forbidden);
    await expect(keepTyped(reviewer, bench.code, number, {})).rejects.toBeInstanceOf(Forbidden);
  });

  it('is nobody of another lab', async () => {
    const stranger = await makeMember({ role: 'chemist' });
    await expect(grid(stranger)).rejects.toBeInstanceOf(NotFound);
    await expect(handOnTyped(stranger, bench.code, number)).rejects.toBeInstanceOf(NotFound);
  });
});

describe('the grid', () => {
  it('has a row for every injection, and keeps what is typed when it is laid out otherwise', async () => {
    await keep({ 'S1 Alpha': '91' });
    await planTyping(analyst, bench.code, number, { basis: 'ng', injections: 2 });
    expect((await grid()).rows).toHaveLength(10);
    expect(await textAt('S1 Alpha')).toBe('91');
    await planTyping(analyst, bench.code, number, { basis: 'area', injections: 1 });
    const { columns } = await grid();
    expect(columns.map(({ label }) => label)).toEqual([
      'Final volume',
      'Dilution',
      'Aliquot share',
      'Alpha',
      'Beta'
    ]);
    expect(await textAt('S1 Alpha')).toBe('91');
  });
});
