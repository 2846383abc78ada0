"""Degree-days and design temperatures of the two open files, computed with pandas 3.1.1 and numpy 2.4.6.

    python tests/reference/weather.py

The figures stand in tests/weather.rs. UK daily rule as the UK Met Office gives it; 65 °F by (max + min)/2 is NOAA's definition;
Hitchin 1983 with k = 0.71 [from memory].
"""

import pathlib

import numpy as np
import pandas as pd

DATA = pathlib.Path(__file__).parent.parent / "data"


def uk_daily(lowest, highest, base):
    middle = (lowest + highest) / 2
    return np.select(
        [lowest > base, middle > base, highest >= base],
        [0, (base - lowest) / 4, (base - lowest) / 2 - (highest - base) / 4],
        base - middle,
    )


def report(name, t, day, month):
    by_day = t.groupby(day)
    mean, low, high = by_day.mean(), by_day.min(), by_day.max()
    cold = np.sort(t.to_numpy())
    print(name, len(t), "h")
    print(f"  mean {t.mean():.3f}, lowest {t.min():.3f}, 0.4 % {cold[35]:.3f}, 1 % {cold[87]:.3f}")
    print(f"  15.5 hourly {np.maximum(15.5 - t, 0).sum() / 24:.2f}")
    print(f"  15.5 daily mean {np.maximum(15.5 - mean, 0).sum():.2f}")
    print(f"  15.5 UK daily {uk_daily(low, high, 15.5).sum():.2f}")
    by_month = t.groupby(month)
    below = 15.5 - by_month.mean()
    hitchin = by_month.size() / 24 * below / (1 - np.exp(-0.71 * below))
    print(f"  15.5 Hitchin {hitchin.sum():.2f}")
    print(f"  18 hourly {np.maximum(18 - t, 0).sum() / 24:.2f}")
    base = (65 - 32) / 1.8
    print(f"  65 °F, (max + min)/2 {np.maximum(base - (low + high) / 2, 0).sum() * 1.8:.2f} F·d")


frame = pd.read_csv(DATA / "723170TYA.CSV", skiprows=1)
report("Greensboro", frame["Dry-bulb (C)"], frame.index // 24, frame["Date (MM/DD/YYYY)"].str[:2])
frame = pd.read_csv(DATA / "seattle-temps.csv")
whole = pd.Series(
    ((frame["temp"] - 32) / 1.8).to_numpy(), index=pd.to_datetime(frame["date"])
).reindex(pd.date_range("2010-01-01", periods=8760, freq="h")).interpolate()
report("Seattle, the missing hour interpolated", whole, whole.index.date, whole.index.month)
