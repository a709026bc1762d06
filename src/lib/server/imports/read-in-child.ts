import { fork } from 'node:child_process';
import type { ChildProcess } from 'node:child_process';
import { existsSync, readFileSync } from 'node:fs';
import { createRequire } from 'node:module';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { pathToFileURL } from 'node:url';
import type { ChildMessage, ChildRequest, ReadingMaps } from './child-messages';
import { readingLimits } from './limits';
import type { ReadingLimits } from './limits';
import { projectRoot } from './project-root';
import { recogniseFile } from './recognise-file';
import { Refusal } from './refusal';
import type { RefusalCode } from './refusal';
import type { Expectation, MappedImport, MappedRecord, Problem, Sheet, Workbook } from './types';

export interface ChildOptions {
  readonly limits?: Partial<ReadingLimits>;
  /** Wall time from the start of the process, in milliseconds. */
  readonly timeoutMs?: number;
  /** The child's JavaScript heap, in MB; with its buffers it may take twice that. */
  readonly memoryMb?: number;
  /** Ends the child. */
  readonly signal?: AbortSignal;
}

const defaults = { timeoutMs: 60_000, memoryMb: 768 } as const;
const memoryLookMs = 250;
const noMaps: ReadingMaps = { given: null, saved: [], mends: [] };

/**
 * Reads an untrusted file in a process of its own, whose memory is capped and which is ended when it takes too long, so that this
 * one goes on answering.
 *
 * @throws Refusal with a plain sentence for what cannot be read; the signal's reason when it was aborted
 */
export async function readInChild(bytes: Uint8Array, options: ChildOptions = {}): Promise<Workbook> {
  return (await run(bytes, null, noMaps, options)).workbook;
}

/**
 * Reads and maps (`mapRecords`) in a process of its own; throws as `readInChild` does.
 *
 * @param options.maps what to read by, where it is not what is recognised
 */
export async function mapInChild(
  bytes: Uint8Array,
  expectation: Expectation,
  { maps = noMaps, ...options }: ChildOptions & { readonly maps?: ReadingMaps } = {}
): Promise<{ readonly workbook: Workbook; readonly mapped: MappedImport }> {
  const { workbook, mapped } = await run(bytes, expectation, maps, options);
  if (!mapped) throw new Refusal('failed', unforeseen);
  return { workbook, mapped };
}

interface Answer {
  readonly workbook: Workbook;
  readonly mapped: MappedImport | null;
}

const unforeseen =
  'Reading this file failed in a way that was not foreseen. Nothing was stored; the file may be damaged.';

async function run(
  bytes: Uint8Array,
  expectation: Expectation | null,
  maps: ReadingMaps,
  options: ChildOptions
): Promise<Answer> {
  const limits = { ...readingLimits, ...options.limits };
  // What its first bytes give away needs no process.
  recogniseFile(Buffer.from(bytes.buffer, bytes.byteOffset, bytes.byteLength), limits);
  options.signal?.throwIfAborted();
  const { timeoutMs = defaults.timeoutMs, memoryMb = defaults.memoryMb } = options;
  const { child, ready } = takePrepared(memoryMb) ?? startChild(memoryMb);
  return new Promise((resolve, reject) => {
    const collected = new Collected();
    let ended: { code: RefusalCode; message: string } | null = null;

    function end(code: RefusalCode, message: string): void {
      ended ??= { code, message };
      child.kill('SIGKILL');
    }
    const abort = (): void => void child.kill('SIGKILL');
    const timer = setTimeout(
      () =>
        end(
          'took too long',
          `Reading this file took longer than ${Math.round(timeoutMs / 1000)} s and was ended.`
        ),
      timeoutMs
    );
    const watch = setInterval(() => {
      if (residentMb(child) > 2 * memoryMb) end('took too much memory', tooMuchMemory);
    }, memoryLookMs);
    options.signal?.addEventListener('abort', abort);

    child.on('message', (message: ChildMessage) => {
      if (message.type !== 'ready') collected.take(message);
    });
    void ready.then(() => {
      const request: ChildRequest = { bytes, limits, expectation, maps };
      child.send(request, (error) => error && end('failed', unforeseen));
    });
    child.on('error', () => end('failed', unforeseen));
    child.on('close', (code, signal) => {
      clearTimeout(timer);
      clearInterval(watch);
      options.signal?.removeEventListener('abort', abort);
      if (options.signal?.aborted) reject(options.signal.reason);
      else if (ended) reject(new Refusal(ended.code, ended.message));
      else if (collected.refusal) reject(collected.refusal);
      else if (collected.answer) resolve(collected.answer);
      else reject(explainEnd(code, signal));
    });
  });
}

const tooMuchMemory =
  'Reading this file took more memory than a table of measurements needs, and was ended. Nothing was stored; bring the table alone.';

