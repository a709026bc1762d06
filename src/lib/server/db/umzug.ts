import { resolve } from 'node:path';
import { pathToFileURL } from 'node:url';
import type { QueryInterface, Sequelize } from 'sequelize';
import { Umzug, type UmzugStorage } from 'umzug';

/** A file in migrations/ or seeders/: it goes forward only. */
interface Step {
  readonly up: (parameters: { readonly context: QueryInterface; readonly name: string }) => Promise<void>;
}

const insert = (table: string): string => `INSERT INTO "${table}" (name) VALUES ($1) ON CONFLICT DO NOTHING`;

/** Names of what has been done, in a table of one column. */
function storage(
  sequelize: Sequelize,
  table: 'SequelizeMeta' | 'SequelizeData'
): UmzugStorage<QueryInterface> {
  return {
    executed: async () => {
      await sequelize.query(`CREATE TABLE IF NOT EXISTS "${table}" (name text PRIMARY KEY)`);
      const [rows] = await sequelize.query(`SELECT name FROM "${table}" ORDER BY name`);
      return (rows as { name: string }[]).map((row) => row.name);
    },
    logMigration: async ({ name }) => void (await sequelize.query(insert(table), { bind: [name] })),
    unlogMigration: async () => {
      throw new Error('the schema goes forward only');
    }
  };
}

async function load(path: string): Promise<Step> {
  return (await import(/* @vite-ignore */ pathToFileURL(path).href)) as Step;
}

/**
 * The schema's migrations. Each runs in a transaction that also notes its name, so that one that fails or is cut off
 * leaves nothing behind.
 */
export function migrator(sequelize: Sequelize, folder = resolve('migrations')): Umzug<QueryInterface> {
  return new Umzug<QueryInterface>({
    migrations: {
      glob: ['*.ts', { cwd: folder }],
      resolve: ({ name, path, context }) => ({
        name,
        up: async () => {
          const step = await load(path!);
          await sequelize.transaction(async (transaction) => {
            await step.up({ context, name });
            await sequelize.query(insert('SequelizeMeta'), { bind: [name], transaction });
          });
        }
      })
    },
    context: sequelize.getQueryInterface(),
    storage: storage(sequelize, 'SequelizeMeta'),
    logger: undefined
  });
}

/**
 * The demo data. A seeder goes through the services, which open their own transactions and write the audit chain;
 * files in the folder without `up` are its parts and are passed over by their names.
 */
export function seeder(sequelize: Sequelize, folder = resolve('seeders')): Umzug<QueryInterface> {
  return new Umzug<QueryInterface>({
    migrations: {
      glob: ['[0-9]*.ts', { cwd: folder }],
      resolve: ({ name, path, context }) => ({
        name,
        up: async () => (await load(path!)).up({ context, name })
      })
    },
    context: sequelize.getQueryInterface(),
    storage: storage(sequelize, 'SequelizeData'),
    logger: undefined
  });
}
