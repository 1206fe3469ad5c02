"""Golden trajectories by scipy 1.17.1, solve_ivp(method='DOP853').

Run: python3 trajectories.py   (writes trajectories.json beside it)

End states at rtol = 1e-13, and how many evaluations scipy needs at three tolerances: the ceiling for ours.
The same problems are written down again in test/workers/numerics/problems.ts.
"""
import json
from pathlib import Path

from scipy.integrate import solve_ivp

PROBLEMS = {
    'lotka-volterra': (lambda t, y: [1.5 * y[0] - y[0] * y[1], y[0] * y[1] - 3 * y[1]], 0, 10, [10, 5]),
    'van-der-pol': (lambda t, y: [y[1], (1 - y[0] ** 2) * y[1] - y[0]], 0, 20, [2, 0]),
    'lorenz': (
        lambda t, y: [10 * (y[1] - y[0]), y[0] * (28 - y[2]) - y[1], y[0] * y[1] - 8 / 3 * y[2]],
        0, 4, [1, 1, 1],
    ),
    'kepler': (
        lambda t, y: [y[2], y[3], -y[0] / (y[0] ** 2 + y[1] ** 2) ** 1.5, -y[1] / (y[0] ** 2 + y[1] ** 2) ** 1.5],
        0, 20, [0.5, 0, 0, 3 ** 0.5],
    ),
    'time-dependent': (lambda t, y: [-2 * t * y[0] * y[0], t * t - y[1]], 3, -1, [0.1, 4]),
}

golden = {}
for name, (f, t0, t1, y0) in PROBLEMS.items():
    solve = lambda rtol: solve_ivp(f, (t0, t1), y0, method='DOP853', rtol=rtol, atol=rtol)
    golden[name] = {
        't0': t0, 't1': t1, 'y0': y0,
        'end': [float(x) for x in solve(1e-13).y[:, -1]],
        'evaluations': {f'{rtol:g}': solve(rtol).nfev for rtol in (1e-6, 1e-9, 1e-12)},
    }
(Path(__file__).parent / 'trajectories.json').write_text(json.dumps(golden, indent=2) + '\n')
