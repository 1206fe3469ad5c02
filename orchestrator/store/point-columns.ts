import { FAILURES, VERDICTS } from '../../workers/contract.js';
import type { ColumnRecord } from './records.js';

/** Columns that every run has. */
export function pointColumns(): ColumnRecord[] {
  const point = { kind: 'point', unit: '1' } as const;
  return [
    { ...point, name: 'stratum', symbol: 's', meaning: 'part of the plan the point belongs to, from 0' },
    { ...point, name: 'index', symbol: 'i', meaning: 'place of the point in its stratum, from 0' },
    {
      ...point,
      name: 'verdict',
      symbol: '\\mathrm{verdict}',
      meaning: 'what the deciding constraints say together',
      labels: VERDICTS,
    },
    {
      ...point,
      name: 'failure',
      symbol: '\\mathrm{failure}',
      meaning: 'why a failed point failed',
      labels: FAILURES,
    },
  ];
}
