import path from 'node:path';
import { startChild } from './setup/children.mjs';
import { closeInOrder } from './setup/interruption.mjs';
import { prepare } from './setup/prepare.mjs';
import { Refusal, runCommand } from './setup/refusal.mjs';
import { addressOf, isLoopback } from './setup/settings.mjs';

/*
 * npm start: from a bare machine to a running Headwater. Nothing is installed when this file begins, so it and
 * everything it imports use Node alone.
 */
const root = path.resolve(import.meta.dirname, '..');
const closers = closeInOrder();

/** A process that ends this soon after its start has not merely met a passing trouble. */
const shortLife = 10_000;

await runCommand(async () => {
  try {
    await run();
  } catch (error) {
    // After a signal the steps end with errors of their own, which are not the person's.
    if (closers.interrupted()) return;
    await closers.close();
    throw error;
  }
});

async function run() {
  const { settings, env, demoAccounts } = await prepare(root, { build: true, onDatabase: closers.add });
  const worker = keepWorker({ ...env, NODE_ENV: 'production', HEADWATER_BUILT: 'yes' });
  closers.add(worker.stop);
  const web = startChild('web', ['scripts/server.js'], { cwd: root, env });
  closers.add(() => web.stop());
  await web.ready.catch(() => {
    throw new Refusal('The web server could not start; its last lines above say why.');
  });
  await worker.ready;
  await requireReadiness(settings);
  announce(settings, demoAccounts);
  web.ended.then((code) => endWith('web server', code));
}

/**
 * A part that ends by itself ends everything, so that whoever watches over this process starts it anew as a whole.
 * @param {string} part
 * @param {number} code
 */
async function endWith(part, code) {
  if (closers.interrupted()) return;
  console.error(`The ${part} ended by itself (code ${code}).`);
  await closers.close();
  process.exit(1);
}

/**
 * The worker runs other people's spreadsheets through parsers: one that dies is replaced, unless it dies at once.
 * @param {NodeJS.ProcessEnv} env
 */
function keepWorker(env) {
  let stopping = false;
  const begin = () => {
    const begun = Date.now();
    const child = startChild('worker', ['build/processes/worker.js'], { cwd: root, env });
    child.ended.then((code) => {
      if (stopping) return;
      if (Date.now() - begun < shortLife) return endWith('worker', code);
      console.error(`The worker ended by itself (code ${code}); another takes its place.`);
      current = begin();
    });
    return child;
  };
  let current = begin();
  return {
    ready: current.ready.catch(() => {
      throw new Refusal('The worker could not start; its last lines above say why.');
    }),
    stop: () => {
      stopping = true;
      return current.stop();
    }
  };
}

/** @param {import('./setup/settings.mjs').Settings} settings */
async function requireReadiness(settings) {
  const address = addressOf({ ...settings, origin: null });
  const answer = await fetch(`${address}/readyz`);
  if (!answer.ok) throw new Refusal('The web server runs, but it cannot reach the database.');
}

/**
 * @param {import('./setup/settings.mjs').Settings} settings
 * @param {readonly import('./setup/prepare.mjs').DemoAccount[]} accounts
 */
function announce(settings, accounts) {
  const lines = ['', `Headwater is at ${addressOf(settings)}`];
  if (accounts.length > 0) {
    lines.push('', 'Accounts of the demo lab (invented people and data):');
    const width = (/** @type {'role' | 'email'} */ key) =>
      Math.max(...accounts.map((account) => account[key].length));
    for (const { role, email, password, name } of accounts) {
      lines.push(`  ${role.padEnd(width('role'))}  ${email.padEnd(width('email'))}  ${password}  (${name})`);
    }
    if (!isLoopback(settings.host)) {
      lines.push('', 'Others on the network can reach this server, and these passwords are public:');
      lines.push('set DEMO_LAB=no before the first start of a server for real work.');
    }
  }
  lines.push('', 'Ctrl-C stops it.');
  console.log(lines.join('\n'));
}
