#!/usr/bin/python3
"""Golden values of alpha_s and m_b in five-flavour QCD by numerical integration of the four-loop equations.

    /usr/bin/python3 make.py > golden.json

beta: van Ritbergen, Vermaseren, Larin, hep-ph/9701390; gamma_m: Chetyrkin, hep-ph/9703278, Vermaseren, Larin, van
Ritbergen, hep-ph/9703284; a = alpha_s/pi, d a/d(ln mu^2) = -sum beta_i a^(i+2), d(ln m)/d(ln mu^2) = -sum gamma_i
a^(i+1). Coefficients from memory; test/workers/running/light-yukawas.test.ts compares with published masses too.
"""
import json
import sys
from math import log, pi, sqrt

import numpy as np
from scipy.integrate import solve_ivp

N = 5
Z3, Z4, Z5 = 1.2020569031595942, pi**4 / 90, 1.0369277551433699
BETA = [
    (11 - 2 / 3 * N) / 4,
    (102 - 38 / 3 * N) / 16,
    (2857 / 2 - 5033 / 18 * N + 325 / 54 * N**2) / 64,
    (149753 / 6 + 3564 * Z3 - (1078361 / 162 + 6508 / 27 * Z3) * N
     + (50065 / 162 + 6472 / 81 * Z3) * N**2 + 1093 / 729 * N**3) / 256,
]
GAMMA = [
    1,
    (202 / 3 - 20 / 9 * N) / 16,
    (1249 + (-2216 / 27 - 160 / 3 * Z3) * N - 140 / 81 * N**2) / 64,
    (4603055 / 162 + 135680 / 27 * Z3 - 8800 * Z5
     + (-91723 / 27 - 34192 / 9 * Z3 + 880 * Z4 + 18400 / 9 * Z5) * N
     + (5242 / 243 + 800 / 9 * Z3 - 160 / 3 * Z4) * N**2 + (-332 / 243 + 64 / 27 * Z3) * N**3) / 256,
]


def f(_l, y):
    a = y[0]
    return [-sum(b * a ** (i + 2) for i, b in enumerate(BETA)), -sum(g * a ** (i + 1) for i, g in enumerate(GAMMA))]


def evolve(a, l):
    s = solve_ivp(f, (0, l), [a, 0.0], method="DOP853", rtol=1e-13, atol=1e-15)
    return s.y[:, -1]


V = (sqrt(2) * 1.1663788e-5) ** -0.5
out = []
for alpha, mb, Mt in [(0.118, 4.183, 172.57), (0.1184, 4.18, 173.34), (0.113, 4.0, 165.0), (0.125, 4.4, 180.0),
                      (0.09, 3.0, 50.0), (0.14, 5.0, 300.0)]:
    down = evolve(alpha / pi, 2 * log(mb / 91.1876))
    up = evolve(alpha / pi, 2 * log(Mt / 91.1876))
    mass = mb * np.exp(up[1] - down[1])
    out.append({"alphaS": alpha, "mb": mb, "Mt": Mt, "alphaAtBottom": down[0] * pi, "alphaAtTop": up[0] * pi,
                "massAtTop": mass, "massAtZ": mb * np.exp(-down[1]), "yukawa": sqrt(2) * mass / V})
json.dump(out, sys.stdout, indent=1)
print()
