import { Readable } from 'node:stream';
import { pipeline } from 'node:stream/promises';
import { Client } from 'pg';
import { from as copyFrom } from 'pg-copy-streams';
import { newId } from '../../src/lib/server/db/entity-id';
import { copyLine, copyMeasurements, type NewMeasurement } from '../../src/lib/server/db/measurement-copy';
import { inTransaction } from '../../src/lib/server/db/transaction';
import { makeMember } from '../factories/member';
import { makeReceivedImport } from '../factories/stored-import';
import { makeStudy } from '../factories/study';
import { mediansInTurn, type BenchContext, type Benchmark, type BenchResult } from './benchmark';

const count = 250_000;
const analytes = 150;
const pieceLength = 64 * 1024;

/** Areas of 250 000 measurements of one import: an injection every 150 of them, four experiments. */
function areas(labId: string, importId: string): NewMeasurement[] {
  const ids = (number: number): string[] => Array.from({ length: number }, newId);
  const [analyteIds, injectionIds] = [ids(analytes), ids(Math.ceil(count / analytes))];
  const experimentIds = ids(4);
  const internalAnalyteId = newId();
  return Array.from({ length: count }, (_, row): NewMeasurement => {
    const reported = ((row * 7919) % 999_983) + 0.25;
    return {
      labId,
      importId,
      injectionId: injectionIds[Math.floor(row / analytes)] ?? '',
      experimentId: experimentIds[Math.floor((4 * row) / count)] ?? null,
      calibrationSetId: null,
      analyteId: analyteIds[row % analytes] ?? '',
      basis: 'area',
      state: 'value',
      reported,
      internalArea: ((row * 104_729) % 99_991) + 0.5,
      internalAnalyteId,
      limitValue: null,
      rawText: String(reported),
      sheet: 1,
      sheetRow: row + 2,
      sheetColumn: 4
    };
  });
}

/** The program's own storing, committed, against the same text sent to a table of the same columns, checks and indexes. */
async function storing(context: BenchContext): Promise<BenchResult> {
  process.env.DATABASE_URL = await context.createDatabase({ demo: false });
  process.env.AUTH_SECRET ??= 'a-secret-that-guards-nothing-but-benchmarks';
  const actor = await makeMember();
  const { study } = await makeStudy(actor);
  const received = await makeReceivedImport(actor, study);
  const rows = areas(actor.labId, received.id);
  const text = Buffer.from(rows.map(copyLine).join(''));

  const client = new Client({ connectionString: process.env.DATABASE_URL });
  await client.connect();
  await client.query('CREATE TABLE bare (LIKE measurements INCLUDING ALL)');
  const { rows: named } = await client.query<{ names: string }>(
    `SELECT string_agg(column_name, ', ' ORDER BY ordinal_position) AS names FROM information_schema.columns
      WHERE table_schema = 'public' AND table_name = 'bare' AND column_name <> 'id'`
  );
  const names = named[0]?.names ?? '';
  function* pieces(): Generator<Buffer> {
    for (let at = 0; at < text.length; at += pieceLength) yield text.subarray(at, at + pieceLength);
  }
  const bare = async (): Promise<void> => {
    const stream = client.query(copyFrom(`COPY bare (${names}) FROM STDIN`));
    await pipeline(Readable.from(pieces(), { objectMode: false }), stream);
  };
  const ours = async (): Promise<void> => {
    const stored = await inTransaction(actor, {}, () => copyMeasurements(rows));
    if (stored !== count) throw new Error(`${stored} measurements were stored instead of ${count}`);
  };
  // Both tables grow alike.
  const [floor = NaN, figure = NaN] = await mediansInTurn([bare, ours], { runs: 5, warmUps: 1 });
  await client.end();
  return { figure, floor, unit: 'ms' };
}

export const benchmarks: readonly Benchmark[] = [
  {
    name: `store ${count} measurements, against a bare COPY of the same text`,
    goal: { ratio: 1.3, is: 'at most' },
    run: storing
  }
];
