import { element, escapeText } from './svg.js';

/** A stretch of a label in one style. Level 1 is a superscript, -1 a subscript. */
export interface Span {
  readonly text: string;
  readonly italic: boolean;
  readonly level: -1 | 0 | 1;
}
export type Label = readonly Span[];

export function upright(text: string): Label {
  return [{ text, italic: false, level: 0 }];
}

/** Powers of ten as they are printed: 10 with a raised exponent. */
export function powerOfTen(exponent: number): Label {
  return [
    { text: '10', italic: false, level: 0 },
    { text: String(exponent).replace('-', '−'), italic: false, level: 1 },
  ];
}

/** A label as tspans. Browsers disagree on baseline-shift, so raised and lowered text moves by dy and back. */
export function tspans(label: Label, size: number): string {
  let height = 0;
  return label
    .map((span) => {
      const wanted = -span.level * size * (span.level > 0 ? 0.38 : 0.24);
      const dy = wanted - height;
      height = wanted;
      return element(
        'tspan',
        {
          dy: dy === 0 ? undefined : dy,
          'font-size': span.level === 0 ? undefined : size * 0.72,
          'font-style': span.italic ? 'italic' : undefined,
        },
        escapeText(span.text),
      );
    })
    .join('');
}

/** About how wide a label will be, in the unit of `size`: there are no font metrics on the server. */
export function widthOf(label: Label, size: number): number {
  return label.reduce((sum, span) => sum + span.text.length * size * (span.level === 0 ? 0.53 : 0.4), 0);
}

/** The label in a line of plain text, for summaries and screen readers. */
export function plainText(label: Label): string {
  return label
    .map((span) => (span.level === 1 ? `^${span.text}` : span.level === -1 ? `_${span.text}` : span.text))
    .join('');
}
