import { AsyncLocalStorage } from 'node:async_hooks';

// Kept over reloads in development: Sequelize holds on to the first one it was given.
const shared = globalThis as typeof globalThis & {
  headwaterTransactions?: AsyncLocalStorage<Map<string, unknown>>;
};

/** Carries the running transaction along everything awaited inside it. */
export const transactionStore: AsyncLocalStorage<Map<string, unknown>> = (shared.headwaterTransactions ??=
  new AsyncLocalStorage());
