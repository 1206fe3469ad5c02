#!/usr/bin/python3
"""Golden values of the Standard Model's running and vacuum: an independent computation with numpy and scipy.

    /usr/bin/python3 make.py > golden.json

Beta functions are read from ../betas/sm.txt and ../betas/sm-three-loops.txt (not from the engine's code); the field's
anomalous dimension is the general two-loop formula of Machacek and Vaughn in Landau gauge; integration by scipy's
DOP853 at rtol 1e-13, checked against Radau; roots by brentq and minima by a fine grid and a golden section.
"""
import json
import re
import sys
from math import exp, log, log10, pi, sqrt
from pathlib import Path

import numpy as np
from scipy.integrate import solve_ivp
from scipy.optimize import brentq, minimize_scalar

BETAS = Path(__file__).parent.parent / "betas"
NAMES = ["gY", "g2", "g3", "yt", "yb", "ytau", "lam", "m2"]
K = 1 / (16 * pi**2)


def read_two_loops():
    code = {}
    for line in (BETAS / "sm.txt").read_text().splitlines():
        found = re.match(r"(b[12])\[(\w+)\] = (.*)", line)
        if found:
            key, name, text = found.groups()
            text = text.replace("lambda", "lam").replace("^", "**")
            code[key, name.replace("lambda", "lam")] = compile(text.lstrip("+ "), name, "eval")
    return code


def read_three_loops():
    text = (BETAS / "sm-three-loops.txt").read_text()
    text = "\n".join(line for line in text.splitlines() if not line.startswith("#"))
    code = {}
    for name, body in re.findall(r"d\((\w)\)/dt2:((?:.|\n)*?)(?=d\(\w\)/dt2:|$(?![\s\S]))", text):
        tokens = re.findall(r"\d+(?:\.\d+)?(?:/\d+)?|[abcyl]|[-+^()\[\]]", body)
        out = []
        for token in tokens:
            if out and (token[0].isalnum() or token in "([") and (out[-1][-1].isalnum() or out[-1] in ")]"):
                if not (out[-1] == "^"):
                    out.append("*")
            out.append(token)
        joined = "".join(out).replace("^", "**").replace("[", "(").replace("]", ")")
        joined = re.sub(r"(\d+)/(\d+)", r"(\1/\2)", joined)
        code[name] = compile(joined, name, "eval")
    return code


TWO = read_two_loops()
THREE = read_three_loops()


def anomalous(v, loops):
    """gamma_phi of the Higgs field; d(ln h)/d(ln mu) = -gamma_phi."""
    T, D, E = v["yt"] ** 2, v["yb"] ** 2, v["ytau"] ** 2
    A, B, C, l = v["gY"] ** 2, v["g2"] ** 2, v["g3"] ** 2, v["lam"]
    weak, hyper = 3 / 4, 1 / 4
    one = 3 * T + 3 * D + E - 3 * (weak * B + hyper * A)
    if loops == 1:
        return K * one
    fermions = (
        -27 / 4 * (T * T + D * D) + 3 / 2 * T * D - 9 / 4 * E * E
        + T * (85 / 24 * A + 45 / 8 * B + 20 * C)
        + D * (25 / 24 * A + 45 / 8 * B + 20 * C)
        + E * (25 / 8 * A + 15 / 8 * B)
    )
    gauge = (
        -B * B * weak * (35 / 3 * 2 - 5 / 3 * 6 - 11 / 12)
        - A * A * hyper * (-5 / 3 * 10 - 11 / 12)
        + 3 / 2 * (weak * B + hyper * A) ** 2
    )
    return K * one + K * K * (fermions + 6 * l * l + gauge)


