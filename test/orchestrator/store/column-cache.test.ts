import { describe, expect, it } from 'vitest';
import { cachedColumns } from '../../../orchestrator/store/column-cache.js';

describe('the cache of columns', () => {
  const column = new Float64Array(10);

  function counted(limit: number) {
    const reads: string[] = [];
    const read = cachedColumns((segment, name) => {
      reads.push(`${segment} ${name}`);
      return segment === 0 ? undefined : column;
    }, limit);
    return { reads, read };
  }

  it('reads a column once while there is room', () => {
    const { reads, read } = counted(160);
    for (const name of ['a', 'b', 'a', 'b']) expect(read(1, name)).toBe(column);
    expect(reads).toEqual(['1 a', '1 b']);
  });

  it('forgets what was not used for longest, and never holds more than its limit', () => {
    const { reads, read } = counted(160);
    for (const name of ['a', 'b', 'a', 'c', 'a', 'b']) read(1, name);
    expect(reads).toEqual(['1 a', '1 b', '1 c', '1 b']);
  });

  it('holds nothing larger than its limit, and nothing that does not exist', () => {
    const { reads, read } = counted(79);
    for (let i = 0; i < 2; i++) expect([read(1, 'a'), read(0, 'a')]).toEqual([column, undefined]);
    expect(reads).toEqual(['1 a', '0 a', '1 a', '0 a']);
  });
});
