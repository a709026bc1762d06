import { Sequelize, type Options } from 'sequelize';
import { config } from '../config';
import { logger } from '../logger';
import { onShutdown } from '../shutdown';
import { transactionStore } from './transaction-store';

/** What Sequelize asks of a store that carries the running transaction: `get`, `set`, `run`, `bind`. */
const namespace = {
  get: (key: string): unknown => transactionStore.getStore()?.get(key),
  set: (key: string, value: unknown): void => void transactionStore.getStore()?.set(key, value),
  run: <Result>(work: (context: unknown) => Result): Result =>
    transactionStore.run(new Map(transactionStore.getStore() ?? []), () => work(transactionStore.getStore())),
  bind: <Work>(work: Work): Work => work
};

/** The level asked for, or ten when the variable holds something else: `config()` is the one to complain. */
function poolSize(): number {
  const asked = Number(process.env.DATABASE_POOL);
  return Number.isInteger(asked) && asked > 0 ? asked : 10;
}

/** Where the database is, in the fields that the driver takes. */
function connection(databaseUrl: string) {
  const url = new URL(databaseUrl);
  const sslMode = url.searchParams.get('sslmode');
  const verified = sslMode === 'verify-ca' || sslMode === 'verify-full';
  return {
    host: url.searchParams.get('host') ?? decodeURIComponent(url.hostname.replace(/^\[|\]$/g, '')),
    port: url.port || '5432',
    username: decodeURIComponent(url.username) || 'postgres',
    password: decodeURIComponent(url.password),
    database: decodeURIComponent(url.pathname.replace(/^\//, '')),
    ...(sslMode && sslMode !== 'disable' ? { ssl: { rejectUnauthorized: verified } } : {})
  };
}

function createSequelize(): Sequelize {
  const options: Options = {
    dialect: 'postgres',
    // The connection string is read at the first connection, so that a build needs no configuration.
    hooks: {
      beforeConnect: (target) => {
        const { ssl, ...fields } = connection(config().databaseUrl);
        Object.assign(target, fields);
        if (ssl) Object.assign(target, { dialectOptions: { ...target.dialectOptions, ssl } });
      }
    },
    dialectOptions: { application_name: 'headwater' },
    pool: { max: poolSize(), min: 0, idle: 10_000, acquire: 30_000 },
    define: { underscored: true },
    // Statements repeat measured data and personal data: they are never logged, only how many there were.
    logging: logger.isLevelEnabled('trace') ? () => logger.trace('statement') : false
  };
  Sequelize.useCLS(namespace);
  return new Sequelize(options);
}

// A module that is loaded anew during development keeps the pool it had.
const shared = globalThis as typeof globalThis & { headwaterSequelize?: Sequelize };

/** The one connection pool of this process. */
export const sequelize: Sequelize = (shared.headwaterSequelize ??= createSequelize());

onShutdown('database', 'connection pool', closeDatabase);

/** Closes the pool, last of all things; the process opens none again. */
export async function closeDatabase(): Promise<void> {
  delete shared.headwaterSequelize;
  await sequelize.close();
}
