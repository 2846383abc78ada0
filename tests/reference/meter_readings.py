"""The invented meter file of the demonstration home.

    python tests/reference/meter_readings.py weather_samples/morvane_sound.csv > briefs/meter-readings.csv

Made with numpy 2.4.6. The home behind it: 196 W/K below a base temperature of 16.3 degrees, a boiler of 81 % gross, hot water of
4.9 kWh of gas a day that swings by 15 % with the cold water, 0.9 kWh a day of cooking, and every day a noise of its own.
The register counts cubic metres at 39.3 MJ/m3 and a volume correction of 1.02264; one reading is an estimate of the supplier's.
"""

import csv
import datetime as dt
import sys

import numpy as np

HEAT_LOSS, BASE_C, EFFICIENCY = 196.0, 16.3, 0.81
HOT_WATER, COOKING, SWING, NOISE = 4.9, 0.9, 0.15, 6.0
KWH_PER_M3 = 1.02264 * 39.3 / 3.6

hours = {}
with open(sys.argv[1], encoding="utf-8") as source:
    rows = csv.reader(line for line in source if not line.startswith("#"))
    next(rows)
    for row in rows:
        hours.setdefault(row[0][:10], []).append(float(row[1]))
means = {dt.date.fromisoformat(day): float(np.mean(values)) for day, values in hours.items()}
random = np.random.default_rng(1947)
used = {}
for day, mean in sorted(means.items()):
    season = np.cos(2 * np.pi * (day.timetuple().tm_yday - 46) / 365.25)
    kwh = HEAT_LOSS * 24 / 1000 / EFFICIENCY * max(0, BASE_C - mean) + HOT_WATER * (1 + SWING * season) + COOKING
    used[day] = max(0.0, kwh + random.normal(0, NOISE))

dates = [dt.date(2023, *d) for d in
         ((1, 3), (2, 1), (3, 2), (3, 31), (5, 2), (6, 1), (7, 4), (8, 1), (9, 1), (10, 3), (11, 1), (11, 30), (12, 29))]
print("# Invented readings of an invented home; made by tests/reference/meter_readings.py, which says what made them.")
print("date,register (m³),calorific value (MJ/m³),estimated")
register = 4127.0
for before, date in zip([None] + dates, dates):
    if before:
        register += sum(used[before + dt.timedelta(days=i)] for i in range((date - before).days)) / KWH_PER_M3
    estimated = date == dt.date(2023, 8, 1)
    shown = register + (11 if estimated else 0)
    print(date, f"{shown:.0f}", 39.3, "yes" if estimated else "no", sep=",")
