import { randomBytes } from 'node:crypto';
import fs from 'node:fs';
import os from 'node:os';
import path from 'node:path';
import { ensureBuild } from './setup/build.mjs';
import {
  ensureChromium,
  ensureNodePackages,
  ensurePostgres,
  ensureReferencePrograms,
  ensureSynced
} from './setup/dependencies.mjs';
import { closeInOrder } from './setup/interruption.mjs';
import { Refusal, runCommand } from './setup/refusal.mjs';
import { freePort, nodeVersionProblem } from './setup/settings.mjs';
import { runStep } from './setup/steps.mjs';
import { closingLine, countSuite, playwrightCounts, sumCounts, vitestCounts } from './setup/test-counts.mjs';
import { startThrowawayPostgres } from './setup/throwaway-postgres.mjs';

/*
 * npm test: installs what is missing, then static checks beside unit tests, integration tests, component tests, build,
 * browser tests. The last line sums them all. Nothing is installed when this file begins: it uses Node alone.
 */
const root = path.resolve(import.meta.dirname, '..');
const closers = closeInOrder({ exitCode: 1 });
const node = process.execPath;
const reports = fs.mkdtempSync(path.join(os.tmpdir(), 'headwater-reports-'));
closers.add(() => fs.rmSync(reports, { recursive: true, force: true }));

await runCommand(async () => {
  try {
    await run();
  } finally {
    await closers.close();
  }
});

async function run() {
  const nodeProblem = nodeVersionProblem(process.versions.node);
  if (nodeProblem) throw new Refusal(nodeProblem);
  const ownServer = process.env.DATABASE_URL?.trim() || null;
  if (!ownServer) await ensurePostgres();
  await ensureChromium();
  await ensureReferencePrograms();
  await ensureNodePackages(root);
  await ensureSynced(root, true);

  const server = ownServer ? { url: ownServer, stop: () => {} } : await startThrowawayPostgres();
  closers.add(server.stop);
  const env = { ...process.env, DATABASE_URL: server.url, NODE_ENV: 'test', NO_COLOR: '1' };

  const counts = [];
  const [checks, unit] = await Promise.all([staticChecks(env), vitest('unit', env)]);
  counts.push(checks, unit);
  counts.push(await vitest('integration', env));
  counts.push(await vitest('component', env));
  counts.push(await browserTests(server.url, env));

  const sum = sumCounts(counts);
  if (sum.passed === 0) throw new Refusal('No test was run.');
  if (sum.failed > 0) process.exitCode = 1;
  // Everything is closed before the last line, so that it is the last.
  await closers.close();
  console.log(`\n${closingLine(sum)}`);
}

/** Formatting, lint, types and components: each is one check, its output shown only when it fails. */
async function staticChecks(/** @type {NodeJS.ProcessEnv} */ env) {
  const checks = [
    ['prettier', ['node_modules/prettier/bin/prettier.cjs', '--check', '.']],
    ['eslint', ['node_modules/eslint/bin/eslint.js', '.']],
    [
      'svelte-check',
      ['node_modules/svelte-check/bin/svelte-check', '--tsconfig', './tsconfig.json', '--fail-on-warnings']
    ]
  ];
  const counts = { passed: 0, failed: 0, skipped: 0 };
  for (const [name, args] of /** @type {[string, string[]][]} */ (checks)) {
    const { code, output } = await runStep(node, args, { cwd: root, env });
    if (code === 0) {
      counts.passed += 1;
      console.log(`${name}: passed`);
    } else {
      counts.failed += 1;
      console.log(`${name}: FAILED\n${output.trim()}`);
    }
  }
  return counts;
}

/**
 * @param {'unit' | 'integration' | 'component'} project of vitest.config.ts
 * @param {NodeJS.ProcessEnv} env
 */
async function vitest(project, env) {
  const report = path.join(reports, `${project}.json`);
  const args = [
    'run',
    '--project',
    project,
    '--reporter=dot',
    '--reporter=json',
    `--outputFile.json=${report}`
  ];
  const { code, output } = await runStep(node, ['node_modules/vitest/vitest.mjs', ...args], {
    cwd: root,
    env
  });
  const counts = countSuite(report, vitestCounts, code);
  console.log(`${project} tests: ${closingLine(counts)}`);
  if (code !== 0) console.log(output.trim());
  return counts;
}

/**
 * Browser tests, against a server started by npm start's own script on a database of its own with the demo lab.
 * @param {string} serverUrl
 * @param {NodeJS.ProcessEnv} env
 */
async function browserTests(serverUrl, env) {
  await ensureBuild(root);
  const name = `headwater_test_${process.pid}_${randomBytes(3).toString('hex')}_browser`;
  await onDatabaseServer(serverUrl, `CREATE DATABASE ${name} ENCODING 'UTF8' TEMPLATE template0`);
  const drop = () => onDatabaseServer(serverUrl, `DROP DATABASE IF EXISTS ${name} WITH (FORCE)`);
  closers.add(drop);
  const folder = fs.mkdtempSync(path.join(os.tmpdir(), 'headwater-e2e-'));
  closers.add(() => fs.rmSync(folder, { recursive: true, force: true }));
  const url = new URL(serverUrl);
  url.pathname = `/${name}`;
  const report = path.join(reports, 'browser.json');
  const { code, output } = await runStep(
    node,
    ['node_modules/@playwright/test/cli.js', 'test', '--reporter=list,json'],
    {
      cwd: root,
      env: {
        ...env,
        NODE_ENV: 'production',
        DATABASE_URL: url.href,
        E2E_PORT: String(await freePort()),
        E2E_DATA_DIR: folder,
        PLAYWRIGHT_JSON_OUTPUT_NAME: report
      }
    }
  );
  const counts = countSuite(report, playwrightCounts, code);
  console.log(`browser tests: ${closingLine(counts)}`);
  if (code !== 0) console.log(output.trim());
  return counts;
}

/**
 * @param {string} serverUrl
 * @param {string} statement
 */
async function onDatabaseServer(serverUrl, statement) {
  // Installed by now, unlike when this file began.
  const { default: pg } = await import('pg');
  const client = new pg.Client({ connectionString: serverUrl });
  await client.connect();
  try {
    await client.query(statement);
  } finally {
    await client.end();
  }
}
