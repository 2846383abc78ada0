"""Hourly columns of an invented home beside the invented weather of Morvane Sound: what its roof makes, what its household
uses, and the carbon of its grid. Python's standard library only.

    python tests/reference/make_account_columns.py

writes tests/data/account_columns.csv. Roof: 3 kW at 1000 W/m2 of the weather file's global radiation, 75 % of it reaching the
meter. Household: 0.15 kWh an hour, more from 07:00 and 17:00 UTC. Grid: a winter and an evening hump and a midday dip. None of
it is data of a real home or grid.
"""

import csv
import math
from pathlib import Path

here = Path(__file__).resolve().parent
weather = here.parent.parent / "weather_samples" / "morvane_sound.csv"
out = here.parent / "data" / "account_columns.csv"

rows = [row for row in csv.reader(weather.open(encoding="utf-8")) if row and not row[0].startswith("#")]
names = rows[0]
radiation = names.index("global radiation (W/m²)")

with out.open("w", encoding="utf-8", newline="\n") as file:
    file.write("# Invented; made by tests/reference/make_account_columns.py, which says how. Times are UTC and begin their hour.\n")
    file.write("time,roof_kwh,load_kwh,grid_g_per_kwh\n")
    for i, row in enumerate(rows[1:]):
        hour = i % 24
        roof = 3.0 * 0.75 * float(row[radiation]) / 1000.0
        load = 0.15 + (0.35 if 7 <= hour < 9 else 0.0) + (0.55 if 17 <= hour < 22 else 0.0)
        season = math.cos(2.0 * math.pi * i / 8760.0)
        grid = 170.0 + 40.0 * season + (45.0 if 17 <= hour < 20 else 0.0) - (60.0 if 11 <= hour < 15 else 0.0)
        file.write(f"{row[0]},{roof:.3f},{load:.2f},{grid:.0f}\n")
