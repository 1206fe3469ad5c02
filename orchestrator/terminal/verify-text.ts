import type { VerifyFacts } from '../commands/verify.js';
import { differencesText } from './compare-text.js';
import { bytes, count } from './numbers.js';

export function verifyText(facts: VerifyFacts): string {
  const { integrity, recomputed, points, differing, skipped, changed } = facts;
  const again = `${count(recomputed)} of ${count(points)} points computed again`;
  const result = differing === 0 ? 'every bit agrees' : `${count(differing)} differ`;
  const lines = [
    `run ${facts.run}  digest ${facts.digest ?? 'none'}`,
    `stored bytes as they were written: ${bytes(integrity.bytes)} in ${count(integrity.segments)} segments`,
    `${again}: ${result}`,
  ];
  if (skipped > 0) lines.push(`${count(skipped)} unfinished points have nothing to compare`);
  for (const { stratum, index, columns } of facts.examples)
    lines.push(`point ${stratum}.${index} differs in ${columns.join(', ')}`);
  if (changed.length > 0) lines.push('not as when the run was made:', differencesText(changed));
  return lines.join('\n');
}
