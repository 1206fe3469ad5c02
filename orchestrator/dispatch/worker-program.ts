import { existsSync } from 'node:fs';
import { join } from 'node:path';
import { Broken } from '../mistakes.js';
import { packageRoot } from '../provenance/package-root.js';

/** The built worker entry. Found from the package root, so that sources under a test runner and the built program
 *  start the same file: a thread cannot load TypeScript on Node 20. */
export function workerProgram(): string {
  const file = join(packageRoot(), 'dist', 'workers', 'entry.js');
  if (!existsSync(file)) throw new Broken('not-built', `${file} is missing: run "npm run build"`);
  return file;
}
