import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { root, trigpoint } from './trigpoint.js';

const COMMANDS = [
  'check',
  'launch',
  'rerun',
  'extend',
  'rejudge',
  'watch',
  'list',
  'show',
  'verify',
  'compare',
  'export',
  'point',
  'models',
  'betas',
  'constraints',
  'schema',
  'serve',
  'worker',
];

describe('help', () => {
  it('names every command', async () => {
    const { status, out, err } = await trigpoint(['--help']);
    expect([status, err]).toEqual([0, '']);
    for (const command of COMMANDS) expect(out).toMatch(new RegExp(`^  ${command} `, 'm'));
  });

  it('is what no command at all gives', async () => {
    const [bare, help] = await Promise.all([trigpoint([]), trigpoint(['--help'])]);
    expect(bare).toEqual(help);
  });

  it.each(COMMANDS)('of %s has an example that begins with the command', async (command) => {
    const { status, out } = await trigpoint([command, '--help']);
    expect(status).toBe(0);
    expect(out).toContain(`\nExample:\n  $ trigpoint ${command}`);
  });

  it('prints the version of package.json', async () => {
    const { version } = JSON.parse(readFileSync(`${root}/package.json`, 'utf8')) as { version: string };
    expect(await trigpoint(['--version'])).toMatchObject({ status: 0, out: `${version}\n` });
  });
});
