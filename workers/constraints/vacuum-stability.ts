import type { Constraint } from '../contract.js';
import { METASTABLE, NOT_PERTURBATIVE, STABLE, VACUUM_CLASSES } from '../spectrum/vacuum-class.js';

const NEEDS = [
  'vacuumClass',
  'lambdaEffMin',
  'metastabilityMargin',
  'vacuumDecayExponent',
  'instabilityScale',
];

/** The electroweak vacuum is the deepest below the cut-off, or at least has survived until today. */
export const vacuumStability: Constraint = {
  name: 'vacuum-stability',
  code: import.meta.url,
  title: 'Stability of the electroweak vacuum',
  needs: NEEDS,
  options: {
    accept: {
      kind: 'choice',
      values: ['stable', 'metastable'],
      default: 'stable',
      meaning: 'the least stable vacuum accepted',
    },
  },
  marginScale: 'the quartic: lowest lambda_eff (stable) or lowest lambda - lambda_critical (metastable)',
  formula:
    '\\lambda_{\\mathrm{eff}}(h) \\geq 0 \\mathrm{ or } \\lambda(\\mu) > \\lambda_{\\mathrm{crit}}(\\mu)',
  sources: [
    { text: 'Casas, Espinosa and Quiros, 1995, improved effective potential', ref: 'hep-ph/9409458' },
    { text: 'Degrassi et al., 2012, Higgs mass and vacuum stability', ref: 'arXiv:1205.6497' },
    { text: 'Isidori, Ridolfi and Strumia, 2001, metastability', ref: 'hep-ph/0104016' },
    { text: 'Buttazzo et al., 2013, near-criticality', ref: 'arXiv:1307.3536' },
  ],
  validity:
    'fields between M_t and the cut-off; not applicable where a coupling passes 4 pi below the cut-off before the vacuum is found unstable',
  neglects:
    'two loops of the potential, determinants and gravity in the decay, thermal and inflationary decay, and whatever lies beyond the cut-off; ' +
    'the theory error of the matching moves the border of absolute stability by about 0.3 GeV of M_h',
  judge(columns, options, into) {
    const [fate, effective, metastable] = NEEDS.map((name) => columns.get(name)!);
    const strict = options.accept === 'stable';
    for (let i = 0; i < into.outcome.length; i++) {
      const worst = strict ? STABLE : METASTABLE;
      const known = fate[i] !== NOT_PERTURBATIVE && !Number.isNaN(fate[i]);
      into.outcome[i] = !known ? 2 : fate[i] <= worst ? 0 : 1;
      into.margin[i] = !known ? NaN : strict ? effective[i] : Math.max(effective[i], metastable[i]);
      into.logLikelihood[i] = NaN;
    }
  },
  explain(values, options) {
    const [fate, effective, , exponent, scale] = NEEDS.map((name) => values.get(name) ?? NaN);
    const parts = [
      `${VACUUM_CLASSES[fate] ?? 'unknown'}, ${options.accept} accepted; lowest lambda_eff ${effective.toPrecision(3)}`,
    ];
    if (!Number.isNaN(scale))
      parts.push(`the potential is below ours from h = ${scale.toExponential(2)} GeV`);
    if (!Number.isNaN(exponent)) parts.push(`probability to have decayed by today 10^${exponent.toFixed(0)}`);
    return parts.join('; ');
  },
};
