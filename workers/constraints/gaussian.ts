import type { Constraint, OptionSpec, Options } from '../contract.js';
import type { Measurement } from './data/measured.js';

/** What a Gaussian likelihood of one measured number needs to be told. */
export interface Gaussian {
  readonly name: string;
  readonly code: string;
  readonly title: string;
  /** Columns whose sum is compared with the measurement. */
  readonly needs: readonly string[];
  readonly unit: string;
  /** Symbol of the compared number in the TeX subset. */
  readonly symbol: string;
  readonly measurement: Measurement;
  /** Values that the options may move the measurement and its error to. */
  readonly range: readonly [number, number];
  readonly validity: string;
  readonly neglects: string;
}

/** The constraint x = (value - measured)/sigma: met within `accept` standard deviations, ln L = -x^2/2. */
export function gaussian(spec: Gaussian): Constraint {
  const { needs, symbol, measurement, range, unit } = spec;
  const { value, sigma } = measurement;
  return {
    name: spec.name,
    code: spec.code,
    title: spec.title,
    needs,
    options: {
      accept: number([0.01, 100], '1', 2, 'standard deviations up to which a point is accepted'),
      value: number(range, unit, value, 'measured value'),
      sigma: number([1e-3 * sigma, 1e3 * sigma], unit, sigma, 'one standard deviation of the measurement'),
    },
    marginScale: 'standard deviations inside the accepted range',
    formula: `x = (${symbol} - ${symbol}^{\\mathrm{meas}})/\\sigma`,
    sources: [measurement.source],
    validity: spec.validity,
    neglects: spec.neglects,
    judge(columns, options, into) {
      const terms = needs.map((need) => columns.get(need)!);
      const accept = Number(options.accept);
      for (let i = 0; i < into.outcome.length; i++) {
        const x = deviation(sum(terms, i), options);
        into.outcome[i] = Number.isNaN(x) ? 2 : Math.abs(x) <= accept ? 0 : 1;
        into.margin[i] = accept - Math.abs(x);
        into.logLikelihood[i] = -0.5 * x * x;
      }
    },
    explain(values, options) {
      const found = needs.reduce((total, need) => total + (values.get(need) ?? NaN), 0);
      const x = deviation(found, options);
      const size = `${found.toPrecision(7)} against ${options.value} +- ${options.sigma}`;
      return `${size}${unit === '1' ? '' : ` ${unit}`}: ${x.toFixed(2)} standard deviations, ${options.accept} accepted`;
    },
  };
}

function sum(terms: readonly Float64Array[], i: number): number {
  let total = 0;
  for (const term of terms) total += term[i];
  return total;
}

function deviation(value: number, options: Options): number {
  return (value - Number(options.value)) / Number(options.sigma);
}

function number(
  range: readonly [number, number],
  unit: string,
  standard: number,
  meaning: string,
): OptionSpec {
  return { kind: 'number', range, unit, default: standard, meaning };
}
