"""Reference values for tests/core/integrate: the same equations by SciPy's solvers at tight tolerance.

Writes integrators.json beside this file. Needs Python 3 with scipy (made with 1.17). Run: python3 integrators.py
Every value is computed by two methods; the script fails where they differ by more than the error it states.
"""
import json
import math
import pathlib

import numpy as np
from scipy.integrate import solve_ivp


def both(name, f, jacobian, y0, times, methods, rtol, atol, agree):
    """States at `times` by two methods, and the largest relative difference between them."""
    results = []
    for method in methods:
        options = {} if method == "DOP853" else {"jac": jacobian}
        # BDF runs out of digits below this; it only confirms the first method.
        tightest = max(rtol, 1e-10) if method == "BDF" else rtol
        run = solve_ivp(f, (0, times[-1]), y0, method=method, t_eval=times, rtol=tightest, atol=atol, **options)
        assert run.success, run.message
        results.append(run.y.T)
    difference = float(np.max(np.abs(results[0] - results[1]) / np.maximum(np.abs(results[0]), 1e-3 * np.max(np.abs(results[0])))))
    assert difference < agree, (name, difference)
    return {"times": times, "states": results[0].tolist(), "methods": list(methods), "difference": difference}


def van_der_pol(mu):
    f = lambda t, y: [y[1], mu * (1 - y[0] ** 2) * y[1] - y[0]]
    jac = lambda t, y: [[0, 1], [-2 * mu * y[0] * y[1] - 1, mu * (1 - y[0] ** 2)]]
    return f, jac


def robertson(t, y):
    return [-0.04 * y[0] + 1e4 * y[1] * y[2], 0.04 * y[0] - 1e4 * y[1] * y[2] - 3e7 * y[1] ** 2, 3e7 * y[1] ** 2]


def robertson_jacobian(t, y):
    return [
        [-0.04, 1e4 * y[2], 1e4 * y[1]],
        [0.04, -1e4 * y[2] - 6e7 * y[1], -1e4 * y[1]],
        [0, 6e7 * y[1], 0],
    ]


def driven_pair(t, y):
    return [math.cos(t) - y[0] * y[1], -y[1] + 0.5 * math.sin(2 * t) * y[0]]


def driven_pair_jacobian(t, y):
    return [[-y[1], -y[0]], [0.5 * math.sin(2 * t), -1]]


def pool(stores):
    """Exchange of stores with a pool, last unknown; as in problems.ts, spread of six decades."""
    pace = np.array([10 ** ((6 * ((i * 7919) % stores)) / stores) for i in range(stores)])

    def f(t, y):
        flow = pace * (y[-1] / stores - np.cbrt(y[:-1]))
        return np.append(flow, -flow.sum())

    def jac(t, y):
        own = -pace / 3 * np.cbrt(y[:-1]) ** -2
        full = np.zeros((stores + 1, stores + 1))
        full[np.arange(stores), np.arange(stores)] = own
        full[:-1, -1] = pace / stores
        full[-1, :-1] = -own
        full[-1, -1] = -pace.sum() / stores
        return full

    return f, jac


def main():
    mild, mild_jacobian = van_der_pol(5.0)
    pool_rates, pool_jacobian = pool(12)
    pool_start = [1 + 0.05 * i for i in range(12)] + [6.0]
    values = {
        "vanDerPol5": both("mu 5", mild, mild_jacobian, [2, 0], [5, 20], ("DOP853", "Radau"), 1e-12, 1e-14, 1e-7),
        "robertson": both(
            "robertson", robertson, robertson_jacobian, [1, 0, 0], [0.4, 40, 4e4, 4e8], ("Radau", "BDF"), 1e-12, 1e-18, 1e-5
        ),
        "drivenPair": both(
            "driven", driven_pair, driven_pair_jacobian, [1, 0.5], [1, 3, 10], ("DOP853", "Radau"), 1e-13, 1e-15, 1e-10
        ),
        "pool12": both(
            "pool", pool_rates, pool_jacobian, pool_start, [1e-6, 1e-3, 1, 10], ("Radau", "BDF"), 1e-12, 1e-15, 1e-6
        ),
    }
    path = pathlib.Path(__file__).with_name("integrators.json")
    path.write_text(json.dumps(values, indent=1) + "\n")
    for name, value in values.items():
        print(name, value["difference"])


main()
