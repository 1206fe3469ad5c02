import { html, type Safe } from './html.js';

export interface ShareInterval {
  readonly share: number;
  readonly low: number;
  readonly high: number;
}

/** A share of points with the interval that covers the true share in about 68 % of cases (one standard deviation).
 *  Unlike the plain square root it stays inside [0, 1] and is not empty where none or all points pass.
 *  Source: E. B. Wilson, J. Am. Stat. Assoc. 22 (1927) 209, doi:10.1080/01621459.1927.10502953 */
export function shareOfPoints(part: number, whole: number): ShareInterval | null {
  if (whole <= 0) return null;
  const share = part / whole;
  const z = 1;
  const centre = (share + (z * z) / (2 * whole)) / (1 + (z * z) / whole);
  const half =
    (z * Math.sqrt((share * (1 - share)) / whole + (z * z) / (4 * whole * whole))) / (1 + (z * z) / whole);
  return { share, low: Math.max(0, centre - half), high: Math.min(1, centre + half) };
}

/** "12.34 %" to the second digit of its uncertainty, with the uncertainty. */
export function shareHtml(part: number, whole: number): Safe {
  const interval = shareOfPoints(part, whole);
  if (interval === null) return html`–`;
  const digits = digitsFor(halfWidth(interval)) + 1;
  const per = (value: number): string => (100 * value).toFixed(digits);
  return html`${per(interval.share)}&#8239;%
    <span class="error"
      ><span class="unseen">uncertainty </span>+${per(interval.high - interval.share)}
      −${per(interval.share - interval.low)}</span
    >`;
}

/** "12.3 %" to the first digit of its uncertainty. */
export function shareText(part: number, whole: number): string {
  const interval = shareOfPoints(part, whole);
  if (interval === null) return '–';
  return `${(100 * interval.share).toFixed(digitsFor(halfWidth(interval)))} %`;
}

/** An exact part of a whole: "85.4 %". */
export function percentText(part: number, whole: number): string {
  return whole > 0 ? `${((100 * part) / whole).toFixed(1)} %` : '–';
}

function halfWidth({ low, high }: ShareInterval): number {
  return (high - low) / 2;
}

/** Decimals of a percentage down to the first digit of its uncertainty. */
function digitsFor(error: number): number {
  return Math.min(3, Math.max(0, -Math.floor(Math.log10(Math.max(100 * error, 1e-4)))));
}
