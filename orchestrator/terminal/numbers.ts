/** How numbers are written for people; the same in every locale. */

/** 12400 -> "12,400". */
export function count(n: number): string {
  return String(Math.round(n)).replace(/\B(?=(\d{3})+$)/g, ',');
}

/** Part of a whole in per cent, e.g. "30.6 %"; empty where there is no whole. */
export function share(part: number, whole: number): string {
  if (whole === 0) return '';
  return `${((100 * part) / whole).toFixed(1)} %`;
}

/** 102.4 -> "1 min 42 s". */
export function duration(seconds: number): string {
  if (seconds < 1) return `${Math.max(0, Math.round(seconds * 1000))} ms`;
  if (seconds < 10) return `${seconds.toFixed(1)} s`;
  const s = Math.round(seconds);
  if (s < 60) return `${s} s`;
  if (s < 3600) return `${Math.floor(s / 60)} min ${s % 60} s`;
  return `${Math.floor(s / 3600)} h ${Math.floor((s % 3600) / 60)} min`;
}

/** 20480 -> "20 kB"; powers of 1000. */
export function bytes(n: number): string {
  const units = ['bytes', 'kB', 'MB', 'GB', 'TB'];
  let value = n;
  let unit = 0;
  for (; value >= 1000 && unit < units.length - 1; unit += 1) value /= 1000;
  return unit === 0 || value >= 100
    ? `${Math.round(value)} ${units[unit]}`
    : `${value.toFixed(1)} ${units[unit]}`;
}

/** A physical value to seven digits; "-" where there is none. Every digit is in --json and in exports. */
export function value(x: number | null): string {
  if (x === null || Number.isNaN(x)) return '-';
  if (x !== 0 && (Math.abs(x) >= 1e7 || Math.abs(x) < 1e-4)) return x.toExponential(6).replace(/\.?0+e/, 'e');
  return String(Number(x.toPrecision(7)));
}

/** A value with its unit; the unit 1 of a pure number is not written. */
export function withUnit(x: number | null, unit: string): string {
  return unit === '1' || x === null ? value(x) : `${value(x)} ${unit}`;
}
