import type { Span } from './writing.js';

/** Neighbouring and overlapping spans become one; the order is (stratum, first). */
export function mergeSpans(spans: readonly Span[]): Span[] {
  const sorted = [...spans].sort((a, b) => a.stratum - b.stratum || a.first - b.first);
  const merged: Span[] = [];
  for (const span of sorted) {
    const last = merged.at(-1);
    if (last !== undefined && last.stratum === span.stratum && span.first <= endOf(last)) {
      merged[merged.length - 1] = { ...last, count: Math.max(endOf(last), endOf(span)) - last.first };
    } else {
      merged.push({ stratum: span.stratum, first: span.first, count: span.count });
    }
  }
  return merged;
}

/** What is left of a span without `taken`, in order. */
export function subtractSpans(span: Span, taken: readonly Span[]): Span[] {
  const left: Span[] = [];
  let at = span.first;
  for (const hole of mergeSpans(taken)) {
    if (hole.stratum !== span.stratum || endOf(hole) <= at || hole.first >= endOf(span)) continue;
    if (hole.first > at) left.push({ stratum: span.stratum, first: at, count: hole.first - at });
    at = endOf(hole);
  }
  if (at < endOf(span)) left.push({ stratum: span.stratum, first: at, count: endOf(span) - at });
  return left;
}

/** Cuts a span at multiples of `size`. */
export function splitSpan(span: Span, size: number): Span[] {
  const parts: Span[] = [];
  for (let first = span.first; first < endOf(span);) {
    const end = Math.min(endOf(span), (Math.floor(first / size) + 1) * size);
    parts.push({ stratum: span.stratum, first, count: end - first });
    first = end;
  }
  return parts;
}

/** The common part of two spans, if there is one. */
export function intersectSpans(a: Span, b: Span): Span | undefined {
  const first = Math.max(a.first, b.first);
  const count = Math.min(endOf(a), endOf(b)) - first;
  return a.stratum === b.stratum && count > 0 ? { stratum: a.stratum, first, count } : undefined;
}

export function endOf(span: Span): number {
  return span.first + span.count;
}
