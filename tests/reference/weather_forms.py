"""Writes the same five winter days in the forms that people have them: tests/data/weather_forms. Standard library only."""
import math
from datetime import datetime, timedelta, timezone
from pathlib import Path

OUT = Path(__file__).parent.parent / "data" / "weather_forms"
START = datetime(2024, 1, 10, tzinfo=timezone.utc)
HOURS = 120
# Hour that is missing in one of the files: it lies on the straight line between its neighbours.
MISSING = 30


def temperature(i):
    return round(3.0 - 4.0 * math.sin(i / 19.0) + 2.5 * math.sin((i - 9) * math.tau / 24.0), 1)


celsius = [temperature(i) for i in range(HOURS)]
celsius[MISSING + 1] = round(celsius[MISSING + 1] + (round((celsius[MISSING - 1] + celsius[MISSING + 1]) * 10) % 2) / 10, 1)
celsius[MISSING] = round((celsius[MISSING - 1] + celsius[MISSING + 1]) / 2, 1)
humidity = [round(88 - 1.5 * (c - 3)) for c in celsius]
sun = [max(0, round(180 * math.sin((i % 24 - 8) * math.pi / 8))) if 8 <= i % 24 <= 16 else 0 for i in range(HOURS)]


def dew_point(c, percent):
    """Magnus formula with the constants of WMO-No. 8 (2018), over water."""
    a, b = 17.62, 243.12
    g = math.log(percent / 100) + a * c / (b + c)
    return b * g / (a - g)


def at(i, hours=0):
    return START + timedelta(hours=i + hours)


def write(name, lines, encoding="utf-8", end="\n"):
    (OUT / name).write_bytes((end.join(lines) + end).encode(encoding))


rows = range(HOURS)
plain = [f"{at(i):%Y-%m-%dT%H:%MZ},{celsius[i]},{humidity[i]},{sun[i]}" for i in rows]
head = "time,temperature (°C),relative humidity (%),global radiation (W/m²)"
write("plain.csv", [head, *plain])
write("first_days.csv", [head, *plain[:48]])
write("last_days.csv", [head, *plain[48:]])
write("later_days.csv", [head, *plain[96:]])
# Clock of UTC+1, the stamp at the end of the hour, 24:00 for midnight; decimal comma, Windows-1252, CRLF.
parts = []
for i in rows:
    t = at(i, 2)
    hour, day = (24, t - timedelta(days=1)) if t.hour == 0 else (t.hour, t)
    comma = f"{celsius[i]:.1f};{dew_point(celsius[i], humidity[i]):.2f}".replace(".", ",")
    parts.append(f"{day.year};{day.month};{day.day};{hour};{comma};{sun[i]}")
write("parts.csv", ["J;M;T;Std;Lufttemperatur °C;Taupunkt °C;Globalstrahlung W/m²", *parts], "cp1252", "\r\n")
# Three lines before the heading, date and time apart, month first, °F, an own marker for what is missing.
fahrenheit = [f"{c * 1.8 + 32:.2f}" for c in celsius]
fahrenheit[MISSING] = "-77"
write(
    "date_and_time.csv",
    [
        "Station 17", "no place", "hourly means", "day|clock|air|damp",
        *(f"{at(i):%m/%d/%Y|%H:%M}|{fahrenheit[i]}|{humidity[i]}" for i in rows),
    ],
)
# No heading; seconds since 1970, tenths of a degree.
write("numbered.csv", [f"x,{int(at(i).timestamp())},{round(celsius[i] * 10)}" for i in rows])
