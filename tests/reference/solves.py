#!/usr/bin/python3
"""Makes solves.json: trains solved by SciPy, and what `chromacore solve --json` must find.

    /usr/bin/python3 tests/reference/solves.py            write the table
    /usr/bin/python3 tests/reference/solves.py --check    solve again and compare (1e-6)

Each entry holds `toml` and `expect`: `status`, `cost` (half the sum of the squared residuals in
budgets), `start_cost`, `varied` (in the file's order) and `residuals` (in the requirements' order).
Solved by `scipy.optimize.least_squares` (trf, bounds), derivatives by complex steps, and finished
with the variables at a bound held there, so that values are good to 1e-9.

With fewer requirements than variables the reference is the least change that meets them all:
minimise sum ((x - start)/scale)^2 subject to residuals of 0, by SLSQP, finished by steps of
least norm. The scale is 1/|f| for powers and curvatures and |f|/10 for thicknesses and gaps; f is
the target of the focal length, else the focal length at the start.
"""
import sys

sys.dont_write_bytecode = True

import math  # noqa: E402
from pathlib import Path  # noqa: E402

import numpy as np  # noqa: E402
from mpmath import mpf  # noqa: E402
from scipy.optimize import least_squares, minimize  # noqa: E402

import table  # noqa: E402
from model import Analysis  # noqa: E402
from solve_problems import PROBLEMS  # noqa: E402
from train_text import DOUBLE, Train  # noqa: E402

FILE = Path(__file__).with_suffix(".json")
TIGHT = {"ftol": 1e-15, "xtol": 1e-15, "gtol": 1e-15, "max_nfev": 2000}
STEP = 1e-30
LENGTHS = ("thickness_mm", "gap_after_mm")

# Coefficients: SCHOTT AG, optical glass data of 2017-01-20, as in refractiveindex.info (CC0).
SELLMEIER = {
    "N-BK7": (1.03961212, 0.00600069867, 0.231792344, 0.0200179144, 1.01046945, 103.560653),
    "SCHOTT/F2": (1.34533359, 0.00997743871, 0.209073176, 0.0470450767, 0.937357162, 111.886764)}


def sellmeier(c):
    return lambda w: math.sqrt(1 + sum(c[k] * w * w / (w * w - c[k + 1]) for k in (0, 2, 4)))


CATALOGUE = {name: sellmeier(c) for name, c in SELLMEIER.items()}


class Problem:
    def __init__(self, text):
        self.train = Train(text, DOUBLE, CATALOGUE)
        self.vary = self.train.vary
        self.low = np.array([v.get("min", -np.inf) for v in self.vary], float)
        self.high = np.array([v.get("max", np.inf) for v in self.vary], float)
        self.start = np.array([self.get(v) for v in self.vary])
        aims = [r["target"] for r in self.train.require if r["quantity"] == "focal_length_mm"]
        f = abs(aims[0] if aims else Analysis(self.train).system.focal_length)
        self.scale = np.array([f / 10 if v["parameter"] in LENGTHS else 1 / f for v in self.vary])

    def get(self, v):
        e = self.train.elements[v["element"] - 1]
        if "curvature" in v["parameter"]:
            return e.curvatures[0 if "front" in v["parameter"] else 1]
        return getattr(e, {"power_per_mm": "power", "thickness_mm": "thickness",
                           "gap_after_mm": "gap"}[v["parameter"]])

    def set(self, v, value):
        k = v["element"] - 1
        e = self.train.elements[k]
        if v["parameter"] == "curvature_front_per_mm":
            e.curvatures[0] = value
            if k and self.train.elements[k - 1].cemented:
                self.train.elements[k - 1].curvatures[1] = value
        elif v["parameter"] == "curvature_back_per_mm":
            e.curvatures[1] = value
            if e.cemented:
                self.train.elements[k + 1].curvatures[0] = value
        else:
            setattr(e, {"power_per_mm": "power", "thickness_mm": "thickness",
                        "gap_after_mm": "gap"}[v["parameter"]], value)

    def residuals(self, x):
        for v, value in zip(self.vary, x):
            self.set(v, value)
        a = Analysis(self.train)
        return np.array([a.residual(r) for r in self.train.require])

    def jacobian(self, x):
        columns = []
        for k in range(len(x)):
            stepped = np.array(x, complex)
            stepped[k] += 1j * STEP * self.scale[k]
            columns.append(self.residuals(stepped).imag / (STEP * self.scale[k]))
        return np.array(columns).T

    def cost(self, x):
        return 0.5 * float(np.sum(self.residuals(x)**2))


