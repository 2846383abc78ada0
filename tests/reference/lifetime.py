"""Present value, levelised cost and discounted payback, for tests/lifetime.rs.

Made with Python 3.11, numpy 2.4.6 and numpy-financial 1.0.0:
    python tests/reference/lifetime.py > tests/reference/lifetime.csv
"""

import csv
import sys

import numpy as np
import numpy_financial as npf

rng = np.random.default_rng(20)
FIELDS = (
    "years rate capital life due maintenance grant electricity fuel electricity_change fuel_change heat "
    "today_electricity today_fuel present_value levelised payback"
).split()


def spending(years, capital, life, due, maintenance, grant, electricity, fuel, e_change, f_change):
    """Paid at the end of each year, year 0 first, and what the part is worth at the very end."""
    paid = np.zeros(years + 1)
    paid[0] -= grant
    last = None
    for year in range(due, years, life):
        paid[year] += capital
        last = year
    n = np.arange(1, years + 1)
    paid[1:] += maintenance + electricity * (1 + e_change) ** (n - 1) + fuel * (1 + f_change) ** (n - 1)
    left = 0.0 if last is None else capital * (life - (years - last)) / life
    return paid, left


def payback(choice, today, rate):
    """First year in which the discounted spending so far of the choice is no more than today's, straight within the year."""
    factors = (1 + rate) ** -np.arange(len(choice))
    gap = np.cumsum((choice - today) * factors)
    if gap[0] <= 0:
        return 0.0
    met = np.flatnonzero(gap <= 0)
    if len(met) == 0:
        return ""
    k = met[0]
    return (k - 1) + gap[k - 1] / (gap[k - 1] - gap[k])


out = csv.writer(sys.stdout, lineterminator="\n")
out.writerow(FIELDS)
for i in range(40):
    years = int(rng.integers(1, 41))
    rate = float(np.round(rng.uniform(-0.05, 0.12), 3))
    capital = float(np.round(rng.uniform(0, 20000), 2))
    life = int(rng.integers(1, 31))
    due = 0 if i % 3 else int(rng.integers(0, 20))
    maintenance = float(np.round(rng.uniform(0, 300), 2))
    grant = 0.0 if i % 2 else float(np.round(rng.uniform(0, 5000), 2))
    electricity, fuel = (float(np.round(rng.uniform(0, 1500), 2)) for _ in range(2))
    e_change, f_change = (float(np.round(rng.uniform(-0.03, 0.05), 3)) for _ in range(2))
    heat = float(np.round(rng.uniform(4000, 30000), 1))
    te, tf = float(np.round(rng.uniform(0, 200), 2)), float(np.round(rng.uniform(800, 3000), 2))
    paid, left = spending(years, capital, life, due, maintenance, grant, electricity, fuel, e_change, f_change)
    today, _ = spending(years, 0.0, 1, 0, 0.0, 0.0, te, tf, e_change, f_change)
    net = paid.copy()
    net[-1] -= left
    present = npf.npv(rate, net)
    heats = np.full(years + 1, heat)
    heats[0] = 0
    levelised = present / npf.npv(rate, heats)
    out.writerow(
        [years, rate, capital, life, due, maintenance, grant, electricity, fuel, e_change, f_change, heat, te, tf]
        + [repr(float(present)), repr(float(levelised)), payback(paid, today, rate)]
    )