def rhs(loops):
    def f(_t, y):
        v = dict(zip(NAMES, y))
        d = [K * eval(TWO["b1", n], v) for n in NAMES]
        if loops > 1:
            d = [x + K * K * eval(TWO["b2", n], v) for x, n in zip(d, NAMES)]
        if loops > 2:
            s = {"a": 5 / 3 * y[0] ** 2, "b": y[1] ** 2, "c": y[2] ** 2, "y": y[3] ** 2, "l": y[6]}
            t2 = {n: K**3 * eval(THREE[n], dict(s)) for n in "abcyl"}
            d[0] += t2["a"] * 3 / 5 / y[0]
            d[1] += t2["b"] / y[1]
            d[2] += t2["c"] / y[2]
            d[3] += t2["y"] / y[3]
            d[6] += 2 * t2["l"]
        return np.array(d + [-anomalous(v, loops)])

    return f


def effective(y):
    """One-loop effective quartic in Landau gauge at mu = h."""
    gY, g2, _, yt, _, _, lam, _, G = y

    def term(n, x, c):
        return 0 if x == 0 else n * x * x * (log(abs(x)) + 2 * G - c)

    loop = (
        term(-12, yt * yt / 2, 3 / 2)
        + term(6, g2 * g2 / 4, 5 / 6)
        + term(3, (g2 * g2 + gY * gY) / 4, 5 / 6)
        + term(1, 3 * lam, 3 / 2)
        + term(3, lam, 3 / 2)
    )
    return exp(4 * G) * (lam + K * loop)


HBAR = 6.582119569e-25
H0 = 67.4 / 3.0856775814913673e19 * HBAR
GYR = 3.15576e16 / HBAR
GPC = 3.0856775814913673e25 / 1.973269804e-16


def lowest(f, grid):
    values = [f(t) for t in grid]
    k = int(np.argmin(values))
    if k in (0, len(grid) - 1):
        return grid[k], values[k]
    found = minimize_scalar(f, bracket=(grid[k - 1], grid[k], grid[k + 1]), tol=1e-12)
    return found.x, found.fun


def first_zero(f, grid):
    values = [f(t) for t in grid]
    if values[0] <= 0:
        return grid[0]
    for k in range(1, len(grid)):
        if values[k] <= 0:
            return brentq(f, grid[k - 1], grid[k], xtol=1e-13)
    return None


def size(y):
    return max(max(y[:6] ** 2), abs(y[6])) / (4 * pi)


def vacuum(solution, t0, t1, loops):
    at = solution.sol
    grid = np.linspace(t0, t1, 4001)
    quartic = lambda t: at(t)[6]
    eff = lambda t: effective(at(t))
    t, low = lowest(quartic, grid)
    if t not in (grid[0], grid[-1]):
        slope = lambda t: rhs(loops)(t, at(t))[6]
        step = grid[1] - grid[0]
        t = brentq(slope, t - step, t + step, xtol=1e-13)
    out = {"lambdaMin": low, "lambdaMinScale": exp(t)}
    zero = first_zero(quartic, grid)
    out["lambdaZeroScale"] = zero and exp(zero)
    out["lambdaEffMin"] = lowest(eff, grid)[1]
    inst = first_zero(eff, grid)
    out["instabilityScale"] = inst and exp(inst)
    out["barrierHeight"] = out["barrierField"] = None
    if inst and inst > t0:
        top, value = lowest(lambda t: -(4 * t + log(max(eff(t), 1e-300))), np.linspace(t0, inst, 4001)[:-1])
        out["barrierField"] = exp(top)
        out["barrierHeight"] = (exp(-value) / 4) ** 0.25
    act = 8 * pi**2 / 3
    age = lambda t: log(0.15) + 4 * (t - log(H0))
    out["metastabilityMargin"] = lowest(lambda t: quartic(t) + act / age(t), grid)[1]
    stable = out["lambdaEffMin"] >= 0
    out["vacuumClass"] = 0 if stable else 1 if out["metastabilityMargin"] > 0 else 2
    out["vacuumDecayExponent"] = out["vacuumDecayRate"] = None
    if not stable and low < 0:
        action = lambda t: -act / quartic(t) - 4 * t if quartic(t) < 0 else 1e300
        value = lowest(action, grid)[1]
        out["vacuumDecayExponent"] = (log(0.15) - 4 * log(H0) - value) / log(10)
        out["vacuumDecayRate"] = -value / log(10) + log10(GYR) + 3 * log10(GPC)
    return out


