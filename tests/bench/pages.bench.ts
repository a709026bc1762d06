import { readFileSync } from 'node:fs';
import { resolve } from 'node:path';
import { Readable } from 'node:stream';
import { pipeline } from 'node:stream/promises';
import { gzipSync } from 'node:zlib';
import { Client } from 'pg';
import { from as copyFrom } from 'pg-copy-streams';
import { largeInjections, largeSubstances } from '../../seeders/demo/large-study';
import { writeWorkbook } from '../../seeders/demo/workbooks';
import { hashPassword, isPassword } from '../../src/lib/server/auth/passwords';
import { median, medianMs, type BenchContext, type Benchmark, type BenchResult } from './benchmark';
import { inflateAndScan } from './reading.bench';
import { serveLab, Visitor, type ServedLab } from './served-lab';

const large = '/studies/SIZE-150';

/** The demo lab is seeded and served once for all benchmarks of this file. */
let served: Promise<{ readonly lab: ServedLab; readonly databaseUrl: string }> | null = null;

async function demoLab(context: BenchContext): Promise<{ lab: ServedLab; databaseUrl: string }> {
  served ??= (async () => {
    const databaseUrl = await context.createDatabase({ demo: true });
    const lab = await serveLab(databaseUrl);
    process.once('exit', () => void lab.stop());
    return { lab, databaseUrl };
  })();
  return served;
}

/** From the sign-in form to the mass balance, against checking the password and serving a bare signed-in page. */
async function signInToFirstTable(context: BenchContext): Promise<BenchResult> {
  const { lab } = await demoLab(context);
  const visitor = new Visitor(lab.origin);
  await visitor.signIn('chemist');
  const cold = performance.now();
  await visitor.page('/studies/TARROW-1/balance');
  context.note(
    `mass balance of the demo study, figures not formed yet: ${(performance.now() - cold).toFixed(0)} ms`
  );

  const hash = await hashPassword('brown herons wade');
  const password = await medianMs(() => isPassword('brown herons wade', hash));
  const bare = await medianMs(() => visitor.page('/account'));
  const figure = await medianMs(async () => {
    const somebody = new Visitor(lab.origin);
    await somebody.signIn('chemist');
    await somebody.page('/studies/TARROW-1/balance');
  });
  return { figure, floor: password + 2 * bare, unit: 'ms' };
}

/** The mass balance of 150 analytes, figures formed, against a bare page of the same person and compressing the same HTML. */
async function largePage(context: BenchContext): Promise<BenchResult> {
  const { lab } = await demoLab(context);
  const visitor = new Visitor(lab.origin);
  await visitor.signIn('chemist');
  const bare = await medianMs(() => visitor.page('/account'));
  const html = await visitor.page(`${large}/balance`);
  const compressing = await medianMs(() => gzipSync(html));
  const figure = await medianMs(() => visitor.page(`${large}/balance`));
  context.note(`the HTML of that page: ${(html.length / 1024).toFixed(0)} kB`);
  return { figure, floor: bare + compressing, unit: 'ms' };
}

async function copyFloor(databaseUrl: string, rows: number): Promise<number> {
  const client = new Client({ connectionString: databaseUrl });
  await client.connect();
  try {
    await client.query(
      'CREATE TEMPORARY TABLE floor (LIKE measurements INCLUDING DEFAULTS INCLUDING INDEXES)'
    );
    const id = '01a23184-6061-76b8-ae5d-a1f880f6a969';
    const line = (row: number): string =>
      `${id}\t${row}\t${id}\t${id}\t${id}\t\\N\t${id}\tarea\tvalue\t${row}.5\t12345.5\t${id}\t\\N\t${row}.5\t1\t${row % 32_000}\t8\n`;
    const text = Array.from({ length: rows }, (_, row) => line(row + 1)).join('');
    return await medianMs(
      async () => {
        await client.query('TRUNCATE floor');
        await pipeline(
          Readable.from([text], { objectMode: false }),
          client.query(copyFrom('COPY floor FROM STDIN'))
        );
      },
      { runs: 5, warmUps: 1 }
    );
  } finally {
    await client.end();
  }
}

interface Visit {
  readonly analyst: Visitor;
  readonly bytes: Buffer;
}

/** A file of the large study's size with numbers of its own, and somebody to bring it. */
async function visit(lab: ServedLab, seed: number): Promise<Visit> {
  const analyst = new Visitor(lab.origin);
  await analyst.signIn('analyst');
  const bytes = await writeWorkbook('Invented bench data', 'long', largeInjections(seed), largeSubstances);
  return { analyst, bytes };
}

