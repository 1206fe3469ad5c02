import { html, raw, type Safe } from './html.js';

/** Sentences of models and constraints are plain text; on a page their powers are raised and their signs are the
 *  proper ones. */
export function proseHtml(text: string): Safe {
  const typeset = html`${text}`.text
    .replace(/\+-/g, '±')
    .replace(
      /(\d)e\+?(-?)(\d+)\b/g,
      (_, digit: string, sign: string, power: string) => `${digit} × 10^${sign}${power}`,
    )
    .replace(
      /([A-Za-z0-9)])\^(-?\d+)/g,
      (_, base: string, power: string) => `${base}<sup>${power.replace('-', '−')}</sup>`,
    )
    .replace(/(^|[\s(=])-(?=\d)/g, '$1−');
  return raw(typeset);
}
