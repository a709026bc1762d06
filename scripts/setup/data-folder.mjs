import { createHash, randomBytes } from 'node:crypto';
import fs from 'node:fs';
import net from 'node:net';
import path from 'node:path';
import { Refusal } from './refusal.mjs';

/** Its presence says that a folder is ours; its content is the version of the folder's layout. */
const marker = 'headwater-data';
const layout = '1';

/**
 * Makes the data folder, or checks that an existing one is ours.
 * Root's folder can be passed through (not listed) by others, since the database runs as a user of its own;
 * whatever is secret in it has a mode of its own.
 * @param {string} folder
 */
export function prepareDataFolder(folder) {
  const mode = process.getuid?.() === 0 ? 0o711 : 0o700;
  try {
    if (!fs.existsSync(folder)) {
      // The mode is for this folder alone: a recursive mkdir would lock new parents with it.
      fs.mkdirSync(path.dirname(folder), { recursive: true });
      fs.mkdirSync(folder, { mode });
    }
    if (!fs.statSync(folder).isDirectory()) {
      throw new Refusal(`DATA_DIR is ${folder}, which is a file: name a folder.`);
    }
    const entries = fs.readdirSync(folder);
    if (!entries.includes(marker)) {
      if (entries.length > 0) {
        throw new Refusal(
          `The folder ${folder} holds other things than Headwater's data: name an empty or a new folder in DATA_DIR.`
        );
      }
      fs.writeFileSync(path.join(folder, marker), `${layout}\n`, { mode: 0o644 });
    }
    const found = fs.readFileSync(path.join(folder, marker), 'utf8').trim();
    if (found !== layout) {
      throw new Refusal(
        `The data folder ${folder} has layout '${found}' where '${layout}' is expected: it was made by another version of Headwater.`
      );
    }
    fs.accessSync(folder, fs.constants.W_OK | fs.constants.X_OK);
  } catch (error) {
    if (error instanceof Refusal) throw error;
    if (error?.code === 'EACCES' || error?.code === 'EPERM' || error?.code === 'EROFS') {
      throw new Refusal(
        `This user may not write in the data folder ${folder}: start as the user who made it, or name another folder in DATA_DIR.`
      );
    }
    if (error?.code === 'ENOTDIR' || error?.code === 'EEXIST') {
      throw new Refusal(`DATA_DIR is ${folder}, but a part of that path is a file.`);
    }
    if (error?.syscall)
      throw new Refusal(
        `The data folder ${folder} cannot be made there (${error.code}): name another one in DATA_DIR.`
      );
    throw error;
  }
}

/**
 * Keeps the data folder for this process until it ends, however it ends: the kernel drops the name of an abstract
 * socket with its process, so that no stale lock can stay behind.
 * @param {string} folder
 */
export async function lockDataFolder(folder) {
  const note = path.join(folder, 'running.json');
  const name = createHash('sha256').update(fs.realpathSync(folder)).digest('hex').slice(0, 32);
  const holder = net.createServer((socket) => socket.destroy());
  await new Promise((resolve, reject) => {
    holder.once('error', (error) => {
      if (/** @type {NodeJS.ErrnoException} */ (error).code !== 'EADDRINUSE') return reject(error);
      reject(
        new Refusal(
          `Headwater already runs on the data folder ${folder}${runningAs(note)}: stop that one first, or name another folder in DATA_DIR.`
        )
      );
    });
    holder.listen(`\0headwater-${name}`, () => resolve(undefined));
  });
  holder.unref();
  fs.writeFileSync(note, JSON.stringify({ pid: process.pid, since: new Date().toISOString() }));
}

/** @param {string} note */
function runningAs(note) {
  try {
    const { pid, since } = JSON.parse(fs.readFileSync(note, 'utf8'));
    return ` (process ${Number(pid)}, since ${String(since)})`;
  } catch {
    return '';
  }
}

/**
 * A secret kept in the data folder, readable by its owner only; made at the first call.
 * @param {string} folder
 * @param {string} name of its file
 * @returns {string}
 */
export function keptSecret(folder, name) {
  const file = path.join(folder, name);
  if (fs.existsSync(file)) {
    const secret = fs.readFileSync(file, 'utf8').trim();
    if (secret.length < 32) {
      throw new Refusal(`The file ${file} is damaged: put it back from a backup.`);
    }
    return secret;
  }
  const secret = randomBytes(36).toString('base64url');
  fs.writeFileSync(`${file}.new`, `${secret}\n`, { mode: 0o600 });
  fs.renameSync(`${file}.new`, file);
  return secret;
}
