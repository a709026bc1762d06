import { mkdtempSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { sequelize } from '../../src/lib/server/db/sequelize';
import { migrator } from '../../src/lib/server/db/umzug';
import { isReady } from '../../src/lib/server/readiness';

function folderWith(files: Readonly<Record<string, string>>): string {
  const folder = mkdtempSync(join(tmpdir(), 'migrations-'));
  for (const [name, sql] of Object.entries(files)) {
    writeFileSync(
      join(folder, name),
      `export async function up({ context }) { await context.sequelize.query(${JSON.stringify(sql)}); }`
    );
  }
  return folder;
}

const tables = async (): Promise<string[]> => {
  const [rows] = await sequelize.query(
    `SELECT tablename FROM pg_tables WHERE tablename LIKE 'probe_%' ORDER BY 1`
  );
  return (rows as { tablename: string }[]).map((row) => row.tablename);
};

describe('migrations', () => {
  it('have all run in this database', async () => {
    expect(await migrator(sequelize).pending()).toEqual([]);
  });

  it('stop at one that fails, of which nothing is left, and go on from there once it is mended', async () => {
    const first = 'CREATE TABLE probe_first (id int)';
    const broken = folderWith({
      '1.ts': first,
      '2.ts': 'CREATE TABLE probe_second (id int); SELECT no_such_function()',
      '3.ts': 'CREATE TABLE probe_third (id int)'
    });
    await expect(migrator(sequelize, broken).up()).rejects.toThrow(/no_such_function/);
    expect(await tables()).toEqual(['probe_first']);

    const mended = folderWith({
      '1.ts': first,
      '2.ts': 'CREATE TABLE probe_second (id int)',
      '3.ts': 'CREATE TABLE probe_third (id int)'
    });
    const done = await migrator(sequelize, mended).up();
    expect(done.map(({ name }) => name)).toEqual(['2.ts', '3.ts']);
    expect(await tables()).toEqual(['probe_first', 'probe_second', 'probe_third']);
  });
});

describe('readiness', () => {
  it('is given while the database answers', async () => {
    expect(await isReady()).toBe(true);
  });
});
