import fs from 'node:fs';
import os from 'node:os';
import path from 'node:path';
import { prepareDataFolder } from './data-folder.mjs';
import { startPostgres } from './postgres.mjs';
import { choosePrograms, identityFor, installedPrograms, commandAs } from './postgres-programs.mjs';
import { spawnSync } from 'node:child_process';

const prefix = 'headwater-throwaway-';

/**
 * A server of its own in a new temporary folder, deleted with everything in it by `stop`. Its role may create databases
 * and nothing more, so that tests run with the rights that the application has.
 * @param {Readonly<{ durable?: boolean }>} [options] durable when its speed is to be measured
 * @returns {Promise<{ url: string, stop: () => void }>}
 */
export async function startThrowawayPostgres({ durable = false } = {}) {
  removeAbandoned();
  const folder = fs.mkdtempSync(path.join(os.tmpdir(), prefix));
  if (process.getuid?.() === 0) fs.chmodSync(folder, 0o711);
  fs.writeFileSync(path.join(folder, 'owner'), String(process.pid));
  const dataDir = path.join(folder, 'data');
  prepareDataFolder(dataDir);
  try {
    const server = await startPostgres(dataDir, { durable, mayCreateDatabases: true });
    return {
      url: server.url,
      stop: () => {
        server.stop();
        fs.rmSync(folder, { recursive: true, force: true });
      }
    };
  } catch (error) {
    fs.rmSync(folder, { recursive: true, force: true });
    throw error;
  }
}

/** Ends servers whose process was killed before it could do so itself; other users' folders are left alone. */
function removeAbandoned() {
  for (const name of fs.readdirSync(os.tmpdir())) {
    if (!name.startsWith(prefix)) continue;
    const folder = path.join(os.tmpdir(), name);
    try {
      if (fs.statSync(folder).uid !== process.getuid?.()) continue;
      const owner = Number(fs.readFileSync(path.join(folder, 'owner'), 'utf8'));
      if (fs.existsSync(`/proc/${owner}`)) continue;
      const cluster = path.join(folder, 'data', 'postgres');
      if (fs.existsSync(path.join(cluster, 'postmaster.pid'))) {
        const { bin } = choosePrograms(installedPrograms(), null, cluster);
        const stop = ['-D', cluster, '-m', 'immediate', '-w', '-t', '20', 'stop'];
        const [program, args] = commandAs(identityFor(cluster), path.join(bin, 'pg_ctl'), stop);
        spawnSync(program, args, { cwd: '/', stdio: 'ignore' });
      }
      fs.rmSync(folder, { recursive: true, force: true });
    } catch {
      // Half made, or being removed by another run at this moment: it is not ours to insist on.
    }
  }
}
