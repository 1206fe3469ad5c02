import { html, type Safe } from './html.js';

/** How numbers are written on pages; the same in every locale. A number too long for a table keeps all its digits
 *  in the `value` of a data element, in exports and in commands. */

/** 12400 -> "12 400", with narrow no-break spaces. */
export function countText(n: number): string {
  return String(Math.round(n)).replace(/\B(?=(\d{3})+$)/g, '\u202f');
}

/** A physical value with its significant digits and, where it is far from 1, a power of ten.
 *  @param digits at most; 'all' means as many as tell the number from every other */
export function valueHtml(value: number | null | undefined, digits: number | 'all' = 6): Safe {
  if (value === null || value === undefined || Number.isNaN(value)) {
    return html`<span class="absent">–<span class="unseen">absent</span></span>`;
  }
  const { mantissa, exponent } = split(value, digits);
  const power = exponent === 0 ? '' : html`&thinsp;×&thinsp;10<sup>${minus(String(exponent))}</sup>`;
  return html`<data value="${String(value)}">${minus(mantissa)}${power}</data>`;
}

export function valueText(value: number | null | undefined, digits = 6): string {
  if (value === null || value === undefined || Number.isNaN(value)) return 'absent';
  const { mantissa, exponent } = split(value, digits);
  return exponent === 0 ? mantissa : `${mantissa}e${exponent}`;
}

/** 102.4 -> "1 min 42 s". */
export function durationText(seconds: number): string {
  if (seconds < 1) return `${Math.max(0, Math.round(seconds * 1000))} ms`;
  if (seconds < 10) return `${seconds.toFixed(1)} s`;
  const whole = Math.round(seconds);
  if (whole < 60) return `${whole} s`;
  if (whole < 3600) return `${Math.floor(whole / 60)} min ${whole % 60} s`;
  return `${Math.floor(whole / 3600)} h ${Math.floor((whole % 3600) / 60)} min`;
}

/** "2026-12-01T04:45:16.123Z" -> "2026-12-01 04:45 UTC". */
export function momentText(iso: string): string {
  return /^\d{4}-\d\d-\d\dT\d\d:\d\d/.test(iso) ? `${iso.slice(0, 10)} ${iso.slice(11, 16)} UTC` : iso;
}

/** "sha256:0123..." -> its first twelve digits: enough to tell runs apart by eye. */
export function digestShort(digest: string): string {
  return digest.replace(/^sha256:/, '').slice(0, 12);
}

function split(value: number, digits: number | 'all'): { mantissa: string; exponent: number } {
  if (!Number.isFinite(value)) return { mantissa: value > 0 ? '∞' : '-∞', exponent: 0 };
  const magnitude = Math.abs(value);
  if (value === 0 || (magnitude >= 1e-3 && magnitude < 1e6)) {
    return { mantissa: String(digits === 'all' ? value : Number(value.toPrecision(digits))), exponent: 0 };
  }
  const [mantissa, exponent] = value.toExponential(digits === 'all' ? undefined : digits - 1).split('e');
  return { mantissa: String(Number(mantissa)), exponent: Number(exponent) };
}

function minus(text: string): string {
  return text.replace('-', '−');
}
