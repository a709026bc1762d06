import fs from 'node:fs';
import path from 'node:path';

/**
 * What a running server notes in its folder (postmaster.pid: process, folder, start, port, socket folder, one a line).
 * @typedef {{ pid: number, port: number, socketFolder: string }} Postmaster
 */

/**
 * @param {string} text
 * @returns {Postmaster | null} null when the file is cut short
 */
export function parsePostmasterFile(text) {
  const lines = text.split('\n');
  const pid = Math.abs(Number(lines[0]));
  const port = Number(lines[3]);
  if (!Number.isInteger(pid) || pid < 1 || !Number.isInteger(port) || port < 1) return null;
  return { pid, port, socketFolder: lines[4] ?? '' };
}

/**
 * The server that runs on a folder. A file whose process is gone, or is no PostgreSQL of this folder (process numbers
 * are used again after a restart of the machine), is stale and is removed: the server itself would refuse to start over it.
 * @param {string} cluster
 * @returns {Postmaster | null}
 */
export function runningServer(cluster) {
  const file = path.join(cluster, 'postmaster.pid');
  if (!fs.existsSync(file)) return null;
  const noted = parsePostmasterFile(fs.readFileSync(file, 'utf8'));
  const pid = noted?.pid ?? Number.parseInt(fs.readFileSync(file, 'utf8'), 10);
  if (Number.isInteger(pid) && isServerOf(Math.abs(pid), cluster)) return noted;
  fs.rmSync(file, { force: true });
  return null;
}

/**
 * @param {number} pid
 * @param {string} cluster
 */
function isServerOf(pid, cluster) {
  try {
    // A server changes into its data folder.
    return fs.realpathSync(`/proc/${pid}/cwd`) === fs.realpathSync(cluster);
  } catch {
    return false;
  }
}