def solve(start, Mt, cutoff, loops, method, rtol):
    blown = lambda _t, y: size(y) - 4
    blown.terminal = True
    lost = lambda _t, y: size(y) - 1
    y0 = np.array([start[n] for n in NAMES[:7]] + [1.0, 0.0])
    return solve_ivp(
        rhs(loops), (log(Mt), log(cutoff)), y0, method=method, rtol=rtol, atol=rtol * 1e-2,
        dense_output=True, events=[blown, lost],
    )


def point(name, Mt, cutoff, loops, start):
    solution = solve(start, Mt, cutoff, loops, "DOP853", 1e-13)
    check = solve(start, Mt, cutoff, loops, "Radau", 1e-10)
    drift = np.max(np.abs(solution.y[:, -1] - check.y[:, -1]) / (0.01 + np.abs(solution.y[:, -1])))
    if solution.status == 0:
        assert drift < 1e-7, (name, drift)
    end = solution.y[:, -1]
    t1 = solution.t[-1]
    out = {"couplingsAtCutoff": None, "lambdaSlopeAtCutoff": None}
    if solution.status == 0:
        out["couplingsAtCutoff"] = dict(zip(NAMES[:7] + ["massRatio", "fieldLog"], end))
        out["lambdaSlopeAtCutoff"] = float(rhs(loops)(t1, end)[6])
    lost = solution.t_events[1]
    out["perturbativityScale"] = exp(lost[0]) if len(lost) else None
    if len(lost):
        t1 = lost[0]
    out.update(vacuum(solution, log(Mt), t1, loops))
    if len(lost) and out["vacuumClass"] < 2:
        out["vacuumClass"] = 3
    print(name, solution.status, f"{drift:.1e}", out["vacuumClass"], file=sys.stderr)
    return {"name": name, "Mt": Mt, "cutoff": cutoff, "loops": loops, "start": start, "expected": out}


CENTRE = dict(gY=0.3583, g2=0.64779, g3=1.1666, yt=0.9369, yb=0.0156, ytau=0.01, lam=0.12604)
PLANCK = 1.2209e19


def main():
    start = lambda **change: {**CENTRE, **change}
    points = [
        point("centre, three loops", 173.34, PLANCK, 3, start()),
        point("centre, two loops", 173.34, PLANCK, 2, start()),
        point("centre, one loop", 173.34, PLANCK, 1, start()),
        point("light top: stable", 170.0, PLANCK, 3, start(yt=0.9183)),
        point("close to the border", 171.1, PLANCK, 3, start(yt=0.92445)),
        point("heavy top: unstable", 185.0, PLANCK, 3, start(yt=1.0017)),
        point("heavy Higgs: stable", 173.34, PLANCK, 3, start(lam=0.16)),
        point("very heavy Higgs: blows up", 173.34, PLANCK, 3, start(lam=0.9)),
        point("very heavy Higgs, one loop", 173.34, PLANCK, 1, start(lam=0.9)),
        point("very heavy top: blows up", 290.0, PLANCK, 3, start(yt=1.58)),
        point("light Higgs: early instability", 173.34, PLANCK, 3, start(lam=0.03)),
        point("negative quartic from the start", 173.34, PLANCK, 3, start(lam=-0.005)),
        point("low cut-off", 173.34, 1e8, 3, start()),
        point("cut-off between lambda = 0 and the effective zero", 173.34, 2e10, 3, start()),
        point("strong bottom and tau", 173.34, 1e16, 2, start(yb=0.4, ytau=0.3)),
        point("weak gauge couplings only", 173.34, 1e12, 3, start(g3=0.3, yt=0.2)),
    ]
    json.dump(points, sys.stdout, indent=1)
    print()


main()
