/** The same bits everywhere: one digest of many results, the same on every Node, processor and operating system.
 *  It changes only with an algorithm: then say so in the change that renews it. */
import { createHash } from 'node:crypto';
import { expect, it } from 'vitest';
import { createDop853 } from '../../../workers/numerics/dop853.js';
import { exp } from '../../../workers/numerics/exp.js';
import { log, log10, log1p } from '../../../workers/numerics/log.js';
import { normalQuantile } from '../../../workers/numerics/normal-quantile.js';
import { pow } from '../../../workers/numerics/pow.js';

const DIGESTS = {
  exp: '2fb5016dc0641bf833f3ea7e1200010fea9d7cc15f9f69a6af3d9a8995c86c69',
  log: '78237d5b15edbaf224cd63b1e3e10a3cd4279170628b7328cd1b0bc9a092572e',
  log10: '06258b3e4aadeb0cf7535c73676a0a231956a7539721fa5bf6c9a7d55e064dbf',
  log1p: 'b6b182dfaaf6119992d9231b40f185c777fc381e454cf36992d0822f0039e533',
  pow: 'a9fb8be7e05d5d258f20b4cc4ca82c1457267487802066d880c8905787d41da8',
  quantile: '9b5577b563bb204bbb8b4205ec0060e60ceea3bf63336c98733407d9b6432eb3',
  trajectory: 'f2c32208a569104b46a84afb6830e479b69d13c36528eaa3e8f651131295623b',
};

/** A fixed sequence in (0, 1): S. K. Park, K. W. Miller, Comm. ACM 31 (1988) 1192. */
function sequence(count: number): number[] {
  let state = 1;
  return Array.from({ length: count }, () => (state = (state * 16807) % 2147483647) / 2147483647);
}

function trajectory(): number[] {
  const solver = createDop853(3, (t, y, d) => {
    d[0] = 10 * (y[1] - y[0]);
    d[1] = y[0] * (28 - y[2]) - y[1] + 0.1 * t;
    d[2] = y[0] * y[1] - (8 / 3) * y[2];
  });
  solver.integrate(0, 30, [1, 1, 1], { rtol: 1e-9, atol: 1e-9, maxSteps: 10_000 });
  return sequence(500).map((u, i) => solver.component(i % 3, 30 * u));
}

const arguments_ = sequence(20_000);
const results = {
  exp: () => arguments_.map((u) => exp(1500 * (u - 0.5))),
  log: () => arguments_.map((u) => log(u / (1 - u))),
  log10: () => arguments_.map((u) => log10(1e6 * u)),
  log1p: () => arguments_.map((u) => log1p(3 * u - 1)),
  pow: () => arguments_.map((u) => pow(100 * u, 40 * (u - 0.4))),
  quantile: () => arguments_.map(normalQuantile),
  trajectory,
};

it.each(Object.entries(DIGESTS))('%s has the bits of every other machine', (name, digest) => {
  const values = results[name as keyof typeof results]();
  const bytes = Buffer.alloc(8 * values.length);
  values.forEach((value, i) => bytes.writeDoubleLE(value, 8 * i));
  expect(createHash('sha256').update(bytes).digest('hex')).toBe(digest);
});
