import { describe, expect, it } from 'vitest';
import type { Block } from '../../../workers/contract.js';
import { standardModelInputs } from '../../../workers/models/standard-model-inputs.js';
import { matching } from '../../../workers/running/matching.js';

const CENTRE = { Mt: 173.34, Mh: 125.15, alphaS: 0.1184, MW: 80.384 };

function match(changes: Readonly<Record<string, number>>): (name: string) => number {
  const columns = new Map<string, Float64Array>(
    standardModelInputs.map(({ name, default: value }) => [name, Float64Array.of(changes[name] ?? value)]),
  );
  const block: Block = { count: 1, columns, failure: new Uint8Array(1) };
  matching().evaluate(block);
  return (name) => columns.get(name)![0];
}

describe('matching at mu = M_t', () => {
  it('gives the published centre (arXiv:1307.3536)', () => {
    const value = match(CENTRE);
    expect(value('lambdaAtStart')).toBe(0.12604);
    expect(value('ytAtStart')).toBe(0.9369);
    expect(value('g2AtStart')).toBe(0.64779);
    expect(value('gYAtStart')).toBe(0.3583);
    expect(value('g3AtStart')).toBe(1.1666);
    expect(Math.sqrt(-2 * value('m2AtStart'))).toBeCloseTo(131.55, 10);
    expect(value('g1AtStart')).toBeCloseTo(Math.sqrt(5 / 3) * 0.3583, 14);
  });

  it.each([
    ['Mh', 1, 'lambdaAtStart', 0.00206 + 8.2e-6],
    ['Mt', 1, 'lambdaAtStart', -0.00004],
    ['Mt', 1, 'ytAtStart', 0.00556],
    ['alphaS', 0.0007, 'ytAtStart', -0.00042],
    ['Mt', 1, 'g3AtStart', -0.00046],
    ['alphaS', 0.0007, 'g3AtStart', 0.00314],
    ['MW', 0.014, 'g2AtStart', 0.00011],
    ['MW', 0.014, 'gYAtStart', -0.0002],
    ['Mt', 1, 'gYAtStart', 0.00011],
    ['Mt', 1, 'g2AtStart', 0.00004],
    ['lambdaShift', 0.0003, 'lambdaAtStart', 0.0003],
    ['ytShift', 0.0005, 'ytAtStart', 0.0005],
  ] as const)('%s + %s moves %s by the published slope', (input, step, quantity, change) => {
    const base = match(CENTRE)(quantity);
    const moved = match({ ...CENTRE, [input]: (CENTRE[input as keyof typeof CENTRE] ?? 0) + step })(quantity);
    expect(moved - base).toBeCloseTo(change, 12);
  });

  it('follows M_h^2/(2 v^2) away from the centre, up to the few per cent of loops', () => {
    for (const Mh of [100, 115, 125.15, 135, 150]) {
      const tree = Mh ** 2 / (2 * 246.22 ** 2);
      expect(Math.abs(match({ ...CENTRE, Mh })('lambdaAtStart') - tree)).toBeLessThan(0.004);
      // What is left over is the loop correction at the centre: it moves by far less than the theory error.
      const correction = match({ ...CENTRE, Mh })('lambdaAtStart') - tree;
      expect(Math.abs(correction + 0.00313)).toBeLessThan(Math.abs(Mh - 125.15) < 13 ? 0.0003 : 0.0006);
    }
  });

  it('agrees with the MSbar electroweak couplings at M_Z (PDG 2024), run at one loop', () => {
    const e2 = (4 * Math.PI) / 127.93;
    const t = Math.log(172.57 / 91.188) / (16 * Math.PI ** 2);
    const g2 = 1 / Math.sqrt(0.23129 / e2 + 2 * (19 / 6) * t);
    const gY = 1 / Math.sqrt((1 - 0.23129) / e2 - 2 * (41 / 6) * t);
    // The measured couplings have five flavours, no top loop in alpha: three parts in a thousand.
    expect(match({})('g2AtStart') / g2).toBeCloseTo(1, 2);
    expect(match({})('gYAtStart') / gY).toBeCloseTo(1, 2);
  });

  it.each([
    [{}, 0],
    [{ Mt: 163.3 }, 1],
    [{ Mt: 183.4 }, 1],
    [{ Mh: 138 }, 1],
    [{ Mh: 113.2 }, 0],
    [{ alphaS: 0.124 }, 1],
    [{ MW: 80.0 }, 1],
  ])('flags %o as %s (0 inside, 1 outside the range)', (changes, flag) => {
    expect(match({ ...CENTRE, ...changes })('matchingRange')).toBe(flag);
  });

  it('does not read M_Z, G_F or the cut-off', () => {
    expect(matching().needs).not.toContain('MZ');
    expect(matching().needs).not.toContain('GF');
    const value = match({ MZ: 92, GF: 1.15e-5, cutoff: 1e5 });
    for (const { name } of matching().gives) expect(value(name)).toBe(match({})(name));
  });
});
