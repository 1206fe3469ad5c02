import { execFileSync } from 'node:child_process';
import { existsSync, mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';

/* Results have the same bits on Node 20, 22 and 24. The other versions are the npm packages of that name, installed in
 * a temporary folder outside the project; that download is only made where TRIGPOINT_REQUIRE_ALL=1 asks for it, or not
 * at all where TRIGPOINT_NODES names executables (separated by ':'). */

const script = fileURLToPath(new URL('digest-of-evaluation.mjs', import.meta.url));
const built = fileURLToPath(new URL('../../dist/workers/evaluate.js', import.meta.url));
const named = process.env.TRIGPOINT_NODES?.split(':') ?? [];
const wanted = named.length > 0 || process.env.TRIGPOINT_REQUIRE_ALL === '1';
if (!wanted) console.log('other Node versions: skipped (set TRIGPOINT_REQUIRE_ALL=1 or TRIGPOINT_NODES)');

function digest(node: string): string {
  return execFileSync(node, [script], { encoding: 'utf8' }).trim();
}

it('two runs on this Node have the same digest', () => {
  expect(existsSync(built), 'expected npm run build to have run').toBe(true);
  const first = digest(process.execPath);
  expect(first).toMatch(/^[0-9a-f]{64}$/);
  expect(digest(process.execPath)).toBe(first);
});

describe.skipIf(!wanted)('other versions of Node', () => {
  let folder = '';
  let nodes = named;
  afterAll(() => {
    if (folder !== '') rmSync(folder, { recursive: true, force: true });
  });
  beforeAll(() => {
    if (named.length > 0) return;
    folder = mkdtempSync(join(tmpdir(), 'trigpoint-nodes-'));
    const packages = ['node22@npm:node@22', 'node24@npm:node@24'];
    execFileSync('npm', ['install', '--no-audit', '--no-fund', '--prefix', folder, ...packages], {
      stdio: 'pipe',
    });
    nodes = ['node22', 'node24'].map((name) => {
      const home = join(folder, 'node_modules', name);
      // The package fetches the executable in an install script, which npm may have been told not to run.
      if (!existsSync(join(home, 'bin/node')))
        execFileSync(process.execPath, ['installArchSpecificPackage.js'], { cwd: home });
      return join(home, 'bin/node');
    });
  }, 300_000);

  it('have the digest of this one', () => {
    const here = digest(process.execPath);
    const versions = nodes.map((node) => execFileSync(node, ['--version'], { encoding: 'utf8' }).trim());
    expect(new Set(versions).size).toBe(nodes.length);
    expect(nodes.map(digest)).toEqual(nodes.map(() => here));
  });
});
