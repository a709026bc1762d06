import { mkdtempSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { installedMatches, reasonIn } from '../../../scripts/setup/dependencies.mjs';

const lock = JSON.stringify({
  packages: {
    '': { version: '0.1.0' },
    'node_modules/water': { version: '1.2.3' },
    'node_modules/water-other-platform': { version: '1.2.3', optional: true }
  }
});

function note(packages: Record<string, { version: string }>): string {
  const file = join(mkdtempSync(join(tmpdir(), 'lock-')), 'note.json');
  writeFileSync(file, JSON.stringify({ packages }));
  return file;
}

describe('installedMatches', () => {
  it('takes what the lock file names, without packages for other platforms', () => {
    expect(installedMatches(lock, note({ 'node_modules/water': { version: '1.2.3' } }))).toBe(true);
  });
  it('sees another version, a missing package, and nothing installed at all', () => {
    expect(installedMatches(lock, note({ 'node_modules/water': { version: '1.2.4' } }))).toBe(false);
    expect(installedMatches(lock, note({}))).toBe(false);
    expect(installedMatches(lock, '/no/such/file')).toBe(false);
  });
});

describe('reasonIn', () => {
  it('finds the telling line of apt and of npm', () => {
    expect(reasonIn('Reading lists...\nE: Unable to locate package postgresql\n')).toBe(
      'Unable to locate package postgresql'
    );
    expect(
      reasonIn('npm error code ENOTFOUND\nnpm error errno ENOTFOUND\nnpm error network request failed\n')
    ).toBe('network request failed');
  });
  it('falls back to the last line', () => {
    expect(reasonIn('first\nlast\n\n')).toBe('last');
    expect(reasonIn('')).toBe('no reason was given');
  });
});