# ------------------------------------------------------------------------------ two ways to solve
def least_residuals(p):
    found = least_squares(p.residuals, p.start, p.jacobian, bounds=(p.low, p.high), method="trf",
                          x_scale=p.scale, **TIGHT).x
    held = held_at_bounds(p, found)
    x = finished(p, found, held)
    assert p.cost(x) <= p.cost(found) * (1 + 1e-9) + 1e-20, p.train.name
    check_minimum(p, x, held)
    return x


def finished(p, x, held):
    """Gauss-Newton steps on what is free, as long as they shorten the gradient."""
    x = x.copy()
    for k, bound in held.items():
        x[k] = bound
    free = [k for k in range(len(x)) if k not in held]
    best = np.inf
    for _ in range(200):
        j, r = (p.jacobian(x) * p.scale)[:, free], p.residuals(x)
        slope = np.linalg.norm(j.T @ r)
        if slope >= best:
            break
        best, kept = slope, x.copy()
        x[free] -= np.linalg.lstsq(j, r, rcond=None)[0] * p.scale[free]
    return kept


def held_at_bounds(p, x):
    """{variable: bound} where x lies at a bound and the gradient pushes against it."""
    gradient = p.jacobian(x).T @ p.residuals(x) * p.scale
    near = 1e-5 * p.scale
    held = {}
    for k in range(len(x)):
        if x[k] - p.low[k] < near[k] and gradient[k] > 1e-7:
            held[k] = p.low[k]
        if p.high[k] - x[k] < near[k] and gradient[k] < -1e-7:
            held[k] = p.high[k]
    return held


def check_minimum(p, x, held):
    gradient = p.jacobian(x).T @ p.residuals(x) * p.scale
    size = np.linalg.norm(p.jacobian(x) * p.scale, axis=0)
    for k in range(len(x)):
        inside = p.low[k] <= x[k] <= p.high[k]
        outward = k in held and (gradient[k] > 0) == (held[k] == p.low[k])
        level = abs(gradient[k]) < 1e-8 * size[k]
        assert inside and (outward or level), (p.train.name, k, gradient)


def least_change(p):
    def change(z):
        return 0.5 * float(z @ z)

    at = (lambda z: p.start + p.scale * z)
    constraint = {"type": "eq", "fun": lambda z: p.residuals(at(z)),
                  "jac": lambda z: p.jacobian(at(z)) * p.scale}
    bounds = list(zip((p.low - p.start) / p.scale, (p.high - p.start) / p.scale))
    found = minimize(change, np.zeros(len(p.start)), jac=lambda z: z, bounds=bounds, method="SLSQP",
                     constraints=[constraint], options={"ftol": 1e-15, "maxiter": 500})
    z = found.x
    assert all(low < v < high for v, (low, high) in zip(z, bounds)), p.train.name
    for _ in range(300):                                   # constraints linear, least norm, again
        j, r = p.jacobian(at(z)) * p.scale, p.residuals(at(z))
        z = np.linalg.lstsq(j, j @ z - r, rcond=None)[0]
    assert np.max(np.abs(p.residuals(at(z)))) < 1e-9, p.train.name
    assert np.linalg.norm(z - found.x) < 1e-5 * max(1, np.linalg.norm(z)), p.train.name
    return at(z)


# ---------------------------------------------------------------------------------- what is found
def figure(x):
    return mpf(0) if abs(x) < 1e-12 else mpf(repr(float(x)))


def solve(text):
    p = Problem(text)
    start_cost = p.cost(p.start)
    x = least_change(p) if len(p.train.require) < len(p.vary) else least_residuals(p)
    residuals, cost = p.residuals(x), p.cost(x)
    met = np.max(np.abs(residuals)) <= 1
    varied = [{"element": v["element"], "parameter": v["parameter"],
               "value": mpf(repr(float(value))), "at_bound": bool(value in (low, high))}
              for v, value, low, high in zip(p.vary, x, p.low, p.high)]
    return {"status": "met" if met else "compromise", "cost": figure(cost),
            "start_cost": figure(start_cost), "varied": varied,
            "residuals": [figure(0 if abs(r) < 1e-9 else r) for r in residuals]}


def compute():
    return {"solves": [{"toml": text, "expect": solve(text)} for text in PROBLEMS]}


HEAD = {"made_by": "tests/reference/solves.py", "digits": 17}

if __name__ == "__main__":
    sys.exit(table.main(FILE, HEAD, compute, rel=1e-6, floor=mpf("1e-9")))
