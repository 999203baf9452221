"""SciPy's bounded least squares on the problem of bench_solve: solve.py BENCH_SOLVE.

Same start, same bounds, cost equal within 1e-6; the two alternate. At least 200 times passes.
"""

import json
import subprocess
import sys
import time

import numpy as np
from scipy.optimize import least_squares

LEAST = 200
PAIRS = 5
CALLS = 20


def output(program, option):
    return subprocess.run([program, option], check=True, capture_output=True, text=True).stdout


def residual_function(problem):
    relative_powers = np.array(problem["relative_powers"])  # line, glass
    colors = np.array(problem["colors"]) / problem["color_budget_mm"]  # color, line

    def residuals(powers):
        focal = (1.0 / powers.sum() - problem["target_mm"]) / problem["focal_budget_mm"]
        return np.concatenate(([focal], colors @ (1.0 / (relative_powers @ powers))))

    return residuals


def main():
    program = sys.argv[1]
    problem = json.loads(output(program, "--problem"))
    residuals = residual_function(problem)
    bounds = (-problem["bound"], problem["bound"])

    def scipy_solve():
        return least_squares(residuals, problem["start"], bounds=bounds, method="trf")

    cost = scipy_solve().cost
    if not abs(cost - problem["cost"]) <= 1e-6:
        print(f"solve: cost {problem['cost']} is not that of SciPy, {cost}")
        return 1
    ratios = []
    for _ in range(PAIRS):
        start = time.perf_counter()
        for _ in range(CALLS):
            scipy_solve()
        theirs = (time.perf_counter() - start) / CALLS
        ratios.append(theirs / float(output(program, "--time")))
    middle = sorted(ratios)[PAIRS // 2]
    print(f"solve, thin three elements: SciPy trf / solve(): ratio {middle:.0f} "
          f"({min(ratios):.0f} to {max(ratios):.0f}, {PAIRS} pairs), at least {LEAST}: "
          f"{'pass' if middle >= LEAST else 'FAIL'} (SciPy {1e3 * theirs:.1f} ms)")
    return 0 if middle >= LEAST else 1


if __name__ == "__main__":
    sys.exit(main())
