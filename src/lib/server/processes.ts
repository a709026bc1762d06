import { existsSync, readdirSync } from 'node:fs';
import { basename, join, resolve } from 'node:path';

/** How to run one of the program's own processes: `fork(file, { execArgv })`. */
export interface ProcessEntry {
  readonly file: string;
  readonly execArgv: readonly string[];
}

/**
 * Finds the entry of a process: the built one beside a built server, otherwise its source, read through tsx.
 * @param name of a file `<name>.process.ts` anywhere under src/lib/server
 * @throws Error when there is none, which is a mistake in the program
 */
export function processEntry(name: string): ProcessEntry {
  const built = resolve('build', 'processes', `${name}.js`);
  if (process.env.HEADWATER_BUILT === 'yes' && existsSync(built)) return { file: built, execArgv: [] };
  const folder = resolve('src', 'lib', 'server');
  const source = readdirSync(folder, { recursive: true, encoding: 'utf8' }).find(
    (file) => basename(file) === `${name}.process.ts`
  );
  if (!source) throw new Error(`there is no process named ${name}`);
  return { file: join(folder, source), execArgv: ['--import', 'tsx'] };
}
