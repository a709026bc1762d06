import { fork, type ChildProcess } from 'node:child_process';
import { readFileSync, readdirSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import type { Actor } from '../../../src/lib/domain/actor';

export type ServerRequest =
  | { readonly kind: 'prepare'; readonly samples: number; readonly analytes: number }
  | {
      readonly kind: 'bring';
      readonly actor: Actor;
      readonly study: string;
      readonly fileName: string;
      readonly text: string;
      readonly store: boolean;
    };

export type ServerAnswer =
  | { readonly kind: 'ready' }
  | { readonly kind: 'prepared'; readonly actor: Actor; readonly study: string; readonly labId: string }
  | { readonly kind: 'brought'; readonly outcome: string; readonly importId: string }
  | { readonly kind: 'failed'; readonly message: string }
  /** It was killed before it answered. */
  | { readonly kind: 'gone' };

const entry = fileURLToPath(new URL('./storing-server.process.ts', import.meta.url));

/** A process of the server that stores, and can be killed. */
export class StoringServer {
  private constructor(private readonly child: ChildProcess) {}

  static async start(databaseUrl: string): Promise<StoringServer> {
    const child = fork(entry, {
      execArgv: ['--import', 'tsx'],
      env: {
        ...process.env,
        DATABASE_URL: databaseUrl,
        AUTH_SECRET: 'a-secret-that-guards-nothing-but-tests',
        LOG_LEVEL: 'silent',
        NODE_OPTIONS: ''
      },
      stdio: ['ignore', 'ignore', 'inherit', 'ipc']
    });
    const server = new StoringServer(child);
    const first = await server.next();
    if (first.kind !== 'ready') throw new Error(`the storing process did not start: ${first.kind}`);
    return server;
  }

  get isAlive(): boolean {
    return this.child.exitCode === null && this.child.signalCode === null;
  }

  ask(request: ServerRequest): Promise<ServerAnswer> {
    const answer = this.next();
    this.child.send(request);
    return answer;
  }

  private next(): Promise<ServerAnswer> {
    return new Promise((resolve) => {
      const done = (answer: ServerAnswer): void => {
        this.child.off('message', onMessage);
        this.child.off('exit', onExit);
        resolve(answer);
      };
      const onMessage = (message: unknown): void => done(message as ServerAnswer);
      const onExit = (): void => done({ kind: 'gone' });
      this.child.on('message', onMessage);
      this.child.on('exit', onExit);
    });
  }

  /** Ends it without a chance to clean up. */
  async kill(): Promise<void> {
    if (!this.isAlive) return;
    const ended = new Promise((resolve) => this.child.once('exit', resolve));
    this.child.kill('SIGKILL');
    await ended;
  }

  /** The child that reads a file for it, if one runs now. */
  readerPid(): number | null {
    const own = String(this.child.pid);
    for (const name of readdirSync('/proc').filter((each) => /^\d+$/.test(each))) {
      try {
        // The parent is the second field behind the name, which stands in brackets.
        const stat = readFileSync(`/proc/${name}/stat`, 'utf8');
        const parent = stat.slice(stat.lastIndexOf(')') + 2).split(' ')[1];
        const isReader = readFileSync(`/proc/${name}/cmdline`, 'utf8').includes('read-file.process');
        if (parent === own && isReader) return Number(name);
      } catch {
        // It ended while the list was read.
      }
    }
    return null;
  }
}
