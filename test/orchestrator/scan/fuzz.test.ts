import { readFileSync } from 'node:fs';
import fc from 'fast-check';
import { expect, test } from 'vitest';
import { samplerOf } from '../../../orchestrator/sampling/sampler.js';
import { FileMistakes } from '../../../orchestrator/mistakes.js';
import { readScan } from '../../../orchestrator/scan/read-scan.js';
import { taskOf } from '../../../orchestrator/scan/task.js';

const SHIPPED = readFileSync(new URL('../../../scans/electroweak-vacuum.yaml', import.meta.url), 'utf8');
const RICH = `
model: sm
seed: "s"
sample:
  - { name: a, method: latin-hypercube, points: 7, vary: { MW: { gaussian: [80.4, 0.01] } } }
  - { name: b, method: grid, vary: { Mt: { range: [165, 180], steps: 3 }, Mh: { list: [124, 125] } } }
vary:
  Mt: { range: [0.165, 0.18], unit: TeV }
  Mh: { list: [124, 125, 126] }
fix: { MZ: { value: 91.2, unit: GeV }, mb: 4.2 }
define: { x: Mt / Mh, cutoff: 10^(16 + x), y: "x * 2 < 3 and not x > 5" }
running: { loops: 2 }
require: [{ vacuum-stability: { accept: metastable } }]
note: [perturbativity]
keep: [x, lambdaMin]
`;

/** Either a plan whose points can be drawn, or mistakes that each have a place; anything else is a fault. */
function ends(bytes: Uint8Array): void {
  const lines = Buffer.from(bytes).toString('latin1').split(/\n/).length;
  try {
    const { plan } = readScan(bytes, 'f');
    const columns = taskOf(plan).varied.length;
    plan.strata.forEach(({ points }, s) => {
      const { values } = samplerOf(plan, s).fill(points - 1, 1);
      expect(values.length).toBe(columns);
      expect(values.every(Number.isFinite)).toBe(true);
    });
  } catch (error) {
    if (!(error instanceof FileMistakes)) throw error;
    expect(error.mistakes.length).toBeGreaterThan(0);
    for (const { line, column, expected, found } of error.mistakes) {
      expect(line).toBeGreaterThanOrEqual(1);
      expect(line).toBeLessThanOrEqual(lines + 1);
      expect(column).toBeGreaterThanOrEqual(1);
      expect(expected).not.toBe('');
      expect(found).not.toBe('');
    }
  }
}

const base = fc.constantFrom(SHIPPED, RICH);
const token = fc.constantFrom(
  ...[
    '{',
    '}',
    '[',
    ']',
    ':',
    ': ',
    '- ',
    ',',
    '"',
    "'",
    '&a ',
    '*a',
    '!!int ',
    '!x ',
    '|',
    '>',
    '#',
    '\n',
    '\t',
    ' ',
    '%',
    '?',
  ],
  ...[
    '.nan',
    '.inf',
    '-1',
    '0',
    '1e999',
    '1e-320',
    '-0.0',
    'null',
    '~',
    'true',
    '12345678901234567890',
    '0x10',
    '1_0',
  ],
  ...[
    'Mt',
    'cutoff',
    'sm',
    'sobol',
    'grid',
    'vary',
    'log',
    'steps',
    'all',
    '__proto__',
    'constructor',
    'toString',
    '<<',
  ],
  ...['\ufeff', '\u2028', '\u0000', '\ud800', '\u00e9', '\u{1f600}', '((((', 'a'.repeat(300)],
);

test('any characters put in, taken out or exchanged end in a plan or in mistakes with places', () => {
  const edit = fc.tuple(
    fc.double({ min: 0, max: 1, noNaN: true }),
    fc.integer({ min: 0, max: 12 }),
    fc.option(token, { nil: '' }),
  );
  fc.assert(
    fc.property(base, fc.array(edit, { minLength: 1, maxLength: 4 }), (text, edits) => {
      const mutated = edits.reduce((sofar, [where, cut, put]) => {
        const at = Math.floor(where * sofar.length);
        return sofar.slice(0, at) + put + sofar.slice(at + cut);
      }, text);
      ends(new TextEncoder().encode(mutated));
    }),
    { numRuns: 600 },
  );
});

test('any bytes changed do too', () => {
  const edit = fc.tuple(fc.double({ min: 0, max: 1, noNaN: true }), fc.integer({ min: 0, max: 255 }));
  fc.assert(
    fc.property(base, fc.array(edit, { minLength: 1, maxLength: 5 }), (text, edits) => {
      const bytes = new TextEncoder().encode(text);
      for (const [where, byte] of edits)
        bytes[Math.min(Math.floor(where * bytes.length), bytes.length - 1)] = byte;
      ends(bytes);
    }),
    { numRuns: 300 },
  );
});

test('lines exchanged, repeated or left out do too', () => {
  fc.assert(
    fc.property(base, fc.array(fc.nat(), { minLength: 1, maxLength: 80 }), (text, picks) => {
      const lines = text.split('\n');
      ends(new TextEncoder().encode(picks.map((pick) => lines[pick % lines.length]).join('\n')));
    }),
    { numRuns: 200 },
  );
});

test('any value in any place of a good file does too', () => {
  const values = fc.oneof(
    fc.jsonValue(),
    fc.constantFrom<unknown>(1e400, NaN, -1, 0, 'sobol', 'Mt', [], {}, [1, 2], { range: [1, 2] }),
  );
  fc.assert(
    fc.property(fc.nat(), values, (pick, value) => {
      const scan = JSON.parse(JSON.stringify(JSON_SCAN)) as Record<string, unknown>;
      const places = placesIn(scan);
      const [holder, key] = places[pick % places.length];
      holder[key] = value;
      ends(new TextEncoder().encode(JSON.stringify(scan)));
    }),
    { numRuns: 600 },
  );
});

const JSON_SCAN = {
  title: 't',
  model: { name: 'sm', options: {} },
  seed: 1,
  sample: [
    { name: 'a', method: 'sobol', points: 5, vary: { Mt: { range: [165, 180], unit: 'GeV', scale: 'log' } } },
  ],
  vary: { Mh: { gaussian: [125, 0.1] }, alphaS: { list: [0.118] } },
  fix: { MW: { value: 80, unit: 'GeV' }, MZ: 91 },
  define: { a: 'Mt / Mh', cutoff: '1e16' },
  running: { loops: 3, tolerance: 1e-9 },
  require: ['perturbativity', { 'vacuum-stability': { accept: 'stable' } }],
  note: [],
  keep: ['all'],
};

type Holder = Record<string | number, unknown>;

function placesIn(value: unknown): [Holder, string | number][] {
  if (typeof value !== 'object' || value === null) return [];
  const holder = value as Holder;
  const keys = Array.isArray(value) ? [...value.keys()] : Object.keys(value);
  return keys.flatMap((key) => [[holder, key] as [Holder, string | number], ...placesIn(holder[key])]);
}
