import { expect, test } from 'vitest';
import { philox } from '../../../orchestrator/sampling/philox.js';
import { philoxCases } from './golden.js';

test.each(philoxCases)(
  'Philox4x32-10 of $counter under $key is what Random123 gives',
  ({ counter, key, out }) => {
    const words = new Uint32Array(4);
    philox(...counter, key, words);
    expect([...words]).toEqual(out);
  },
);

test('the known answers published with Random123 (kat_vectors, from memory) are among them', () => {
  const hex = philoxCases.map(({ out }) => out.map((word) => word.toString(16).padStart(8, '0')).join(' '));
  expect(hex).toContain('6627e8d5 e169c58d bc57ac4c 9b00dbd8');
  expect(hex).toContain('408f276d 41c83b0e a20bc7c6 6d5451fd');
  expect(hex).toContain('d16cfe09 94fdcceb 5001e420 24126ea1');
});
