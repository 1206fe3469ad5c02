import { inflateSync } from 'node:zlib';
import { expect } from 'vitest';
import { crc32Of } from '../../../dashboard/plots/crc32.js';

/** A reader for the one kind of PNG that is written, checking what any reader would. */
export function decode(png: Buffer): { width: number; height: number; rgba: Uint8Array } {
  const chunks = new Map<string, Buffer>();
  for (let at = 8; at < png.length;) {
    const length = png.readUInt32BE(at);
    const type = png.toString('latin1', at + 4, at + 8);
    expect(png.readUInt32BE(at + 8 + length)).toBe(crc32Of(png.subarray(at + 4, at + 8 + length)));
    chunks.set(type, png.subarray(at + 8, at + 8 + length));
    at += 12 + length;
  }
  const header = chunks.get('IHDR')!;
  const [width, height] = [header.readUInt32BE(0), header.readUInt32BE(4)];
  expect([...header.subarray(8)]).toEqual([8, 6, 0, 0, 0]);
  const rows = inflateSync(chunks.get('IDAT')!);
  const rgba = new Uint8Array(width * height * 4);
  for (let y = 0; y < height; y++) {
    const row = y * (width * 4 + 1);
    expect(rows[row]).toBe(2);
    for (let i = 0; i < width * 4; i++) {
      const above = y === 0 ? 0 : rgba[(y - 1) * width * 4 + i];
      rgba[y * width * 4 + i] = (rows[row + 1 + i] + above) % 256;
    }
  }
  return { width, height, rgba };
}
