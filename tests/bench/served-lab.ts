import { fork, type ChildProcess } from 'node:child_process';
import { mkdtempSync, rmSync } from 'node:fs';
import { createServer } from 'node:net';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { demoAccounts, demoLabName } from '../../seeders/demo-accounts';
import type { Role } from '../../src/lib/domain/roles';

/** A built server of its own on loopback. */
export interface ServedLab {
  readonly origin: string;
  readonly stop: () => Promise<void>;
}

function freePort(): Promise<number> {
  return new Promise((done, fail) => {
    const server = createServer();
    server.once('error', fail);
    server.listen(0, '127.0.0.1', () => {
      const address = server.address();
      server.close(() => done(typeof address === 'object' && address ? address.port : 0));
    });
  });
}

/** Serves a migrated database as `npm start` does, without the worker. */
export async function serveLab(databaseUrl: string): Promise<ServedLab> {
  const port = await freePort();
  const dataDir = mkdtempSync(join(tmpdir(), 'headwater-bench-'));
  const child: ChildProcess = fork('scripts/server.js', {
    execArgv: [],
    stdio: ['ignore', 'ignore', 'inherit', 'ipc'],
    env: {
      ...process.env,
      NODE_ENV: 'production',
      HEADWATER_BUILT: 'yes',
      DATABASE_URL: databaseUrl,
      DATA_DIR: dataDir,
      AUTH_SECRET: 'a-secret-that-guards-nothing-but-benchmarks',
      HOST: '127.0.0.1',
      PORT: String(port),
      LOG_LEVEL: 'silent'
    }
  });
  const origin = `http://127.0.0.1:${port}`;
  const stop = async (): Promise<void> => {
    const ended = new Promise((done) => child.once('exit', done));
    child.kill('SIGTERM');
    await ended;
    rmSync(dataDir, { recursive: true, force: true });
  };
  for (let attempt = 0; attempt < 150; attempt++) {
    const ready = await fetch(`${origin}/readyz`).then(
      (response) => response.ok,
      () => false
    );
    if (ready) return { origin, stop };
    await new Promise((done) => setTimeout(done, 100));
  }
  await stop();
  throw new Error('the server did not become ready');
}

/** One person's browser, as far as cookies and forms go. */
export class Visitor {
  private readonly cookies = new Map<string, string>();

  constructor(readonly origin: string) {}

  async send(path: string, body?: FormData | URLSearchParams): Promise<Response> {
    const response = await fetch(new URL(path, this.origin), {
      method: body ? 'POST' : 'GET',
      redirect: 'manual',
      headers: {
        origin: this.origin,
        accept: 'text/html',
        cookie: [...this.cookies].map(([name, value]) => `${name}=${value}`).join('; ')
      },
      ...(body ? { body } : {})
    });
    for (const cookie of response.headers.getSetCookie()) {
      const [, name, value] = /^([^=]+)=([^;]*)/.exec(cookie) ?? [];
      if (name !== undefined && value !== undefined) this.cookies.set(name, value);
    }
    return response;
  }

  /** The page's HTML. @throws Error unless it is there */
  async page(path: string): Promise<string> {
    const response = await this.send(path);
    const text = await response.text();
    if (response.status !== 200) throw new Error(`${path} answered ${response.status}`);
    return text;
  }

  async signIn(role: Role): Promise<void> {
    const account = demoAccounts.find((one) => one.lab === demoLabName && one.role === role);
    const answer = await this.send(
      '/sign-in',
      new URLSearchParams({ email: account?.email ?? '', password: account?.password ?? '' })
    );
    if (answer.status !== 303) throw new Error(`signing in answered ${answer.status}`);
  }
}
