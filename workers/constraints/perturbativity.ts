import type { Constraint } from '../contract.js';
import { log } from '../numerics/log.js';
import { FOUR_PI } from '../running/perturbativity.js';

const NEEDS = ['largestGauge', 'largestYukawa', 'largestQuartic', 'perturbativityScale'];

/** Every coupling stays small enough for an expansion in it up to the cut-off. */
export const perturbativity: Constraint = {
  name: 'perturbativity',
  code: import.meta.url,
  title: 'Perturbativity up to the cut-off',
  needs: NEEDS,
  options: {
    limit: {
      kind: 'number',
      range: [0.01, 50],
      unit: '1',
      default: FOUR_PI,
      meaning: 'largest g^2, y^2 and |lambda| accepted at any scale',
    },
  },
  marginScale: 'ln(limit/largest of g^2, y^2, |lambda|)',
  formula: '\\mathrm{max}(g^{2}, y^{2}, |\\lambda|) \\leq 4\\pi',
  sources: [{ text: 'limit of 4 pi: common practice, no source', ref: '' }],
  validity: 'any point; the running stops, and the margin with it, where a coupling passes 16 pi',
  neglects:
    'that an expansion is poor well below the limit: at two loops lambda only approaches an artificial fixed point near 12.1, ' +
    'just below 4 pi, so use a lower limit there; partial-wave unitarity asks for |lambda| < 4 pi/3',
  judge(columns, options, into) {
    const [gauge, yukawa, quartic] = NEEDS.map((name) => columns.get(name)!);
    const limit = Number(options.limit);
    for (let i = 0; i < into.outcome.length; i++) {
      const value = largest(gauge[i], yukawa[i], quartic[i]);
      into.outcome[i] = Number.isNaN(value) ? 2 : value <= limit ? 0 : 1;
      into.margin[i] = log(limit / value);
      into.logLikelihood[i] = NaN;
    }
  },
  explain(values, options) {
    const [gauge, yukawa, quartic, scale] = NEEDS.map((name) => values.get(name) ?? NaN);
    const value = largest(gauge, yukawa, quartic);
    const which =
      value === Math.abs(quartic)
        ? '|lambda|'
        : value === gauge * gauge
          ? 'a gauge coupling squared'
          : 'a Yukawa coupling squared';
    const size = `largest of g^2, y^2, |lambda|: ${value.toPrecision(4)} (${which}), limit ${Number(options.limit).toPrecision(4)}`;
    return Number.isNaN(scale)
      ? `${size}; below 4 pi at every scale`
      : `${size}; 4 pi is passed at ${scale.toExponential(3)} GeV`;
  },
};

function largest(gauge: number, yukawa: number, quartic: number): number {
  return Math.max(gauge * gauge, yukawa * yukawa, Math.abs(quartic));
}
