import type { Key } from './philox.js';

const ROUNDS = 8;

/** A random permutation of 0 .. size - 1 that is computed entry by entry, without a table: a Feistel network on
 *  the smallest power of two that holds `size`, walked until it lands inside.
 *  @param size 1 .. 2^31
 *  Sources: M. Luby and C. Rackoff, SIAM J. Comput. 17 (1988) 373; J. Black and P. Rogaway, "Ciphers with
 *  arbitrary finite domains", CT-RSA 2002 (cycle walking); round function: finaliser of MurmurHash3 (A. Appleby). */
export function permutation(size: number, key: Key): (index: number) => number {
  const bits = Math.max(2, 32 - Math.clz32(size - 1));
  const rightBits = bits >>> 1;
  const leftMask = (1 << (bits - rightBits)) - 1;
  const rightMask = (1 << rightBits) - 1;
  const once = (index: number): number => {
    let left = (index >>> rightBits) & leftMask;
    let right = index & rightMask;
    for (let round = 0; round < ROUNDS; round += 2) {
      left ^= mix(right, round, key) & leftMask;
      right ^= mix(left, round + 1, key) & rightMask;
    }
    return left * (rightMask + 1) + right;
  };
  return (index) => {
    let at = once(index);
    while (at >= size) at = once(at);
    return at;
  };
}

function mix(half: number, round: number, key: Key): number {
  let h = (half + Math.imul(round + 1, 0x9e3779b9)) ^ key[0];
  h = Math.imul(h ^ (h >>> 16), 0x85ebca6b);
  h = Math.imul(h ^ (h >>> 13), 0xc2b2ae35) ^ key[1];
  h = Math.imul(h ^ (h >>> 16), 0x85ebca6b);
  h = Math.imul(h ^ (h >>> 13), 0xc2b2ae35);
  return h ^ (h >>> 16);
}
