import { existsSync } from 'node:fs';
import { dirname, join, resolve } from 'node:path';
import { fileURLToPath } from 'node:url';
import { Broken } from '../mistakes.js';

/** The folder of the package that a file belongs to: the nearest one above it with a package.json.
 *  Without an argument, the folder of this package, whether run from sources or from dist/. */
export function packageRoot(file: string = fileURLToPath(import.meta.url)): string {
  for (let folder = dirname(resolve(file)); ; folder = dirname(folder)) {
    if (existsSync(join(folder, 'package.json'))) return folder;
    if (folder === dirname(folder)) throw new Broken('no-package', `no package.json above ${file}`);
  }
}
