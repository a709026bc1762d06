import { spawn } from 'node:child_process';

/**
 * A long-running process of ours.
 * @typedef {{ name: string, ready: Promise<void>, ended: Promise<number>, stop: (milliseconds?: number) => Promise<void> }} Child
 */

/**
 * Starts a node process in a group of its own: Ctrl-C reaches the starting process alone, which then stops the others
 * in order. Over the channel between them a child notices when its parent is gone.
 * @param {string} name for sentences and the log
 * @param {readonly string[]} args of node
 * @param {Readonly<{ cwd: string, env: NodeJS.ProcessEnv }>} options
 * @returns {Child} ready resolves when the child says so, and rejects when it ends before
 */
export function startChild(name, args, { cwd, env }) {
  const child = spawn(process.execPath, args, {
    cwd,
    env: { ...env, HEADWATER_PROCESS: name },
    stdio: ['ignore', 'inherit', 'inherit', 'ipc'],
    detached: true
  });
  const ended = new Promise((resolve) => {
    child.once('error', () => resolve(1));
    child.once('exit', (code) => resolve(code ?? 1));
  });
  const ready = new Promise((resolve, reject) => {
    child.on('message', (message) => {
      if (message === 'ready') resolve(undefined);
    });
    ended.then((code) => reject(new Error(`the ${name} process ended with code ${code}`)));
  });
  // Whoever waits hears of it; whoever does not must not be ended by it.
  ready.catch(() => undefined);
  return {
    name,
    ready,
    ended,
    stop: async (milliseconds = 15_000) => {
      child.kill('SIGTERM');
      const forced = setTimeout(() => child.kill('SIGKILL'), milliseconds);
      await ended;
      clearTimeout(forced);
    }
  };
}
