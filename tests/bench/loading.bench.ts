import { Client, type PoolClient } from 'pg';
import { Sequelize } from 'sequelize';
import { readExperimentMeasurements } from '../../src/lib/server/db/measurement-read';
import { transactionStore } from '../../src/lib/server/db/transaction-store';
import { mediansInTurn, type BenchContext, type Benchmark } from './benchmark';

const analytes = 150;
const injections = 60;
const perExperiment = analytes * injections;
/** Experiments of the small and of the large database. */
const scales = { small: 12, large: 223 } as const;

/** Ids that follow from what they stand for, in SQL. */
const id = (kind: string, number: string): string => `md5('${kind} ' || (${number}))::uuid`;
const lab = id('lab', '1');

/*
 * Rows without the labs, studies and people above them: reading asks nothing of those. The experiments lie one behind the other in
 * the table, as imports bring them, each in a study of its own.
 */
const filling = (experiments: number): string => `
DO $$ DECLARE item record; BEGIN
  FOR item IN SELECT conrelid::regclass AS holder, conname FROM pg_constraint
    WHERE contype = 'f' AND conrelid::regclass::text IN ('imports', 'extracts', 'injections')
  LOOP EXECUTE format('ALTER TABLE %s DROP CONSTRAINT %I', item.holder, item.conname); END LOOP;
END $$;
ALTER TABLE measurements DISABLE TRIGGER USER;
INSERT INTO imports (id, lab_id, study_id, file_name, file_bytes, byte_size, sha256, state, stored_order, received_by)
  SELECT ${id('import', 'e')}, ${lab}, ${id('study', 'e')}, 'areas.xlsx', '\\x00', 1, repeat('0', 64), 'stored', e, ${id('user', '1')}
  FROM generate_series(1, ${experiments}) e;
INSERT INTO extracts (id, lab_id, study_id, import_id, experiment_id, replicate_id, final_volume_ml)
  SELECT ${id('extract', 'i')}, ${lab}, ${id('study', 'e')}, ${id('import', 'e')}, ${id('experiment', 'e')}, ${id('replicate', 'i')}, 0.5
  FROM generate_series(1, ${experiments * injections}) i, LATERAL (SELECT 1 + (i - 1) / ${injections} AS e) of;
INSERT INTO injections (id, lab_id, study_id, import_id, sequence_id, position, kind, extract_id)
  SELECT ${id('injection', 'i')}, ${lab}, ${id('study', 'e')}, ${id('import', 'e')}, ${id('sequence', 'e')}, i, 'extract', ${id('extract', 'i')}
  FROM generate_series(1, ${experiments * injections}) i, LATERAL (SELECT 1 + (i - 1) / ${injections} AS e) of;
INSERT INTO measurements (lab_id, import_id, injection_id, experiment_id, analyte_id, basis, state, reported, internal_area,
    internal_analyte_id, raw_text, sheet, sheet_row, sheet_column)
  SELECT ${lab}, ${id('import', 'e')}, ${id('injection', 'i')}, ${id('experiment', 'e')}, ${id('analyte', 'a')}, 'area', 'value',
    m * 17 % 999983 + 0.25, m * 13 % 99991 + 0.5, ${id('analyte', '0')}, (m * 17 % 999983 + 0.25)::text, 1, m % ${perExperiment} + 2, 4
  FROM generate_series(0, ${experiments * perExperiment - 1}) m,
    LATERAL (SELECT m / ${perExperiment} + 1 AS e, m / ${analytes} + 1 AS i, m % ${analytes} + 1 AS a) of;
ANALYZE`;

interface Filled {
  /** One experiment in the middle of the table, through the program's own reading and connection. */
  readonly read: () => Promise<void>;
  /** The same rows of the same table as arrays and nothing more. */
  readonly floor: () => Promise<void>;
  readonly close: () => Promise<void>;
}

function requireAll(found: number): void {
  if (found !== perExperiment) throw new Error(`${found} measurements were read instead of ${perExperiment}`);
}

async function filled(context: BenchContext, experiments: number): Promise<Filled> {
  const url = await context.createDatabase({ demo: false });
  const client = new Client({ connectionString: url });
  await client.connect();
  await client.query(filling(experiments));
  const middle = String(Math.ceil(experiments / 2));
  const { rows } = await client.query<{ labId: string; studyId: string; experimentId: string }>(
    `SELECT ${lab} AS "labId", ${id('study', middle)} AS "studyId", ${id('experiment', middle)} AS "experimentId"`
  );
  const [where] = rows;
  if (!where) throw new Error('the database gave no ids');

  const pool = new Sequelize(url, { dialect: 'postgres', logging: false });
  const manager = pool.connectionManager as unknown as {
    getConnection(options: { type: 'SELECT' }): Promise<PoolClient>;
    releaseConnection(connection: PoolClient): void;
  };
  const connection = await manager.getConnection({ type: 'SELECT' });
  return {
    read: () =>
      transactionStore.run(new Map([['transaction', { connection }]]), async () => {
        const found = await readExperimentMeasurements({ ...where, experimentIds: [where.experimentId] });
        requireAll(found.length);
      }),
    floor: async () => {
      const found = await client.query({
        text: `SELECT id, analyte_id, basis, state, reported, internal_area, internal_analyte_id, limit_value, raw_text, sheet,
            sheet_row, sheet_column, import_id, injection_id
          FROM measurements WHERE experiment_id = $2 AND lab_id = $1`,
        values: [where.labId, where.experimentId],
        rowMode: 'array'
      });
      requireAll(found.rows.length);
    },
    close: async () => {
      manager.releaseConnection(connection);
      await pool.close();
      await client.end();
    }
  };
}

interface Times {
  readonly small: number;
  readonly large: number;
  readonly floor: number;
}

let measured: Promise<Times> | null = null;

function timesOnce(context: BenchContext): Promise<Times> {
  measured ??= (async () => {
    const small = await filled(context, scales.small);
    const large = await filled(context, scales.large);
    const works = [small.floor, small.read, large.read];
    const [floor = NaN, ...both] = await mediansInTurn(works, { runs: 21, warmUps: 5 });
    await Promise.all([small.close(), large.close()]);
    return { floor, small: both[0] ?? NaN, large: both[1] ?? NaN };
  })();
  return measured;
}

const rowsOf = (experiments: number): string => (experiments * perExperiment).toLocaleString('en');

export const benchmarks: readonly Benchmark[] = [
  {
    name: `load one experiment of ${perExperiment} measurements, against its rows as arrays`,
    goal: { ratio: 1.3, is: 'at most' },
    run: async (context) => {
      const { small, floor } = await timesOnce(context);
      return { figure: small, floor, unit: 'ms' };
    }
  },
  {
    name: `load it from a table of ${rowsOf(scales.large)}, against one of ${rowsOf(scales.small)}`,
    goal: { ratio: 1.2, is: 'at most' },
    run: async (context) => {
      const { small, large } = await timesOnce(context);
      return { figure: large, floor: small, unit: 'ms' };
    }
  }
];
