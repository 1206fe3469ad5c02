import { createHash } from 'node:crypto';
import { existsSync, readFileSync } from 'node:fs';
import { dirname, join, relative, resolve, sep } from 'node:path';
import { fileURLToPath } from 'node:url';
import { Broken } from '../mistakes.js';
import { fingerprint } from './canonical.js';
import { packageRoot } from './package-root.js';

/** Fingerprint of a file of code and all it imports by relative path, however far: of content, not of a version
 *  somebody must remember to raise. Always of the built files, so that sources and dist/ give the same answer.
 *  @param url    import.meta.url of the file, a source (.ts) or a built file (.js)
 *  @param except urls of files at which the walk stops: they are left out, and what only they import
 *  @throws       Broken 'not-built' where a built file is missing */
export function codeFingerprint(url: string, except: readonly string[] = []): string {
  const start = builtFile(url);
  const key = [start, ...except].join('\n');
  const known = cache.get(key);
  if (known !== undefined) return known;
  const answer = fingerprint(closure(start, new Set(except.map(builtFile))));
  cache.set(key, answer);
  return answer;
}

const cache = new Map<string, string>();

/** Path below dist/ -> SHA-256 of the content, for every file reached. */
function closure(start: string, except: ReadonlySet<string>): Record<string, string> {
  const base = join(packageRoot(start), 'dist');
  const found: Record<string, string> = {};
  const waiting = [start];
  for (let file = waiting.pop(); file !== undefined; file = waiting.pop()) {
    const name = relative(base, file).split(sep).join('/');
    if (name in found || except.has(file)) continue;
    const text = readBuilt(file);
    found[name] = createHash('sha256').update(text).digest('hex');
    waiting.push(...relativeImports(text).map((specifier) => resolve(dirname(file), specifier)));
  }
  return found;
}

/** What the compiler emits has one form: import or export ... from '...', import '...', import('...'). */
function relativeImports(text: string): string[] {
  const pattern = /(?:\bfrom|\bimport)\s*\(?\s*(['"])(\.{1,2}\/[^'"\n]+)\1/g;
  return [...text.matchAll(pattern)].map((match) => match[2]);
}

function builtFile(url: string): string {
  const file = fileURLToPath(new URL(url));
  const root = packageRoot(file);
  const name = relative(root, file);
  if (name.startsWith(`dist${sep}`)) return file;
  return join(root, 'dist', name.replace(/\.ts$/, '.js'));
}

function readBuilt(file: string): string {
  if (!existsSync(file)) throw new Broken('not-built', `${file} is missing: run "npm run build" first`);
  return readFileSync(file, 'utf8');
}
