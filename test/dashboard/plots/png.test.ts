import { describe, expect, it } from 'vitest';
import { crc32Of } from '../../../dashboard/plots/crc32.js';
import { encodePng } from '../../../dashboard/plots/png.js';
import { decode } from './decode-png.js';

describe('png', () => {
  it('has the published check value of its CRC-32 ("123456789" gives cbf43926: ITU-T V.42, common practice)', () => {
    expect(crc32Of(Buffer.from('123456789')).toString(16)).toBe('cbf43926');
  });

  it('is read back pixel by pixel, with every checksum right', () => {
    const [width, height] = [7, 5];
    const rgba = Uint8Array.from({ length: width * height * 4 }, (_, i) => (i * 37 + (i % 11) * 5) % 256);
    expect(decode(encodePng(width, height, rgba))).toEqual({ width, height, rgba });
  });

  it('starts with the signature and ends with the empty chunk of the standard (ISO/IEC 15948, 5.2 and 11.2.5)', () => {
    const png = encodePng(1, 1, Uint8Array.of(1, 2, 3, 4));
    expect(png.subarray(0, 8).toString('hex')).toBe('89504e470d0a1a0a');
    expect(png.subarray(-12).toString('hex')).toBe('0000000049454e44ae426082');
  });
});
