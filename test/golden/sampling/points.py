"""Writes golden values for the samplers to test/golden/sampling/points.json.

Sobol's sequence without scrambling comes from SciPy (scipy.stats.qmc.Sobol, direction numbers of Joe and Kuo 2008).
The scrambled sequence, the uniform sampler and the latin hypercube are computed a second time here from their
published descriptions, with Python's big integers:
  Philox4x32-10: Salmon et al., SC11 (2011), section 3.3, checked against test/golden/sampling/philox.json;
  random linear scramble: Matousek, J. Complexity 14 (1998) 527; digital shift: Owen (1995);
  latin hypercube: McKay, Beckman, Conover, Technometrics 21 (1979) 239, cells by a Feistel network.
Run: python3 test/golden/sampling/points.py > test/golden/sampling/points.json
"""

import hashlib
import json
import os
from fractions import Fraction

from scipy.stats import qmc

HERE = os.path.dirname(os.path.abspath(__file__))
WORD = 0xFFFFFFFF


def philox(counter, key):
    c, k = list(counter), list(key)
    for _ in range(10):
        a, b = 0xD2511F53 * c[0], 0xCD9E8D57 * c[2]
        c = [(b >> 32) ^ c[1] ^ k[0], b & WORD, (a >> 32) ^ c[3] ^ k[1], a & WORD]
        k = [(k[0] + 0x9E3779B9) & WORD, (k[1] + 0xBB67AE85) & WORD]
    return c


for case in json.load(open(os.path.join(HERE, "philox.json"))):
    assert philox(case["counter"], case["key"]) == case["out"]


def key_of(seed, stratum, generation, name, use):
    text = json.dumps([seed, stratum, generation, name, use], separators=(",", ":"), ensure_ascii=False)
    digest = hashlib.sha256(text.encode()).digest()
    return int.from_bytes(digest[:4], "little"), int.from_bytes(digest[4:8], "little")


def fraction(bits):
    """The midpoint of cell `bits` of 2^52: exact in a double."""
    x = Fraction(2 * bits + 1, 2**53)
    assert Fraction(float(x)) == x
    return float(x)


def uniform(place, index):
    w = philox([index & WORD, index >> 32, 0, 0], key_of(*place, "points"))
    return fraction((w[1] >> 12 << 32) | w[0])


def sobol(dimension, place, index, columns):
    """Generator matrix as columns of 52 bits, most significant bit first; Gray-code order."""
    key = key_of(*place, "scramble")
    words = [w for i in range(14) for w in philox([i, 0, 0, 0], key)]
    gray = index ^ (index >> 1)
    plain = 0
    for j, column in enumerate(columns):
        if gray >> j & 1:
            plain ^= column
    bits = 0
    for row in range(52):
        if row < 32:
            # row r: random entries left of the diagonal, one on it
            random = [words[row] >> (31 - c) & 1 for c in range(row)] + [1]
        else:
            random = [words[row] >> (31 - c) & 1 for c in range(32)]
        bit = sum(r & (plain >> (51 - c) & 1) for c, r in enumerate(random)) & 1
        bits = bits << 1 | bit
    shift = (words[52] >> 12 << 32) | words[53]
    return fraction(bits ^ shift)


def mix(half, r, key):
    h = ((half + (r + 1) * 0x9E3779B9) & WORD) ^ key[0]
    h = (h ^ h >> 16) * 0x85EBCA6B & WORD
    h = ((h ^ h >> 13) * 0xC2B2AE35 & WORD) ^ key[1]
    h = (h ^ h >> 16) * 0x85EBCA6B & WORD
    h = (h ^ h >> 13) * 0xC2B2AE35 & WORD
    return h ^ h >> 16


def cell(index, size, key):
    bits = max(2, (size - 1).bit_length())
    right_bits = bits // 2
    left_bits = bits - right_bits
    while True:
        left, right = index >> right_bits, index & (2**right_bits - 1)
        for r in range(0, 8, 2):
            left ^= mix(right, r, key) & (2**left_bits - 1)
            right ^= mix(left, r + 1, key) & (2**right_bits - 1)
        index = left << right_bits | right
        if index < size:
            return index


def latin(place, index, size):
    return (cell(index, size, key_of(*place, "cells")) + uniform(place, index)) / size


def plain_columns(dimension):
    """Columns of the generator matrix, read off SciPy's own points: point gray^-1(2^j) is column j."""
    columns = []
    for j in range(20):
        engine = qmc.Sobol(50, scramble=False, bits=32)
        index = 2 ** (j + 1) - 1  # the Gray code of 2^(j+1) - 1 is 2^j
        if index:
            engine.fast_forward(index)
        columns.append(int(engine.random(1)[0][dimension] * 2**52))
    return columns


def main():
    engine = qmc.Sobol(50, scramble=False, bits=32)
    plain = engine.random(64).tolist()
    engine.fast_forward(100_000 - 64)
    far = engine.random(2).tolist()
    place = ("20261201", 1, 0, "Mt")
    other = ("\u00e9t\u00e9 \"42\"", 0, 2, "cutoff")
    indices = [0, 1, 2, 3, 17, 1000, 65_535, 65_536, 777_777]
    scrambled = []
    for dimension, p in [(0, place), (1, place), (3, other), (11, other)]:
        columns = plain_columns(dimension)
        values = [sobol(dimension, p, i, columns) for i in indices]
        scrambled.append({"dimension": dimension, "place": p, "values": values})
    big = indices + [2**31 + 5]
    print(json.dumps({
        "sobolPlain": {"first": plain, "from100000": far},
        "indices": indices,
        "sobolScrambled": scrambled,
        "uniform": [{"place": p, "indices": big, "values": [uniform(p, i) for i in big]} for p in (place, other)],
        "latin": [
            {"place": p, "size": n, "values": [latin(p, i, n) for i in range(min(n, 40))]}
            for p in (place, other) for n in (1, 2, 7, 1000, 100_003)
        ],
    }, indent=1))


main()
