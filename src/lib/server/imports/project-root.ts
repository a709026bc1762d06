import { existsSync, readFileSync } from 'node:fs';
import { dirname, join } from 'node:path';

/**
 * The folder of the project, searched from the working directory upwards, since the built server does not lie where
 * its source does.
 *
 * @throws Error when the program was started elsewhere
 */
export function projectRoot(from: string = process.cwd()): string {
  for (let folder = from; ; folder = dirname(folder)) {
    const manifest = join(folder, 'package.json');
    if (
      existsSync(manifest) &&
      (JSON.parse(readFileSync(manifest, 'utf8')) as { name?: string }).name === 'headwater'
    ) {
      return folder;
    }
    if (dirname(folder) === folder) throw new Error(`No headwater project at or above ${from}`);
  }
}
