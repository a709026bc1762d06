import { fork } from 'node:child_process';
import { readdirSync } from 'node:fs';
import { basename, join, resolve } from 'node:path';
import { pathToFileURL } from 'node:url';
import { Client } from 'pg';
import { build } from 'vite';
import type { BenchContext, Benchmark, BenchResult } from '../tests/bench/benchmark';

/** Runs the benchmarks one after the other and prints one table; ends with code 1 when one fails or misses its goal. */
const folder = resolve('tests', 'bench');
const output = resolve('build', 'bench');
const words = process.argv.slice(2).map((word) => word.toLowerCase());
const serverUrl = process.env.DATABASE_URL ?? '';
const notes: string[] = [];
let databases = 0;

async function createDatabase({ demo }: Readonly<{ demo: boolean }>): Promise<string> {
  databases += 1;
  const name = `headwater_bench_${databases}`;
  const client = new Client({ connectionString: serverUrl });
  await client.connect();
  await client.query(`CREATE DATABASE ${name}`);
  await client.end();
  const url = new URL(serverUrl);
  url.pathname = `/${name}`;
  await migrate(url.href, demo);
  return url.href;
}

function migrate(databaseUrl: string, demo: boolean): Promise<void> {
  return new Promise((done, fail) => {
    const env = {
      ...process.env,
      DATABASE_URL: databaseUrl,
      DEMO_LAB: demo ? 'yes' : 'no',
      AUTH_SECRET: 'a-secret-that-guards-nothing-but-benchmarks'
    };
    const child = fork('scripts/migrate.ts', { execArgv: ['--import', 'tsx'], env });
    child.once('error', fail);
    child.once('exit', (code) => (code === 0 ? done() : fail(new Error('the migrations failed'))));
  });
}

const digits = (value: number): string => (Math.abs(value) >= 100 ? value.toFixed(0) : value.toPrecision(3));

interface Line {
  readonly cells: readonly [string, string, string, string, string, string];
  readonly met: boolean;
}

function line({ name, goal }: Benchmark, { figure, floor, unit }: BenchResult): Line {
  const ratio = figure / floor;
  const met = goal.is === 'at most' ? ratio <= goal.ratio : ratio >= goal.ratio;
  const sign = goal.is === 'at most' ? '≤' : '≥';
  return {
    cells: [
      name,
      `${digits(figure)} ${unit}`,
      `${digits(floor)} ${unit}`,
      digits(ratio),
      `${sign} ${goal.ratio}`,
      met ? 'met' : 'missed'
    ],
    met
  };
}

function table(lines: readonly Line[]): string {
  const rows = [['work', 'figure', 'floor', 'ratio', 'goal', ''], ...lines.map(({ cells }) => [...cells])];
  const widths = rows[0]!.map((_, column) => Math.max(...rows.map((row) => row[column]!.length)));
  return rows
    .map((row) =>
      row
        .map((cell, column) => (column === 0 ? cell.padEnd(widths[column]!) : cell.padStart(widths[column]!)))
        .join('  ')
    )
    .join('\n');
}

/** Built as the server is: what a loader makes of the source while it runs is slower. */
async function built(files: readonly string[]): Promise<readonly string[]> {
  const names = files.map((file) => basename(file, '.ts'));
  await build({
    configFile: false,
    logLevel: 'warn',
    publicDir: false,
    resolve: { alias: { $lib: resolve('src', 'lib') } },
    ssr: { external: true },
    build: {
      ssr: true,
      target: 'node20',
      outDir: output,
      emptyOutDir: true,
      rolldownOptions: {
        input: Object.fromEntries(names.map((name) => [name, join(folder, `${name}.ts`)])),
        output: { entryFileNames: '[name].js' }
      }
    }
  });
  return names.map((name) => join(output, `${name}.js`));
}

const files = readdirSync(folder)
  .filter((file) => file.endsWith('.bench.ts'))
  .sort();
const context: BenchContext = { databaseUrl: serverUrl, createDatabase, note: (text) => notes.push(text) };
const lines: Line[] = [];
let failed = false;
for (const file of await built(files)) {
  const { benchmarks } = (await import(pathToFileURL(file).href)) as {
    benchmarks: readonly Benchmark[];
  };
  for (const benchmark of benchmarks) {
    const wanted = words.length === 0 || words.some((word) => benchmark.name.toLowerCase().includes(word));
    if (!wanted) continue;
    console.error(`measuring: ${benchmark.name}`);
    try {
      lines.push(line(benchmark, await benchmark.run(context)));
    } catch (error) {
      failed = true;
      console.error(error);
    }
  }
}
console.log(`\n${table(lines)}`);
for (const note of notes) console.log(`  ${note}`);
process.exit(failed || lines.some(({ met }) => !met) ? 1 : 0);