/** V8 aborts when its heap is full: as a signal, or as the exit code that shells give it. */
function explainEnd(code: number | null, signal: NodeJS.Signals | null): Refusal {
  return signal === 'SIGABRT' || code === 134 || signal === 'SIGKILL' || code === 5
    ? new Refusal('took too much memory', tooMuchMemory)
    : new Refusal('failed', unforeseen);
}

interface Started {
  readonly child: ChildProcess;
  /** Settles when the child waits for its file; never when it ended before. */
  readonly ready: Promise<void>;
}

/** Started ahead of a file that is on its way; it has read nothing. */
let prepared: (Started & { readonly expiry: NodeJS.Timeout }) | null = null;
const preparedForMs = 30_000;

/**
 * Starts a reading process while a file is still being received, so that the file need not wait for it. One at most waits; it ends
 * by itself when no file comes, and does not keep this process alive.
 */
export function prepareChild(): void {
  if (prepared) return;
  const started = startChild(defaults.memoryMb);
  const { child } = started;
  const expiry = setTimeout(() => child.kill('SIGKILL'), preparedForMs);
  const own = { ...started, expiry };
  prepared = own;
  const forget = (): void => {
    clearTimeout(expiry);
    if (prepared === own) prepared = null;
  };
  child.once('error', forget);
  child.once('exit', forget);
  expiry.unref();
  child.unref();
  child.channel?.unref();
}

/** The prepared child, if there is one with this much memory, now kept alive until it has answered. */
function takePrepared(memoryMb: number): Started | null {
  if (!prepared || memoryMb !== defaults.memoryMb) return null;
  const { child, ready, expiry } = prepared;
  prepared = null;
  clearTimeout(expiry);
  child.ref();
  child.channel?.ref();
  return child.connected ? { child, ready } : null;
}

function startChild(memoryMb: number): Started {
  const root = projectRoot();
  const { file, loader } = entry(root);
  const child = fork(file, [], {
    // Outside the project no compiler settings are looked for; the child's imports are relative.
    cwd: tmpdir(),
    // No configuration and no secrets: the child reads bytes and nothing else.
    env: { PATH: process.env.PATH, TMPDIR: process.env.TMPDIR, NODE_ENV: process.env.NODE_ENV },
    execArgv: [`--max-old-space-size=${memoryMb}`, ...loader],
    serialization: 'advanced',
    stdio: ['ignore', 'ignore', 'ignore', 'ipc']
  });
  const ready = new Promise<void>((resolve) => {
    child.on('message', (message: ChildMessage) => {
      if (message.type === 'ready') resolve();
    });
  });
  return { child, ready };
}

/** The built child beside the built server, which starts sooner; in development, tests and scripts the source. */
function entry(root: string): { readonly file: string; readonly loader: readonly string[] } {
  const built = join(root, 'build/processes/read-file.js');
  if (process.env.HEADWATER_BUILT === 'yes' && existsSync(built)) return { file: built, loader: [] };
  const tsx = pathToFileURL(createRequire(join(root, 'package.json')).resolve('tsx')).href;
  return { file: join(root, 'src/lib/server/imports/read-file.process.ts'), loader: ['--import', tsx] };
}

/** Buffers do not count towards the heap, so the whole process is looked at as well; 0 where the system does not tell. */
function residentMb({ pid }: ChildProcess): number {
  try {
    const pages = Number(readFileSync(`/proc/${pid}/statm`, 'utf8').split(' ')[1]);
    return (pages * 4096) / 1024 / 1024;
  } catch {
    return 0;
  }
}

/** Puts the child's pieces together again. */
class Collected {
  readonly #texts: string[] = [];
  readonly #sheets: Sheet[] = [];
  readonly #records: MappedRecord[] = [];
  readonly #problems: Problem[] = [];
  answer: Answer | null = null;
  refusal: Refusal | null = null;

  take(message: Exclude<ChildMessage, { readonly type: 'ready' }>): void {
    switch (message.type) {
      case 'texts':
        for (const text of message.texts) this.#texts.push(text);
        return;
      case 'sheet':
        this.#sheets.push({ ...message.sheet, texts: this.#texts });
        return;
      case 'records':
        for (const record of message.records) this.#records.push(record);
        return;
      case 'problems':
        for (const problem of message.problems) this.#problems.push(problem);
        return;
      case 'refused':
        this.refusal = new Refusal(message.code, message.message);
        return;
      case 'done': {
        const { kind, encoding, separator, mapped } = message;
        this.answer = {
          workbook: { kind, encoding, separator, sheets: this.#sheets },
          mapped: mapped && { ...mapped, records: this.#records, problems: this.#problems }
        };
      }
    }
  }
}
