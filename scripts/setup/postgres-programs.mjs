import { spawnSync } from 'node:child_process';
import fs from 'node:fs';
import path from 'node:path';
import { Refusal } from './refusal.mjs';

/**
 * The server's programs as Debian lays them, the newest version last.
 * @param {string} [base]
 * @returns {{ major: number, bin: string }[]}
 */
export function installedPrograms(base = '/usr/lib/postgresql') {
  if (!fs.existsSync(base)) return [];
  return fs
    .readdirSync(base)
    .filter((name) => /^\d+$/.test(name) && fs.existsSync(path.join(base, name, 'bin', 'initdb')))
    .map((name) => ({ major: Number(name), bin: path.join(base, name, 'bin') }))
    .sort((a, b) => a.major - b.major);
}

/** The oldest server whose features the schema uses (NULLS NOT DISTINCT). */
export const oldestMajor = 15;

/**
 * Chooses the programs for a database folder: those that made it, or the newest for a new one.
 * @param {readonly { major: number, bin: string }[]} installed
 * @param {number | null} madeBy major version that made the folder, null for a new one
 * @param {string} folder for the sentence
 */
export function choosePrograms(installed, madeBy, folder) {
  const versions = installed.map(({ major }) => major).join(', ') || 'none';
  if (madeBy === null) {
    const newest = installed.at(-1);
    if (!newest || newest.major < oldestMajor) {
      throw new Refusal(`PostgreSQL ${oldestMajor} or newer is needed, and this machine has ${versions}.`);
    }
    return newest;
  }
  const same = installed.find(({ major }) => major === madeBy);
  if (!same) {
    throw new Refusal(
      `The database folder ${folder} was made by PostgreSQL ${madeBy}, and this machine has ${versions}: install postgresql-${madeBy}, or name another folder in DATA_DIR.`
    );
  }
  return same;
}

/**
 * The user that the server runs as. PostgreSQL refuses root, so root hands over to the owner of the folder, or to the
 * user of Debian's package; an ordinary user runs it directly.
 * @typedef {{ uid: number, gid: number, switchUser: boolean, readsAnywhere: boolean }} Identity
 * @param {string} cluster
 * @returns {Identity}
 */
export function identityFor(cluster) {
  const uid = process.getuid?.() ?? 0;
  const gid = process.getgid?.() ?? 0;
  if (uid !== 0) return { uid, gid, switchUser: false, readsAnywhere: false };
  if (fs.existsSync(cluster)) {
    const owner = fs.statSync(cluster);
    if (owner.uid !== 0) return { uid: owner.uid, gid: owner.gid, switchUser: true, readsAnywhere: false };
  }
  const id = (/** @type {string} */ flag) => {
    const answer = spawnSync('id', [flag, 'postgres'], { encoding: 'utf8' });
    if (answer.status !== 0) {
      throw new Refusal('The user postgres is missing: reinstall the Debian package postgresql-common.');
    }
    return Number(answer.stdout.trim());
  };
  return { uid: id('-u'), gid: id('-g'), switchUser: true, readsAnywhere: false };
}

/**
 * @param {Identity} identity
 * @param {string} program
 * @param {readonly string[]} args
 * @returns {[string, string[]]} the command that runs the program as that user
 */
export function commandAs(identity, program, args) {
  if (!identity.switchUser) return [program, [...args]];
  const capabilities = identity.readsAnywhere
    ? ['--inh-caps=+dac_read_search', '--ambient-caps=+dac_read_search']
    : [];
  return [
    'setpriv',
    [
      `--reuid=${identity.uid}`,
      `--regid=${identity.gid}`,
      '--clear-groups',
      ...capabilities,
      program,
      ...args
    ]
  ];
}

/** The environment of every server program: nothing of the caller's PG* variables, and messages that can be read. */
export function programEnvironment() {
  const kept = Object.entries(process.env).filter(([name]) => !/^(PG|LC_|LANG)/.test(name));
  return { ...Object.fromEntries(kept), LC_ALL: 'C.UTF-8', TZ: 'UTC' };
}

/**
 * Whether the server's user gets into a folder, by its own rights or by being allowed to read anywhere.
 * @param {Identity} identity
 * @param {string} folder
 */
export function canEnter(identity, folder) {
  const [program, args] = commandAs(identity, 'stat', ['-c', '%i', `${folder}/.`]);
  return spawnSync(program, args, { cwd: '/', stdio: 'ignore' }).status === 0;
}
