import { execFileSync } from 'node:child_process';
import { Ajv2020 } from 'ajv/dist/2020.js';
import { describe, expect, it } from 'vitest';
import { parse } from 'yaml';
import { document, newFolder, planeScan, root, start, trigpoint } from './trigpoint.js';

/** Commands that need no store, as a process: what goes where, and the shape of every document. */

const PLANCK = ['Mt=173.34', 'Mh=125.15', 'alphaS=0.1184', 'MW=80.384', 'cutoff=1.2209e19'];

interface Value {
  readonly value: number | null;
  readonly unit: string;
}

describe('point --json', () => {
  it('prints one document in its stable shape', async () => {
    const { status, out, err } = await trigpoint(['point', 'sm', '--set', ...PLANCK, '--json']);
    expect([status, err]).toEqual([0, '']);
    const facts = JSON.parse(out) as Record<string, unknown>;
    expect(Object.keys(facts).sort()).toEqual([
      'constraints',
      'couplings',
      'fingerprint',
      'format',
      'inputs',
      'model',
      'quantities',
      'reason',
      'verdict',
    ]);
    expect(facts).toMatchObject({
      format: 1,
      model: 'sm',
      inputs: { Mt: { value: 173.34, unit: 'GeV' }, alphaS: { value: 0.1184, unit: '1' } },
      couplings: [
        { at: 'start', scale: { value: 173.34, unit: 'GeV' } },
        { at: 'cutoff', scale: { value: 1.2209e19, unit: 'GeV' } },
      ],
      verdict: 'excluded',
      reason: null,
    });
    expect(facts.fingerprint).toMatch(/^sha256:[0-9a-f]{64}$/);
    const { instabilityScale } = facts.quantities as Record<string, Value>;
    // Common practice, no source: stability is lost near 1e10 to 1e11 GeV for these masses.
    expect(instabilityScale.value).toBeGreaterThan(1e10);
    expect(instabilityScale.value).toBeLessThan(1e11);
    const stability = (facts.constraints as Record<string, { outcome: string }>)['vacuum-stability'];
    expect(stability.outcome).toBe('violated');
  });

  it('is the same to the last digit a second time', async () => {
    const words = ['point', 'sm', '--set', ...PLANCK, '--json'];
    const [first, second] = await Promise.all([trigpoint(words), trigpoint(words)]);
    expect(first.out).toBe(second.out);
  });

  it('says the same to people', async () => {
    const { out } = await trigpoint(['point', 'sm', '--set', ...PLANCK]);
    expect(out).toMatch(/^sm: excluded\n/);
    expect(out).toMatch(/^vacuum-stability +decides +violated /m);
    expect(out).toMatch(/^fingerprint {2}sha256:[0-9a-f]{64}$/m);
  });
});

describe('betas --json', () => {
  /** With all other couplings 0 the one-loop gauge terms stand alone: d g/dt = b g^3/(16 pi^2) with
   *  b = (41/10, -19/6, -7) for g1, g2, g3. Source: Machacek and Vaughn, Nucl. Phys. B222 (1983) 83. */
  it.each([
    ['g1', 41 / 10],
    ['g2', -19 / 6],
    ['g3', -7],
  ])('has the known one-loop coefficient of %s', async (name, b) => {
    const { couplings } = await document(['betas', 'sm', '--at', `${name}=0.7`]);
    const beta = (couplings as Record<string, { one_loop: number; two_loop: number; total: number }>)[name];
    expect(beta.one_loop).toBeCloseTo((b * 0.7 ** 3) / (16 * Math.PI ** 2), 14);
    expect(beta.total).toBe(beta.one_loop + beta.two_loop);
  });
});

describe('catalogues', () => {
  it('list the model with its inputs, units and sources', async () => {
    const { models } = await document(['models']);
    expect((models as { name: string }[]).map((model) => model.name)).toContain('sm');
    const { inputs } = await document(['models', 'sm']);
    for (const input of inputs as { unit: string; source: { text: string } }[]) {
      expect(input.unit).not.toBe('');
      expect(input.source.text).not.toBe('');
    }
  });

  it('list the constraints with their sources and what they neglect', async () => {
    const { constraints } = await document(['constraints']);
    for (const constraint of constraints as { sources: unknown[]; neglects: string }[]) {
      expect(constraint.sources.length).toBeGreaterThan(0);
      expect(constraint.neglects).not.toBe('');
    }
  });
});

describe('schema', () => {
  it('is a JSON Schema that accepts a scan file and refuses one with a misspelt section', async () => {
    const { out } = await trigpoint(['schema']);
    const validate = new Ajv2020({ strict: false }).compile(JSON.parse(out) as object);
    expect(validate(parse(planeScan(100)))).toBe(true);
    expect(validate(parse(planeScan(100).replace('vary:', 'varied:')))).toBe(false);
  });
});

describe('the program as a citizen of a shell', () => {
  it('ends quietly when its reader has enough', async () => {
    const running = start(['models', 'sm', '--json']);
    running.process.stdout?.destroy();
    const { status, err } = await running.ended;
    expect([status, err]).toEqual([0, '']);
  });

  it('is what npx runs in the folder of the package', () => {
    // A cache of its own, as on a fresh machine. Without scripts: a build now would pull dist/ from under other tests.
    const env = { ...process.env, npm_config_cache: newFolder(), npm_config_ignore_scripts: 'true' };
    const out = execFileSync('npx', ['trigpoint', 'models', '--json'], {
      cwd: root,
      encoding: 'utf8',
      env,
      stdio: ['ignore', 'pipe', 'ignore'],
    });
    expect(JSON.parse(out)).toMatchObject({ format: 1 });
  });
});
