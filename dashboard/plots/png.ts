import { crc32Of } from './crc32.js';
import { deflateSync } from 'node:zlib';

/** Encodes 8-bit RGBA pixels, rows from the top, as PNG (ISO/IEC 15948:2004). Each row is stored as its difference
 *  to the row above (filter type 2), which makes enlarged rasters small. */
export function encodePng(width: number, height: number, rgba: Uint8Array): Buffer {
  const header = Buffer.alloc(13);
  header.writeUInt32BE(width, 0);
  header.writeUInt32BE(height, 4);
  header.set([8, 6, 0, 0, 0], 8);
  return Buffer.concat([
    Buffer.from([0x89, 0x50, 0x4e, 0x47, 0x0d, 0x0a, 0x1a, 0x0a]),
    chunk('IHDR', header),
    chunk('IDAT', deflateSync(filtered(width, height, rgba))),
    chunk('IEND', Buffer.alloc(0)),
  ]);
}

export function pngAddress(width: number, height: number, rgba: Uint8Array): string {
  return `data:image/png;base64,${encodePng(width, height, rgba).toString('base64')}`;
}

function filtered(width: number, height: number, rgba: Uint8Array): Uint8Array {
  const stride = width * 4;
  const rows = new Uint8Array(height * (stride + 1));
  for (let y = 0; y < height; y++) {
    const out = y * (stride + 1);
    rows[out] = 2;
    for (let i = 0; i < stride; i++) {
      rows[out + 1 + i] = rgba[y * stride + i] - (y === 0 ? 0 : rgba[(y - 1) * stride + i]);
    }
  }
  return rows;
}

function chunk(type: string, data: Uint8Array): Buffer {
  const body = Buffer.concat([Buffer.from(type, 'latin1'), data]);
  const framed = Buffer.alloc(body.length + 8);
  framed.writeUInt32BE(data.length, 0);
  body.copy(framed, 4);
  framed.writeUInt32BE(crc32Of(body), body.length + 4);
  return framed;
}
