import path from 'node:path';
import { startChild } from './setup/children.mjs';
import { closeInOrder } from './setup/interruption.mjs';
import { prepare } from './setup/prepare.mjs';
import { Refusal, runCommand } from './setup/refusal.mjs';

/* npm run dev: the same database and migrations as npm start, the source served by vite, the worker from source. */
const root = path.resolve(import.meta.dirname, '..');
const closers = closeInOrder();

await runCommand(async () => {
  try {
    const { settings, env, demoAccounts } = await prepare(root, { build: false, onDatabase: closers.add });
    const worker = startChild('worker', ['--import', 'tsx', 'src/lib/server/jobs/worker.process.ts'], {
      cwd: root,
      env
    });
    closers.add(() => worker.stop());
    const vite = [
      'node_modules/vite/bin/vite.js',
      'dev',
      '--host',
      settings.host,
      '--port',
      String(settings.port)
    ];
    const web = startChild('web', [...vite, '--strictPort'], { cwd: root, env });
    closers.add(() => web.stop(3000));
    await worker.ready.catch(() => {
      throw new Refusal('The worker could not start; its last lines above say why.');
    });
    for (const { role, email, password } of demoAccounts) console.log(`  ${role}: ${email}  ${password}`);
    await web.ended;
    if (!closers.interrupted()) await closers.close();
  } catch (error) {
    if (closers.interrupted()) return;
    await closers.close();
    throw error;
  }
});
