/** Day is for light paper and downloads, night for dark pages. */
export type Light = 'day' | 'night';
export type Rgb = readonly [number, number, number];

/** Seven colours for classes and lines, chosen by search so that any two keep an OKLab distance of 0.12 or more
 *  for full colour vision and under simulated dichromacy (checked by colours.test.ts). */
export const CLASS_COLOURS: Readonly<Record<Light, readonly string[]>> = {
  day: ['#2563a7', '#b4c05d', '#8f3a5e', '#9483d7', '#4d3a01', '#b87654', '#1e2157'],
  night: ['#5b84d0', '#91e6a3', '#b55d85', '#bdace4', '#717600', '#dd9b4a', '#f7f0fe'],
};

export const INK = '#1c232b';
export const PAPER = '#fffefa';
export const FAINT = '#6b6d63';

/** From paper to ink: equal steps look equal, and lightness alone tells the order. */
const SEQUENCE: Readonly<Record<Light, readonly string[]>> = {
  day: ['#e6ebcf', '#a9cfa6', '#5aa79a', '#2f7591', '#2a4376', '#211647'],
  night: ['#26303b', '#2d4f72', '#2f7d92', '#57ab98', '#a8d29b', '#f1f2c6'],
};
/** Negative to positive through a neutral middle. */
const DIVERGING: Readonly<Record<Light, readonly string[]>> = {
  day: ['#6d2440', '#b4647f', '#cdc9bb', '#6f97c9', '#1c4c86'],
  night: ['#f09bb8', '#a3526f', '#4a4e55', '#4a74ad', '#a9cbf5'],
};
export type Ramp = 'sequence' | 'diverging';

/** The colour at t in [0, 1] of a ramp, interpolated in OKLab (B. Ottosson, "A perceptual color space for image
 *  processing", 2020). */
export function rampColour(ramp: Ramp, light: Light, t: number): Rgb {
  const stops = (ramp === 'sequence' ? SEQUENCE : DIVERGING)[light];
  const place = Math.min(1, Math.max(0, t)) * (stops.length - 1);
  const index = Math.min(stops.length - 2, Math.floor(place));
  return blend([
    { colour: parseHex(stops[index]), weight: 1 - (place - index) },
    { colour: parseHex(stops[index + 1]), weight: place - index },
  ]);
}

/** Mixes colours by weight in OKLab. */
export function blend(parts: readonly { readonly colour: Rgb; readonly weight: number }[]): Rgb {
  const total = parts.reduce((sum, part) => sum + part.weight, 0);
  const lab: [number, number, number] = [0, 0, 0];
  for (const part of parts) {
    const own = toOklab(part.colour);
    for (let i = 0; i < 3; i++) lab[i] += (own[i] * part.weight) / total;
  }
  return fromOklab(lab);
}

export function parseHex(hex: string): Rgb {
  return [1, 3, 5].map((at) => parseInt(hex.slice(at, at + 2), 16)) as unknown as Rgb;
}

export function toHex(colour: Rgb): string {
  return `#${colour.map((part) => Math.round(part).toString(16).padStart(2, '0')).join('')}`;
}

export function toOklab(colour: Rgb): Rgb {
  const [r, g, b] = colour.map((part) => toLinear(part / 255));
  const l = Math.cbrt(0.4122214708 * r + 0.5363325363 * g + 0.0514459929 * b);
  const m = Math.cbrt(0.2119034982 * r + 0.6806995451 * g + 0.1073969566 * b);
  const s = Math.cbrt(0.0883024619 * r + 0.2817188376 * g + 0.6299787005 * b);
  return [
    0.2104542553 * l + 0.793617785 * m - 0.0040720468 * s,
    1.9779984951 * l - 2.428592205 * m + 0.4505937099 * s,
    0.0259040371 * l + 0.7827717662 * m - 0.808675766 * s,
  ];
}

function fromOklab([L, a, b]: Rgb): Rgb {
  const l = (L + 0.3963377774 * a + 0.2158037573 * b) ** 3;
  const m = (L - 0.1055613458 * a - 0.0638541728 * b) ** 3;
  const s = (L - 0.0894841775 * a - 1.291485548 * b) ** 3;
  return [
    toByte(4.0767416621 * l - 3.3077115913 * m + 0.2309699292 * s),
    toByte(-1.2684380046 * l + 2.6097574011 * m - 0.3413193965 * s),
    toByte(-0.0041960863 * l - 0.7034186147 * m + 1.707614701 * s),
  ];
}

function toLinear(part: number): number {
  return part <= 0.04045 ? part / 12.92 : ((part + 0.055) / 1.055) ** 2.4;
}

function toByte(part: number): number {
  const encoded = part <= 0.0031308 ? 12.92 * part : 1.055 * part ** (1 / 2.4) - 0.055;
  return Math.round(255 * Math.min(1, Math.max(0, encoded)));
}
