import { describe, expect, it } from 'vitest';
import {
  blend,
  CLASS_COLOURS,
  parseHex,
  rampColour,
  toHex,
  toOklab,
  type Rgb,
} from '../../../dashboard/plots/colours.js';

/** Simulation of dichromacy in linear sRGB, severity 1: G. M. Machado, M. M. Oliveira and L. A. F. Fernandes, IEEE
 *  Trans. Vis. Comput. Graph. 15 (2009) 1291, doi:10.1109/TVCG.2009.113; entries from memory. */
const VISION: Record<string, number[][]> = {
  full: [
    [1, 0, 0],
    [0, 1, 0],
    [0, 0, 1],
  ],
  'without red cones': [
    [0.152286, 1.052583, -0.204868],
    [0.114503, 0.786281, 0.099216],
    [-0.003882, -0.048116, 1.051998],
  ],
  'without green cones': [
    [0.367322, 0.860646, -0.227968],
    [0.280085, 0.672501, 0.047413],
    [-0.01182, 0.04294, 0.968881],
  ],
  'without blue cones': [
    [1.255528, -0.076749, -0.178779],
    [-0.078411, 0.930809, 0.147602],
    [0.004733, 0.691367, 0.3039],
  ],
};

function seen(hex: string, vision: number[][]): Rgb {
  const linear = parseHex(hex).map((part) =>
    part / 255 <= 0.04045 ? part / 255 / 12.92 : ((part / 255 + 0.055) / 1.055) ** 2.4,
  );
  return vision.map((row) => {
    const part = Math.min(1, Math.max(0, row[0] * linear[0] + row[1] * linear[1] + row[2] * linear[2]));
    return 255 * (part <= 0.0031308 ? 12.92 * part : 1.055 * part ** (1 / 2.4) - 0.055);
  }) as unknown as Rgb;
}

const distance = (a: Rgb, b: Rgb): number => Math.hypot(...toOklab(a).map((part, i) => part - toOklab(b)[i]));

describe('colours', () => {
  describe.each(Object.entries(CLASS_COLOURS))('of classes by %s', (_light, colours) => {
    it.each(Object.entries(VISION))('stay apart for vision %s', (_name, vision) => {
      const pairs = colours.flatMap((a, i) => colours.slice(i + 1).map((b) => [a, b]));
      const closest = Math.min(...pairs.map(([a, b]) => distance(seen(a, vision), seen(b, vision))));
      expect(closest).toBeGreaterThan(0.12);
    });
  });

  /** L, a, b of sRGB white and red: B. Ottosson, "A perceptual color space for image processing" (2020); red from
   *  memory. */
  it('agree with published OKLab values', () => {
    const close = (colour: Rgb, expected: number[]) =>
      toOklab(colour).forEach((part, i) => expect(part).toBeCloseTo(expected[i], 3));
    close([255, 255, 255], [1, 0, 0]);
    close([255, 0, 0], [0.628, 0.2249, 0.1258]);
  });

  it('of a ramp go one way in lightness, in even steps', () => {
    for (const light of ['day', 'night'] as const) {
      const steps = Array.from({ length: 21 }, (_, i) => toOklab(rampColour('sequence', light, i / 20))[0]);
      const differences = steps.slice(1).map((value, i) => (value - steps[i]) * (light === 'day' ? -1 : 1));
      expect(Math.min(...differences)).toBeGreaterThan(0.01);
    }
  });

  it('return from OKLab unchanged', () => {
    for (const hex of CLASS_COLOURS.day)
      expect(toHex(blend([{ colour: parseHex(hex), weight: 2 }]))).toBe(hex);
  });
});
