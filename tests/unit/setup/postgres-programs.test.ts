import { mkdirSync, mkdtempSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { choosePrograms, commandAs, installedPrograms } from '../../../scripts/setup/postgres-programs.mjs';

const fifteen = { major: 15, bin: '/usr/lib/postgresql/15/bin' };
const seventeen = { major: 17, bin: '/usr/lib/postgresql/17/bin' };

describe('installedPrograms', () => {
  it('finds the versions with a server, in numeric order, and passes over the rest', () => {
    const base = mkdtempSync(join(tmpdir(), 'programs-'));
    for (const version of ['15', '9', '17']) {
      mkdirSync(join(base, version, 'bin'), { recursive: true });
      writeFileSync(join(base, version, 'bin', 'initdb'), '');
    }
    mkdirSync(join(base, '16', 'bin'), { recursive: true });
    mkdirSync(join(base, 'contrib'));
    expect(installedPrograms(base).map(({ major }) => major)).toEqual([9, 15, 17]);
  });

  it('finds none where PostgreSQL is not installed', () => {
    expect(installedPrograms('/no/such/folder')).toEqual([]);
  });
});

describe('choosePrograms', () => {
  it('takes the newest for a new folder', () => {
    expect(choosePrograms([fifteen, seventeen], null, '/data')).toBe(seventeen);
  });
  it('takes those that made an existing folder', () => {
    expect(choosePrograms([fifteen, seventeen], 15, '/data')).toBe(fifteen);
  });
  it('refuses a folder of another major version, naming both and the way out', () => {
    const attempt = () => choosePrograms([fifteen], 16, '/data/postgres');
    expect(attempt).toThrow(/\/data\/postgres was made by PostgreSQL 16, and this machine has 15/);
    expect(attempt).toThrow(/install postgresql-16/);
  });
  it('refuses a server that is too old for the schema', () => {
    expect(() => choosePrograms([{ major: 13, bin: '' }], null, '/data')).toThrow('PostgreSQL 15 or newer');
  });
});

describe('commandAs', () => {
  const identity = { uid: 101, gid: 104, switchUser: true, readsAnywhere: false };
  it('runs directly for an ordinary user', () => {
    expect(commandAs({ ...identity, switchUser: false }, 'initdb', ['-D', 'x'])).toEqual([
      'initdb',
      ['-D', 'x']
    ]);
  });
  it('gives up root, its groups and all rights but reading where that is needed', () => {
    expect(commandAs(identity, 'initdb', ['-D', 'x'])).toEqual([
      'setpriv',
      ['--reuid=101', '--regid=104', '--clear-groups', 'initdb', '-D', 'x']
    ]);
    const [, args] = commandAs({ ...identity, readsAnywhere: true }, 'initdb', []);
    expect(args).toContain('--ambient-caps=+dac_read_search');
  });
});
