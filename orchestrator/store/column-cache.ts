import type { Column } from './pieces.js';

/** Remembers columns of segments, which never change, up to a number of bytes; the longest unused go first. */
export function cachedColumns(
  read: (segment: number, name: string) => Column | undefined,
  limit: number,
): (segment: number, name: string) => Column | undefined {
  const kept = new Map<string, Column>();
  let bytes = 0;
  return (segment, name) => {
    const key = `${segment} ${name}`;
    const known = kept.get(key);
    if (known !== undefined) {
      kept.delete(key);
      kept.set(key, known);
      return known;
    }
    const column = read(segment, name);
    if (column === undefined) return undefined;
    kept.set(key, column);
    bytes += column.byteLength;
    for (const [oldest, values] of kept) {
      if (bytes <= limit) break;
      kept.delete(oldest);
      bytes -= values.byteLength;
    }
    return column;
  };
}
