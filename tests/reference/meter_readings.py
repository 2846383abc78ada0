"""The invented meter file of the demonstration home.

    python tests/reference/meter_readings.py weather_samples/morvane_sound.csv > briefs/meter-readings.csv

Made with numpy 2.4.6. The home behind it is stepped hour by hour as one heat capacity, solved by the exponential of a constant right-hand
side: 206 W/K, 4.4 kWh/K, internal gains of 400 W, a solar aperture of 2.6 m2, aired above 23 degrees; the hours of
briefs/rooms.toml (20 degrees, 16 at night and on weekdays at noon) by a clock thermostat that is set two hours ahead of them and asks
for up to 14 kW; a boiler of 81 % gross, hot water of 4.9 kWh of gas a day that swings by 15 % with the cold water, 0.9 kWh a day of cooking, and every day a noise
of its own. The brief believes in other gains and in a warm-up as late as it can be made. The register counts cubic metres at 39.3 MJ/m3 and a
volume correction of 1.02264; one reading is an estimate of the supplier's.
"""

import csv
import datetime as dt
import sys
import zoneinfo

import numpy as np

HEAT_LOSS, CAPACITY, GAINS, APERTURE, MOST_KW = 0.206, 4.4, 0.400, 2.6, 14.0
SET, BACK, AIRED, EFFICIENCY = 20.0, 16.0, 23.0, 0.81
HOT_WATER, COOKING, SWING, NOISE = 4.9, 0.9, 0.15, 4.0
KWH_PER_M3 = 1.02264 * 39.3 / 3.6

zone = zoneinfo.ZoneInfo("Europe/London")
left = np.exp(-HEAT_LOSS / CAPACITY)
heat, room = {}, SET
with open(sys.argv[1], encoding="utf-8") as source:
    rows = csv.reader(line for line in source if not line.startswith("#"))
    next(rows)
    for row in rows:
        local = dt.datetime.fromisoformat(row[0].replace("Z", "+00:00")).astimezone(zone)
        outdoor, gains = float(row[1]), GAINS + APERTURE * float(row[3]) / 1000
        weekend, hour = local.weekday() >= 5, local.hour
        warm = 5 <= hour < 22 if weekend else 4 <= hour < 9 or 14 <= hour < 22  # two hours ahead
        asked = SET if warm else BACK
        settles = (asked - room * left) / (1 - left)
        kwh = min(MOST_KW, max(0.0, HEAT_LOSS * (settles - outdoor) - gains))
        ends = outdoor + (kwh + gains) / HEAT_LOSS
        room = min(ends + (room - ends) * left, max(AIRED, outdoor))
        heat[local.date()] = heat.get(local.date(), 0.0) + kwh
random = np.random.default_rng(1947)
used = {}
for day, kwh in sorted(heat.items()):
    season = np.cos(2 * np.pi * (day.timetuple().tm_yday - 46) / 365.25)
    fuel = kwh / EFFICIENCY + HOT_WATER * (1 + SWING * season) + COOKING
    used[day] = max(0.0, fuel + random.normal(0, NOISE))

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
