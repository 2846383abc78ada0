"""First-order shares of the variance of two test functions, for tests/odds.rs.

Made with SALib 1.6.0 (`pip install SALib`): `sobol` sampling and analysis for the Ishigami function (a = 7, b = 0.1) and the Sobol' g function
(a = 0, 1, 4.5, 9), with 2**15 base points and a fixed seed. The closed forms stand beside them. Writes odds_shares.csv.
"""

import csv
import math
import os
from importlib.metadata import version

import numpy as np
from SALib.analyze import sobol
from SALib.sample import sobol as sample

A, B = 7.0, 0.1
G = [0.0, 1.0, 4.5, 9.0]


def ishigami(u):
    z = (2 * u - 1) * math.pi
    return np.sin(z[:, 0]) + A * np.sin(z[:, 1]) ** 2 + B * z[:, 2] ** 4 * np.sin(z[:, 0])


def g(u):
    return np.prod([(np.abs(4 * u[:, i] - 2) + a) / (1 + a) for i, a in enumerate(G)], axis=0)


def closed_ishigami():
    v1 = 0.5 * (1 + B * math.pi**4 / 5) ** 2
    v2 = A**2 / 8
    v13 = B**2 * math.pi**8 * (1 / 18 - 1 / 50)
    whole = v1 + v2 + v13
    return [v1 / whole, v2 / whole, 0.0]


def closed_g():
    parts = [1 / (3 * (1 + a) ** 2) for a in G]
    whole = math.prod(1 + p for p in parts) - 1
    return [p / whole for p in parts]


def main():
    rows = []
    for name, function, count, closed in [
        ("ishigami", ishigami, 3, closed_ishigami()),
        ("sobol_g", g, 4, closed_g()),
    ]:
        problem = {"num_vars": count, "names": [f"x{i}" for i in range(count)], "bounds": [[0, 1]] * count}
        points = sample.sample(problem, 2**15, calc_second_order=False, seed=1)
        found = sobol.analyze(problem, function(points), calc_second_order=False, seed=1)
        for i in range(count):
            rows.append([name, i, f"{closed[i]:.6f}", f"{found['S1'][i]:.6f}", f"{found['S1_conf'][i]:.6f}"])
    path = os.path.join(os.path.dirname(os.path.abspath(__file__)), "odds_shares.csv")
    with open(path, "w", newline="") as file:
        writer = csv.writer(file, lineterminator="\n")
        writer.writerow(["function", "quantity", "closed_form", "salib", "salib_95"])
        writer.writerows(rows)
    print("SALib", version("SALib"))


if __name__ == "__main__":
    main()
