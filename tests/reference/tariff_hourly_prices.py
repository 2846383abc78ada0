"""Makes tariffs/hourly_prices.csv: an invented year of hourly market prices.

Not data of any market. A price in EUR/MWh is built of: a yearly mean, a season (dearer in winter), two daily humps in
local time (morning and evening), lower weekends, a midday dip that follows the sun's season, weather of several days
(a slowly wandering level with a memory of three days: wind), and noise from hour to hour. Some hours come out
negative. Python 3, numpy; the seed is fixed. Run: python tariff_hourly_prices.py > ../../tariffs/hourly_prices.csv
"""
import datetime as dt
import sys
from zoneinfo import ZoneInfo

import numpy as np

YEAR = 2023
ZONE = ZoneInfo("Europe/Berlin")
rng = np.random.default_rng(7)
start = dt.datetime(YEAR, 1, 1, tzinfo=dt.timezone.utc)

print("# Invented hourly electricity prices of the year 2023 in UTC, times at the beginning of the hour. Not data of")
print("# any market: made by tests/reference/tariff_hourly_prices.py from a season, daily humps, weekends, a midday")
print(f"# dip in summer, wandering wind and noise (seed 7, numpy {np.__version__}).")
print("time,EUR/MWh")
wind = 0.0
memory = np.exp(-1 / 72)
for hour in range(8760):
    utc = start + dt.timedelta(hours=hour)
    local = utc.astimezone(ZONE)
    day = utc.timetuple().tm_yday
    season = np.cos(2 * np.pi * (day - 20) / 365)
    clock = local.hour + local.minute / 60
    humps = 26 * np.exp(-((clock - 8) / 2.0) ** 2) + 38 * np.exp(-((clock - 19) / 2.4) ** 2)
    night = -16 * np.exp(-((clock - 3.5) / 2.5) ** 2)
    midday = -(26 - 22 * season) * np.exp(-((clock - 13) / 2.2) ** 2)
    weekend = -14 if local.weekday() >= 5 else 0
    wind = memory * wind + np.sqrt(1 - memory**2) * rng.normal(0, 24)
    price = 82 + 16 * season + humps + night + midday + weekend + wind + rng.normal(0, 4)
    print(f"{utc:%Y-%m-%dT%H:%MZ},{price:.2f}")
print("done", file=sys.stderr)
