import { spawnSync } from 'node:child_process';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { KilledImports, type Point, type Victim } from './killed-import';

/*
 * Real processes on a PostgreSQL of their own, killed while a file is being stored: all of the file is on record afterwards, or
 * nothing of it, and the same file can be brought again.
 */
const samples = 3;
const analytes = 4;
let study: KilledImports;
let round = 0;

beforeAll(async () => {
  study = await KilledImports.make(samples, analytes);
}, 240_000);
afterAll(() => study.stop());

const nothing = { state: 'received', extracts: 0, injections: 0, measurements: 0, values: [] };
const whole = (of: number) => ({
  state: 'stored',
  extracts: samples,
  injections: samples,
  measurements: samples * analytes,
  values: study.valuesOf(of)
});

describe('a kill in the middle of storing', () => {
  it.each<[Exclude<Victim, 'reader'>, Point]>([
    ['server', 'injections'],
    ['server', 'audit_events'],
    ['database process', 'measurements'],
    ['database process', 'audit_events'],
    ['database', 'measurements']
  ])(
    'of the %s, before %s are written, leaves nothing, and the upload can be repeated',
    async (victim, point) => {
      const own = (round += 1);
      // Received beforehand, so that what is held up is the storing.
      expect(await study.bring(own, false)).toMatchObject({ kind: 'brought', outcome: 'received' });
      const answered = await study.killAt(own, victim, point);
      expect(answered.kind).toBe(victim === 'server' ? 'gone' : 'failed');
      expect(await study.found(own)).toEqual(nothing);
      expect(await study.orphans()).toEqual([]);

      expect(await study.bring(own, true)).toMatchObject({ kind: 'brought', outcome: 'stored' });
      expect(await study.found(own)).toEqual(whole(own));
      expect(await study.bring(own, true)).toMatchObject({ kind: 'brought', outcome: 'known' });
      expect(await study.found(own)).toEqual(whole(own));
      expect(await study.orphans()).toEqual([]);
    },
    180_000
  );

  it('of the child that reads the file leaves nothing, and the same server stores it the next time', async () => {
    const own = (round += 1);
    expect((await study.killReaders(own)).kind).toBe('failed');
    expect(await study.found(own)).toEqual(nothing);
    expect(await study.bring(own, true)).toMatchObject({ kind: 'brought', outcome: 'stored' });
    expect(await study.found(own)).toEqual(whole(own));
    expect(await study.orphans()).toEqual([]);
  }, 180_000);

  it('breaks no link of the history', () => {
    const { status, stdout, stderr } = spawnSync(
      process.execPath,
      ['--import', 'tsx', 'scripts/audit-verify.ts'],
      {
        encoding: 'utf8',
        env: {
          ...process.env,
          DATABASE_URL: study.cluster.url,
          AUTH_SECRET: 'a-secret-that-guards-nothing-but-tests',
          NODE_OPTIONS: ''
        }
      }
    );
    expect(stderr).toBe('');
    expect(stdout).toContain('every link holds');
    expect(status).toBe(0);
  }, 60_000);
});