/** From the first byte sent to the mass balance that rests on it. */
async function upload({ analyst, bytes }: Visit): Promise<{ readonly ms: number; readonly count: number }> {
  const begun = performance.now();
  const form = new FormData();
  form.set('file', new Blob([new Uint8Array(bytes)]), 'bench-run.xlsx');
  const received = (await analyst.send(`${large}/data?/upload`, form)).headers.get('location') ?? '';
  const preview = await analyst.page(received);
  const count = Number(/Store ([\d,]+) values/.exec(preview)?.[1]?.replaceAll(',', '') ?? NaN);
  if (!Number.isFinite(count)) throw new Error('the preview offers nothing to store');
  const answer = await analyst.send(
    `${received}?/store`,
    new URLSearchParams({ questions: 'confirmed', reason: 'measured anew for the benchmark' })
  );
  if (answer.status !== 303) throw new Error(`storing answered ${answer.status}`);
  await analyst.page(`${large}/balance`);
  return { ms: performance.now() - begun, count };
}

/** The median of three uploads with nobody else about, after one that is not counted, as its floors are medians of warm runs. */
async function uploadAlone(context: BenchContext): Promise<BenchResult> {
  const { lab, databaseUrl } = await demoLab(context);
  const times: number[] = [];
  let last: Visit | null = null;
  let count = 0;
  for (const seed of [4710, 4711, 4712, 4713]) {
    last = await visit(lab, seed);
    const uploaded = await upload(last);
    times.push(uploaded.ms);
    ({ count } = uploaded);
  }
  const [first = NaN, ...counted] = times;
  context.note(`the first upload to a server just started: ${first.toFixed(0)} ms`);
  const readMs =
    last === null ? NaN : await medianMs(() => inflateAndScan(last.bytes), { runs: 5, warmUps: 1 });
  return { figure: median(counted), floor: readMs + (await copyFloor(databaseUrl, count)), unit: 'ms' };
}

/** A signed-in page asked for again and again, before and during an upload. */
async function pageMeanwhile(context: BenchContext): Promise<BenchResult> {
  const { lab } = await demoLab(context);
  const reader = new Visitor(lab.origin);
  await reader.signIn('reviewer');
  const brought = await visit(lab, 4714);
  const delayOf = async (): Promise<number> => {
    const begun = performance.now();
    await reader.page('/account');
    return performance.now() - begun;
  };
  const quiet: number[] = [];
  for (let turn = 0; turn < 30; turn++) quiet.push(await delayOf());
  const meanwhile: number[] = [];
  let working = true;
  const watching = (async () => {
    while (working) meanwhile.push(await delayOf());
  })();
  await upload(brought);
  working = false;
  await watching;
  context.note(`the slowest of ${meanwhile.length} pages meanwhile: ${atShare(meanwhile, 1).toFixed(0)} ms`);
  return { figure: atShare(meanwhile, 0.95), floor: atShare(quiet, 0.95), unit: 'ms' };
}

const atShare = (values: readonly number[], share: number): number =>
  values.toSorted((a, b) => a - b)[Math.min(values.length - 1, Math.floor(values.length * share))] ?? NaN;

/** JavaScript that the mass-balance page asks for before anybody touches it, gzip, in kB. */
async function scriptWeight(context: BenchContext): Promise<BenchResult> {
  const { lab } = await demoLab(context);
  const visitor = new Visitor(lab.origin);
  await visitor.signIn('chemist');
  const weigh = async (path: string): Promise<number> => {
    const html = await visitor.page(path);
    const scripts = new Set([...html.matchAll(/_app\/immutable\/[\w./-]+\.js/g)].map(([script]) => script));
    let total = 0;
    for (const script of scripts)
      total += readFileSync(resolve('build', 'client', `${script}.gz`)).byteLength;
    return total / 1024;
  };
  return { figure: await weigh('/studies/TARROW-1/balance'), floor: await weigh('/help'), unit: 'kB' };
}

export const benchmarks: readonly Benchmark[] = [
  {
    name: 'sign-in to first table',
    goal: { ratio: 3, is: 'at most' },
    run: signInToFirstTable
  },
  {
    name: 'mass-balance page of 150 analytes against a bare page and compressing it',
    goal: { ratio: 2, is: 'at most' },
    run: largePage
  },
  {
    name: 'upload of 150 analytes × 60 injections, stored and shown, against inflate + scan + COPY',
    goal: { ratio: 3, is: 'at most' },
    run: uploadAlone
  },
  {
    name: 'a signed-in page meanwhile (95 of 100), against before',
    goal: { ratio: 6, is: 'at most' },
    run: pageMeanwhile
  },
  {
    name: 'JavaScript of the mass-balance page (gzip) against a page of text',
    goal: { ratio: 2, is: 'at most' },
    run: scriptWeight
  }
];
