import { fork } from 'node:child_process';
import { existsSync, mkdirSync, mkdtempSync, readFileSync, statSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { keptSecret, lockDataFolder, prepareDataFolder } from '../../../scripts/setup/data-folder.mjs';

const fresh = () => join(mkdtempSync(join(tmpdir(), 'data-')), 'deep', 'data');

describe('prepareDataFolder', () => {
  it('makes the folder so that others cannot list it, and leaves new parents open', () => {
    const folder = fresh();
    prepareDataFolder(folder);
    expect(statSync(folder).mode & 0o066).toBe(0);
    expect(statSync(join(folder, '..')).mode & 0o700).toBe(0o700);
    expect(statSync(join(folder, '..')).mode & 0o055).toBe(0o777 & ~process.umask() & 0o055);
  });

  it('takes its own folder again', () => {
    const folder = fresh();
    prepareDataFolder(folder);
    writeFileSync(join(folder, 'something'), '');
    expect(() => prepareDataFolder(folder)).not.toThrow();
  });

  it('refuses a folder that holds other things, and leaves it as it is', () => {
    const folder = mkdtempSync(join(tmpdir(), 'data-'));
    writeFileSync(join(folder, 'letters.txt'), 'mine');
    expect(() => prepareDataFolder(folder)).toThrow("holds other things than Headwater's data");
    expect(existsSync(join(folder, 'headwater-data'))).toBe(false);
  });

  it('refuses a file, and a path through a file', () => {
    const file = join(mkdtempSync(join(tmpdir(), 'data-')), 'file');
    writeFileSync(file, '');
    expect(() => prepareDataFolder(file)).toThrow('which is a file');
    expect(() => prepareDataFolder(join(file, 'below'))).toThrow(/is a file/);
  });

  it('refuses the layout of another version', () => {
    const folder = mkdtempSync(join(tmpdir(), 'data-'));
    writeFileSync(join(folder, 'headwater-data'), '9\n');
    expect(() => prepareDataFolder(folder)).toThrow("layout '9' where '1' is expected");
  });
});

describe('keptSecret', () => {
  it('makes a long secret once and keeps it from others', () => {
    const folder = mkdtempSync(join(tmpdir(), 'data-'));
    const secret = keptSecret(folder, 'auth-secret');
    expect(secret).toMatch(/^[\w-]{40,}$/);
    expect(keptSecret(folder, 'auth-secret')).toBe(secret);
    expect(statSync(join(folder, 'auth-secret')).mode & 0o077).toBe(0);
  });

  it('refuses a damaged one instead of going on with it', () => {
    const folder = mkdtempSync(join(tmpdir(), 'data-'));
    mkdirSync(folder, { recursive: true });
    writeFileSync(join(folder, 'auth-secret'), 'short');
    expect(() => keptSecret(folder, 'auth-secret')).toThrow('is damaged');
    expect(readFileSync(join(folder, 'auth-secret'), 'utf8')).toBe('short');
  });
});

describe('lockDataFolder', () => {
  it('keeps a second process out, names the first, and opens when the first is killed', async () => {
    const folder = fresh();
    prepareDataFolder(folder);
    const script = join(folder, 'holder.mjs');
    const module = new URL('../../../scripts/setup/data-folder.mjs', import.meta.url).href;
    writeFileSync(
      script,
      `import { lockDataFolder } from ${JSON.stringify(module)};
       await lockDataFolder(${JSON.stringify(folder)});
       process.send('locked');
       setInterval(() => {}, 1000);`
    );
    const holder = fork(script, { execArgv: [] });
    await new Promise((done) => holder.once('message', done));
    await expect(lockDataFolder(folder)).rejects.toThrow(
      `already runs on the data folder ${folder} (process ${holder.pid}`
    );
    const gone = new Promise((done) => holder.once('exit', done));
    holder.kill('SIGKILL');
    await gone;
    await expect(lockDataFolder(folder)).resolves.toBeUndefined();
  });
});
