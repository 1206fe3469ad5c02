import { execFileSync } from 'node:child_process';
import { createHash } from 'node:crypto';
import { existsSync, readFileSync } from 'node:fs';
import { arch, availableParallelism, cpus, release, type } from 'node:os';
import { join } from 'node:path';
import type { Environment } from '../store/records.js';
import { packageRoot } from './package-root.js';

/** What a run was made with. Never a secret, a user's name or a path of the machine. */
export function environmentRecord(): Environment {
  const root = packageRoot();
  return {
    trigpoint: packageVersion(root),
    commit: commitOf(root),
    lockFile: lockFileHash(root),
    node: process.versions.node,
    v8: process.versions.v8,
    os: `${type()} ${release()} ${arch()}`,
    processor: cpus()[0]?.model.trim() ?? 'unknown',
    cores: availableParallelism(),
  };
}

/** The version of this package. */
export function packageVersion(root = packageRoot()): string {
  const description: unknown = JSON.parse(readFileSync(join(root, 'package.json'), 'utf8'));
  const version = (description as { version?: unknown }).version;
  return typeof version === 'string' ? version : 'unknown';
}

/** Empty outside a checkout; "+changes" where tracked files differ from the commit. */
function commitOf(root: string): string {
  // Only a checkout of the package itself counts: an installed copy may lie inside somebody else's repository.
  if (!existsSync(join(root, '.git'))) return '';
  const commit = git(root, ['rev-parse', 'HEAD']);
  return commit && git(root, ['status', '--porcelain', '--untracked-files=no'])
    ? `${commit}+changes`
    : commit;
}

function git(root: string, args: readonly string[]): string {
  try {
    const quiet = ['ignore', 'pipe', 'ignore'] as const;
    return execFileSync('git', ['-C', root, ...args], { encoding: 'utf8', stdio: [...quiet] }).trim();
  } catch {
    // No git, or a repository it refuses: the commit is simply not known.
    return '';
  }
}

/** "sha256:..." of the lock file; empty in an installed copy, which has none. */
function lockFileHash(root: string): string {
  const file = join(root, 'package-lock.json');
  if (!existsSync(file)) return '';
  return `sha256:${createHash('sha256').update(readFileSync(file)).digest('hex')}`;
}
