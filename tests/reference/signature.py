"""Energy signatures of random homes, fitted by scipy and statsmodels.

    python tests/reference/signature.py tests/reference

Writes signature_days.csv (daily outdoor temperature), signature_intervals.csv (readings of several homes, irregular intervals) and
signature_fits.csv (what the libraries find). Made with scipy 1.17.1, statsmodels 0.15.0, numpy 2.4.6.

The base temperature is that of scipy.optimize.minimize_scalar over the weighted sum of squares of statsmodels WLS (weights =
days), started around the best of a grid; base load and slope are those of that regression. Standard errors and the externally
studentized residuals are of statsmodels OLS on the linearisation about the optimum, columns times sqrt(days).
"""

import datetime as dt
import sys
from pathlib import Path

import numpy as np
import statsmodels.api as sm
from scipy.optimize import minimize_scalar

folder = Path(sys.argv[1])
random = np.random.default_rng(5)
start = dt.date(2022, 1, 1)
count = 730
days = np.arange(count)
outdoor = np.round(10.5 - 7 * np.cos(2 * np.pi * (days - 25) / 365.25) + np.convolve(random.normal(0, 4, count + 4), np.ones(5) / 5, "valid") * 1.6, 2)
with open(folder / "signature_days.csv", "w") as out:
    print("date,mean_c", file=out)
    for i, t in enumerate(outdoor):
        print(start + dt.timedelta(days=i), t, sep=",", file=out)

intervals = open(folder / "signature_intervals.csv", "w")
fits = open(folder / "signature_fits.csv", "w")
print("home,from,to,kwh", file=intervals)
print("home,base_load,slope,base_c,se_base_load,se_slope,se_base_c,r_squared,cv_rmse,greatest_off,greatest_off_at", file=fits)

for home in range(8):
    slope, base_c, base_load = random.uniform(3, 9), random.uniform(13, 18), random.uniform(4, 14)
    readings = [int(random.integers(0, 250))]
    while readings[-1] < readings[0] + 370:
        readings.append(readings[-1] + int(random.integers(12, 40)))
    readings = [r for r in readings if r < count]
    spans = list(zip(readings[:-1], readings[1:]))
    kwh = np.array([round(sum(base_load + slope * max(0, base_c - outdoor[d]) + random.normal(0, 8) for d in range(a, b)), 1) for a, b in spans])
    if home % 3 == 0:
        kwh[2] = round(kwh[2] * 1.6, 1)
    for (a, b), e in zip(spans, kwh):
        print(home, start + dt.timedelta(days=a), start + dt.timedelta(days=b), e, sep=",", file=intervals)
    length = np.array([b - a for a, b in spans], float)
    y = kwh / length

    def degrees(base):
        return np.array([np.maximum(0, base - outdoor[a:b]).mean() for a, b in spans])

    def colder(base):
        return np.array([(outdoor[a:b] < base).mean() for a, b in spans])

    def jac(x, b, m, base):
        return np.column_stack([np.ones(len(spans)), degrees(base), m * colder(base)])

    def squares(base):
        design = np.column_stack([np.ones(len(spans)), degrees(base)])
        fit = sm.WLS(y, design, weights=length).fit()
        return fit.ssr, fit.params

    grid = np.arange(8, 22.001, 0.01)
    best = min(grid, key=lambda base: squares(base)[0])
    found = minimize_scalar(lambda base: squares(base)[0], bounds=(best - 0.02, best + 0.02), method="bounded", options={"xatol": 1e-11})
    base = found.x
    b, m = squares(base)[1]
    # The same fit linearised about its optimum: an ordinary weighted regression on three columns.
    scale = np.sqrt(length)
    linear = sm.OLS((y - b - m * degrees(base)) * scale, jac(None, b, m, base) * scale[:, None]).fit()
    errors = linear.bse
    off = linear.get_influence().resid_studentized_external
    residual = y - b - m * degrees(base)
    mean = np.average(y, weights=length)
    r_squared = 1 - (length * residual**2).sum() / (length * (y - mean) ** 2).sum()
    cv = np.sqrt((length * residual**2).sum() / (len(spans) - 3) / length.mean()) / mean
    at = int(np.argmax(np.abs(off)))
    print(home, *(repr(float(v)) for v in (b, m, base, *errors, r_squared, cv, off[at])), at, sep=",", file=fits)
