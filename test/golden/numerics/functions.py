"""Golden values of the elementary functions, by mpmath 1.3.0 at 60 digits.

Run: python3 functions.py   (writes exp.txt, log.txt, log10.txt, log1p.txt, pow.txt, quantile.txt beside it)

A line holds the argument(s) and the correctly rounded result as the 16 hexadecimal digits of a float64, then the exact
result minus the rounded one in units in the last place of the rounded one, so that an error can be told to 0.001 ulp.
"""
import math
import random
import struct
from pathlib import Path

from mpmath import erfc, exp, findroot, log, log1p, mp, mpf, power, sqrt

mp.dps = 60
HERE = Path(__file__).parent


def bits(x: float) -> str:
    return struct.pack('>d', x).hex()


def rounded(exact) -> float:
    """mpf to the nearest float64, ties to even, subnormals included."""
    if abs(exact) >= mpf(2) ** 1024:
        return math.copysign(math.inf, exact)
    if abs(exact) < mpf(2) ** -1022:
        return float(mp.nint(exact * mpf(2) ** 1074)) * 5e-324
    return float(exact)


def write(name, rows):
    lines = []
    for arguments, exact in rows:
        r = rounded(exact)
        if math.isinf(r):
            continue
        offset = float((exact - mpf(r)) / mpf(math.ulp(r)))
        assert abs(offset) <= 0.5000001, (name, arguments, offset)
        lines.append(' '.join([*(bits(a) for a in arguments), bits(r), f'{offset:.4f}']))
    (HERE / f'{name}.txt').write_text('\n'.join(lines) + '\n')


def unary(name, function, arguments):
    write(name, [((x,), function(mpf(x))) for x in arguments])


def log_uniform(low, high, count):
    return [math.exp(random.uniform(math.log(low), math.log(high))) for _ in range(count)]


def any_positive(count):
    """Every exponent alike, subnormals included."""
    return [struct.unpack('>d', struct.pack('>Q', random.randrange(1, 0x7FF << 52)))[0] for _ in range(count)]


def near(centre, count):
    return [centre + random.choice((-1, 1)) * 2.0 ** random.uniform(-52, -2) for _ in range(count)]


def quantile(p):
    """x with Phi(x) = p, by Newton's method on mpmath's erfc from a rough start."""
    q = min(p, 1 - p)
    if q == mpf(1) / 2:
        return mpf(0)
    start = -sqrt(-2 * log(2 * q)) if q < 0.4 else (q - mpf(1) / 2) * sqrt(2 * mp.pi)
    x = findroot(lambda y: log(erfc(-y / sqrt(2)) / 2) - log(q), start)
    return x if p < mpf(1) / 2 else -x


def main():
    random.seed(20261201)
    half_ln2 = math.log(2) / 2
    unary('exp', exp, [1.0, -1.0, half_ln2, -half_ln2, 709.782712893384, -708.3964185322641, -745.13]
          + [random.uniform(-745.1, 709.7) for _ in range(500)]
          + [random.uniform(-3, 3) for _ in range(300)]
          + [s * x for x in log_uniform(1e-18, 1, 100) for s in (1, -1)]
          + [random.uniform(-745.1, -708) for _ in range(60)])
    positive = [5e-324, 2.2250738585072014e-308, 1.7976931348623157e308, 10.0, 2.0, 0.5, math.sqrt(0.5), math.sqrt(2)]
    spread = any_positive(400) + log_uniform(0.1, 10, 400) + near(1.0, 200)
    unary('log', log, positive + spread)
    unary('log10', lambda x: log(x) / log(mpf(10)), positive + [10.0 ** k for k in range(1, 23)] + spread)
    unary('log1p', log1p, positive + any_positive(200) + near(0.0, 400)
          + [s * x for x in log_uniform(1e-17, 0.99, 200) for s in (1, -1)])
    pairs = [(1 - 2.0 ** -53, 1e18), (1 + 2.0 ** -52, -1e18)]
    pairs += [(10.0, float(k)) for k in range(-20, 23)] + [(float(b), float(e)) for b in range(2, 12) for e in range(3, 15)]
    pairs += [(x, random.uniform(-700, 700) / math.log(x)) for x in any_positive(500)]
    pairs += [(x, random.uniform(-700, 700) / math.log(x)) for x in near(1.0, 300)]
    pairs += [(x, random.uniform(-700, 700) / math.log(x)) for x in (1 + random.choice((-1, 1)) * 2.0 ** random.uniform(-50, -20) for _ in range(200))]
    pairs += [(x, random.uniform(-8, 8)) for x in log_uniform(1e-3, 1e3, 600)]
    pairs += [(x, random.uniform(-745, -708) / math.log(x)) for x in log_uniform(1e-3, 1e3, 100)]
    write('pow', [((x, y), power(mpf(x), mpf(y))) for x, y in pairs])
    unary('quantile', quantile, [0.025, 0.975, 0.075, 0.925, 0.5, 1e-300, 1.3887943864964021e-11]
          + [random.random() for _ in range(400)] + log_uniform(1e-300, 0.1, 200)
          + [1 - x for x in log_uniform(1e-15, 0.1, 100)])


main()
