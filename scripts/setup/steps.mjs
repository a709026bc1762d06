import { spawn } from 'node:child_process';

/** @typedef {{ code: number, output: string }} StepResult */

/** The programs of this process that still run, so that an interrupted command leaves none behind. */
const running = new Set();

/**
 * Runs a program to its end.
 * @param {string} program
 * @param {readonly string[]} args
 * @param {Readonly<{ cwd: string, env?: NodeJS.ProcessEnv, show?: boolean, onMessage?: (message: unknown) => void }>} options
 *   show: pass the output on as it comes, instead of keeping it; onMessage: what a node child sends
 * @returns {Promise<StepResult>} the exit code and, when not shown, what it printed
 */
export function runStep(program, args, { cwd, env = process.env, show = false, onMessage }) {
  return new Promise((resolve, reject) => {
    const out = show ? 'inherit' : 'pipe';
    const child = spawn(program, args, {
      cwd,
      env,
      stdio: onMessage ? ['ignore', out, out, 'ipc'] : ['ignore', out, out]
    });
    running.add(child);
    let output = '';
    for (const stream of [child.stdout, child.stderr]) {
      stream?.setEncoding('utf8').on('data', (text) => (output += text));
    }
    if (onMessage) child.on('message', onMessage);
    child.once('error', (error) => {
      running.delete(child);
      reject(error);
    });
    child.once('close', (code) => {
      running.delete(child);
      resolve({ code: code ?? 1, output });
    });
  });
}

/** Asks every running step to end. */
export function interruptSteps() {
  for (const child of running) child.kill('SIGTERM');
}
