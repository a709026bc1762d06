import path from 'node:path';
import { ensureBuild } from './setup/build.mjs';
import { ensureNodePackages, ensurePostgres, ensureSynced } from './setup/dependencies.mjs';
import { closeInOrder } from './setup/interruption.mjs';
import { Refusal, runCommand } from './setup/refusal.mjs';
import { runStep } from './setup/steps.mjs';
import { startThrowawayPostgres } from './setup/throwaway-postgres.mjs';

/*
 * npm run bench [words]: runs the benchmarks of tests/bench whose names hold one of the words (or all) and prints a
 * table. The database is a throw-away one with durable settings, since storing is part of what is measured.
 */
const root = path.resolve(import.meta.dirname, '..');
const closers = closeInOrder({ exitCode: 1 });

await runCommand(async () => {
  try {
    await ensurePostgres();
    await ensureNodePackages(root);
    await ensureSynced(root);
    await ensureBuild(root);
    const server = await startThrowawayPostgres({ durable: true });
    closers.add(server.stop);
    const { code } = await runStep(
      process.execPath,
      ['--expose-gc', '--import', 'tsx', 'scripts/run-benchmarks.ts', ...process.argv.slice(2)],
      { cwd: root, env: { ...process.env, DATABASE_URL: server.url, LOG_LEVEL: 'silent' }, show: true }
    );
    if (code !== 0) throw new Refusal('A benchmark failed or missed its goal.');
  } finally {
    await closers.close();
  }
});
