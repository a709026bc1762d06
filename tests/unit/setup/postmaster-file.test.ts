import { existsSync, mkdtempSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { parsePostmasterFile, runningServer } from '../../../scripts/setup/postmaster-file.mjs';

const file = (pid: number) =>
  `${pid}\n/data/postgres\n1764580000\n5544\n/tmp/hw-abc\n127.0.0.1\n  123 456\nready\n`;

describe('parsePostmasterFile', () => {
  it('reads process, port and socket folder', () => {
    expect(parsePostmasterFile(file(812))).toEqual({ pid: 812, port: 5544, socketFolder: '/tmp/hw-abc' });
  });
  it.each(['', '812\n', '812\n/data\n1764580000\n', 'x\n/data\n1\n5544\n'])(
    'takes a file cut short (%j) for none',
    (text) => {
      expect(parsePostmasterFile(text)).toBeNull();
    }
  );
});

describe('runningServer', () => {
  it('finds none in a folder without the file', () => {
    expect(runningServer(mkdtempSync(join(tmpdir(), 'cluster-')))).toBeNull();
  });

  it('removes a file whose process number now belongs to another program', () => {
    const cluster = mkdtempSync(join(tmpdir(), 'cluster-'));
    // This test's own process lives, and is no server of that folder.
    writeFileSync(join(cluster, 'postmaster.pid'), file(process.pid));
    expect(runningServer(cluster)).toBeNull();
    expect(existsSync(join(cluster, 'postmaster.pid'))).toBe(false);
  });
});
