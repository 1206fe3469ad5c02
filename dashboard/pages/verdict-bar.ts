import type { Counts } from '../../orchestrator/store/records.js';
import { html, type Safe } from '../html.js';

/** Verdicts as lengths of one bar; what is still to come stays empty. The numbers stand beside it in words. */
export function verdictBar(counts: Counts, whole: number): Safe {
  const parts = [
    { name: 'surviving', count: counts.surviving },
    { name: 'excluded', count: counts.excluded },
    { name: 'failed', count: counts.failed },
    { name: 'unfinished', count: counts.unfinished },
  ];
  let x = 0;
  return html`<svg class="bar" viewBox="0 0 1000 10" preserveAspectRatio="none" aria-hidden="true">
    <rect class="bar-rest" width="1000" height="10" />
    ${parts.map((part) => {
      const width = whole > 0 ? (1000 * part.count) / whole : 0;
      const rect = html`<rect
        class="bar-${part.name}"
        x="${x.toFixed(2)}"
        width="${width.toFixed(2)}"
        height="10"
      />`;
      x += width;
      return width > 0 && rect;
    })}
  </svg>`;
}

/** A single share as a length. */
export function shareBar(part: number, whole: number): Safe {
  const width = whole > 0 ? (1000 * part) / whole : 0;
  return html`<svg class="bar" viewBox="0 0 1000 10" preserveAspectRatio="none" aria-hidden="true">
    <rect class="bar-rest" width="1000" height="10" />
    <rect class="bar-surviving" width="${width.toFixed(2)}" height="10" />
  </svg>`;
}
