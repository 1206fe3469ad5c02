/** One million rows of filters, against the same loop written by hand. */
import { compile } from '../../dist/workers/expressions/compile.js';
import { best, report } from './timing.mjs';

const ROWS = 1e6;
const names = ['a', 'b', 'c'];
/** A fixed sequence without pattern (multiplicative congruential, Park and Miller 1988). */
let state = 1;
const next = () => (state = (state * 16807) % 2147483647) / 2147483647;
const columns = new Map(names.map((name) => [name, Float64Array.from({ length: ROWS }, next)]));
const out = new Float64Array(ROWS);

function byHand() {
  const [a, b, c] = names.map((name) => columns.get(name));
  for (let i = 0; i < ROWS; i++) out[i] = a[i] > 0.3 && b[i] < 0.5 && a[i] * b[i] + c[i] > 0.2 ? 1 : 0;
}

const reference = best(byHand);
for (const text of ['a > 0.3 and b < 0.5 and a * b + c > 0.2', '0.1 < a < 0.5', 'a^2 + b^2', 'log10(a)']) {
  const compiled = compile(text);
  report(
    `1e6 rows of ${text}`,
    best(() => compiled.evaluate(columns, ROWS, out)),
    reference,
    'the filter by hand',
  );
}
