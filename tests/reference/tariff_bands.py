"""Reference for tests/tariff_reference.rs: kilowatt-hours and cost by band, computed with pandas from scratch.

Two of the tariffs in tariffs/ are written out again here as conditions on a localized pandas index, minute by minute
where a band begins at half past. The hours cover the whole of 2024 in UTC and with it both clock changes (31 March and
27 October). Load of hour i of the year in UTC: 0.4 + ((i * 7919) % 1000) / 500 kWh, even within the hour.
Run: python tariff_bands.py > tariff_bands.csv (versions are printed in the first line)
"""
import sys

import numpy as np
import pandas as pd

print(f"# pandas {pd.__version__}, numpy {np.__version__}, Python {sys.version.split()[0]}")
print("tariff,zone,year,month,band,kwh,cost")

index = pd.date_range("2024-01-01", periods=8784, freq="h", tz="UTC")
load = pd.Series(0.4 + (np.arange(8784) * 7919 % 1000) / 500, index=index)
# Six pieces of ten minutes in each hour: every band edge used here lies between pieces.
pieces = load.resample("10min").ffill()
pieces = pieces.reindex(pd.date_range(index[0], periods=8784 * 6, freq="10min", tz="UTC"), method="ffill") / 6


def table(name, zone, assign):
    local = pieces.tz_convert(zone)
    frame = pd.DataFrame({"kwh": local.to_numpy()}, index=local.index)
    minute = frame.index.hour * 60 + frame.index.minute
    frame["band"], frame["rate"] = assign(frame.index, minute)
    frame["cost"] = frame.kwh * frame.rate
    grouped = frame.groupby([frame.index.year, frame.index.month, "band"])[["kwh", "cost"]].sum()
    for (year, month, band), row in grouped.iterrows():
        print(f"{name},{zone},{year},{month},{band},{row.kwh:.6f},{row.cost:.6f}")


def quiet_nights(_, minute):
    night = (minute >= 30) & (minute < 330)
    return np.where(night, "night", "day"), np.where(night, 0.094, 0.298)


HOLIDAYS = {(1, 1), (5, 1), (8, 15), (11, 1), (12, 25), (12, 26)}


def four_winds(index, minute):
    holiday = np.array([(m, d) in HOLIDAYS for m, d in zip(index.month, index.day)])
    weekday = (index.day_of_week < 5) & ~holiday
    winter = (index.month >= 11) | (index.month <= 3)
    night = (minute >= 22 * 60) | (minute < 6 * 60)
    peak = winter & weekday & (minute >= 17 * 60) & (minute < 20 * 60) & ~night
    band = np.select([night, peak], ["night", "winter peak"], "day")
    rate = np.select([night, peak], [0.149, 0.365], 0.224)
    return band, rate


table("cheap_night_electricity", "Europe/London", quiet_nights)
table("seasonal_electricity", "Europe/Paris", four_winds)
# A clock in the south and one that is not whole hours from UTC, with the same tariff.
table("cheap_night_electricity", "Australia/Adelaide", quiet_nights)
table("seasonal_electricity", "America/St_Johns", four_winds)
