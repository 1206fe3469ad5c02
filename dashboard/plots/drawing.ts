import { FAINT, INK, PAPER } from './colours.js';
import { tspans, upright, type Label } from './label.js';
import { element, escapeText } from './svg.js';

/** Pixels of the drawing and of its text. */
export interface Size {
  readonly width: number;
  readonly height: number;
  readonly text: number;
}
export const WIDE: Size = { width: 760, height: 540, text: 15 };
/** For telephones, where a wide drawing would shrink its text below reading size. */
export const NARROW: Size = { width: 390, height: 400, text: 13 };

export interface Box {
  readonly left: number;
  readonly top: number;
  readonly right: number;
  readonly bottom: number;
}

/** What goes around the marks of any plot. */
export interface Setting {
  readonly size: Size;
  /** The drawing in a sentence or two, for those who cannot see it. */
  readonly summary: string;
  /** Lines printed under a drawing that leaves its page: which run, which points. */
  readonly notes: readonly string[];
  /** A drawing inside a page carries its rasters for dark pages too. */
  readonly place: 'page' | 'file';
}

const FONTS =
  "'STIX Two Text', 'Libertinus Serif', Charter, 'Bitstream Charter', Cambria, Georgia, 'Liberation Serif', serif";

/** The finished SVG document. Colours are presentation attributes, which a page may override by class and which
 *  need no style element that a content policy would forbid. */
export function drawing(setting: Setting, ...body: readonly string[]): string {
  const { width, height, text } = setting.size;
  const lines = setting.notes.flatMap((note) => wrap(note, Math.floor((width - 24) / (text * 0.78 * 0.47))));
  const total = height + (lines.length > 0 ? lines.length * text * 1.25 + 8 : 0);
  return element(
    'svg',
    {
      xmlns: 'http://www.w3.org/2000/svg',
      viewBox: `0 0 ${width} ${Math.ceil(total)}`,
      width: setting.place === 'file' ? width : undefined,
      height: setting.place === 'file' ? Math.ceil(total) : undefined,
      role: 'img',
      'aria-label': setting.summary,
      'font-family': FONTS,
      'font-size': text,
      fill: INK,
      class: 'plot',
    },
    setting.place === 'file' ? element('title', {}, escapeText(setting.summary)) : '',
    element('rect', { class: 'paper', width: '100%', height: '100%', fill: PAPER }),
    ...body,
    ...lines.map((line, i) =>
      write(upright(line), 12, height + 4 + (i + 0.7) * text * 1.25, text * 0.78, {
        fill: FAINT,
        class: 'faint',
      }),
    ),
  );
}

/** A line of text at a place. */
export function write(
  label: Label,
  x: number,
  y: number,
  size: number,
  attributes: Readonly<Record<string, string | number | undefined>> = {},
): string {
  return element('text', { x, y, 'font-size': size, ...attributes }, tspans(label, size));
}

function wrap(text: string, width: number): string[] {
  const lines: string[] = [];
  let line = '';
  for (const word of text.split(' ')) {
    if (line !== '' && line.length + word.length + 1 > width) {
      lines.push(line);
      line = '';
    }
    line = line === '' ? word : `${line} ${word}`;
  }
  return [...lines, line].filter((one) => one !== '');
}
