import type { Stratum } from '../scan/plan.js';

/** The name of the stratum that a stratum was first grown from. */
export function rootOf(stratum: Stratum): string {
  return stratum.grownFrom ?? stratum.name;
}

/** "plane+1", "plane+2", ...: the next free name. User's names have no plus. */
export function grownName(root: string, strata: readonly Stratum[]): string {
  const taken = new Set(strata.map(({ name }) => name));
  let k = 1;
  while (taken.has(`${root}+${k}`)) k++;
  return `${root}+${k}`;
}
