#!/usr/bin/env python3
"""Makes the invented weather years of weather_samples/.

Run from the repository root with any Python 3.8 or later; only the standard library is used, and the seeds are fixed, so
the files come out the same every time:

    python3 tests/reference/make_weather.py

Nothing here describes a real place. A year is the sum of
- the season: a cosine with its least value late in January,
- weather that lasts for days: two first-order autoregressive series, one of about a week and one of about two days,
- the day: the sun's warmth, weaker under cloud and in winter, at its greatest about three hours after noon,
- a cold spell where the place has one.
Cloud is a third autoregressive series squeezed between 0 and 1. Sun height follows from latitude and date (Cooper 1969
declination); clear-sky global radiation is Haurwitz 1945, GHI = 1098 cos z exp(-0.057 / cos z); cloud reduces it by
1 - 0.75 n^3.4 (Kasten & Czeplak 1980). Humidity comes from a dew point that follows the air mass and never exceeds the air
temperature (saturation by Magnus, Alduchov & Eskridge 1996). Stamps are UTC and begin their hour.
"""

import math
import random

HOURS = 8760


def autoregressive(draw, time_constant_h, n):
    """Unit variance, exponential memory of the given length."""
    keep = math.exp(-1.0 / time_constant_h)
    kick = math.sqrt(1.0 - keep * keep)
    value = draw.gauss(0.0, 1.0)
    series = []
    for _ in range(n):
        value = keep * value + kick * draw.gauss(0.0, 1.0)
        series.append(value)
    return series


def cos_zenith(latitude_deg, longitude_deg, hour):
    """Mean over the hour that begins at `hour` of the UTC year."""
    total = 0.0
    for part in (1 / 6, 1 / 2, 5 / 6):
        t = hour + part
        day = t / 24.0
        declination = math.radians(23.45) * math.sin(2 * math.pi * (284 + day + 1) / 365)
        solar = (t + longitude_deg / 15.0) % 24.0
        angle = math.radians(15.0 * (solar - 12.0))
        latitude = math.radians(latitude_deg)
        total += max(
            0.0,
            math.sin(latitude) * math.sin(declination)
            + math.cos(latitude) * math.cos(declination) * math.cos(angle),
        )
    return total / 3.0


def saturation_hpa(t_c):
    return 6.1094 * math.exp(17.625 * t_c / (243.04 + t_c))


def spell_depth(hour, begin, days, shoulder_h=48):
    """0 outside a cold spell, 1 inside it, rising and falling over two days."""
    end = begin + 24 * days
    if hour < begin:
        x = (hour - (begin - shoulder_h)) / shoulder_h
    elif hour > end:
        x = (end + shoulder_h - hour) / shoulder_h
    else:
        x = 1.0
    x = min(1.0, max(0.0, x))
    return x * x * (3 - 2 * x)


def year(place):
    draw = random.Random(place["seed"])
    week = autoregressive(draw, 140, HOURS)
    days = autoregressive(draw, 36, HOURS)
    cloudy = autoregressive(draw, 22, HOURS)
    damp = autoregressive(draw, 40, HOURS)
    gusty = autoregressive(draw, 14, HOURS)
    jitter = autoregressive(draw, 1.5, HOURS)
    air, dew, sun, wind = [], [], [], []
    warmth = 0.0
    for hour in range(HOURS):
        season = math.cos(2 * math.pi * (hour / 24.0 - place["coldest_day"]) / 365)
        winter = 0.5 * (1 + season)
        spell = 0.0
        if place.get("spell"):
            spell = spell_depth(hour, 24 * place["spell"]["day"], place["spell"]["days"])
        n = 1 / (1 + math.exp(-(place["cloud"] + 0.5 * season + 1.5 * cloudy[hour])))
        n *= 1 - 0.8 * spell
        height = cos_zenith(place["latitude"], place["longitude"], hour)
        clear = 1098 * height * math.exp(-0.057 / height) if height > 0.01 else 0.0
        glow = clear * (1 - 0.75 * n**3.4)
        # The sun's warmth lags behind it, like a store that fills by day and empties at night.
        warmth += (glow - warmth) / 5.0
        lasting = place["lasting_k"] * (0.75 * week[hour] + 0.66 * days[hour]) * (0.6 + 0.4 * winter)
        night = -place["night_k"] * (1 - n) * (1 - min(1.0, glow / 100))
        t = place["mean_c"] - place["swing_k"] * season + (1 - spell) * lasting
        t += place["day_k"] * (warmth / 300) + night + 0.35 * jitter[hour]
        if spell:
            t = (1 - spell) * t + spell * (place["spell"]["c"] + 2.2 * (warmth / 60) + night * 0.6 + 0.5 * days[hour])
        air.append(t)
        depression = place["depression_k"] * (1 - 0.55 * winter) * math.exp(0.45 * damp[hour]) * (1.25 - 0.5 * n)
        dew.append((place["mean_c"] - place["swing_k"] * season + (1 - spell) * lasting) * (1 - spell) + spell * (t - 2) - depression)
        sun.append(glow)
        wind.append(place["wind_m_per_s"] * math.exp(0.45 * gusty[hour] - 0.1) * (0.85 + 0.3 * winter) * (1 - 0.5 * spell))
    shift = place["mean_c"] - sum(air) / HOURS
    rows = []
    for hour in range(HOURS):
        t = air[hour] + (shift if not place.get("spell") or air[hour] > place["spell"]["c"] + 8 else 0.0)
        humidity = 100 * saturation_hpa(min(dew[hour] + shift, t)) / saturation_hpa(t)
        humidity = min(100.0, max(15.0, humidity))
        rows.append((t, humidity, sun[hour], wind[hour]))
    return rows


PLACES = [
    {
        "file": "morvane_sound.csv",
        "label": "Morvane Sound, an invented mild maritime place at 54 N, 3 W",
        "seed": 20230101,
        "latitude": 54.0,
        "longitude": -3.0,
        "coldest_day": 27,
        "mean_c": 10.0,
        "swing_k": 5.4,
        "lasting_k": 4.2,
        "day_k": 3.6,
        "night_k": 1.6,
        "cloud": 1.7,
        "depression_k": 2.6,
        "wind_m_per_s": 5.0,
    },
    {
        "file": "ostrel_plain.csv",
        "label": "Ostrel Plain, an invented continental place at 50 N, 16 E, with a hard cold spell in January",
        "seed": 20230202,
        "latitude": 50.0,
        "longitude": 16.0,
        "coldest_day": 20,
        "mean_c": 8.5,
        "swing_k": 10.2,
        "lasting_k": 4.4,
        "day_k": 5.2,
        "night_k": 2.4,
        "cloud": 1.5,
        "depression_k": 3.4,
        "wind_m_per_s": 3.2,
        "spell": {"day": 15, "days": 3, "c": -17.6},
    },
]


def main():
    for place in PLACES:
        with open("weather_samples/" + place["file"], "w", encoding="utf-8", newline="\n") as out:
            out.write("# Invented weather: " + place["label"] + ".\n")
            out.write("# It describes no real place and no real year; made by tests/reference/make_weather.py, which says how.\n")
            out.write("# Stamps are UTC and begin their hour; the date is a stand-in.\n")
            out.write("time beginning (UTC),temperature (°C),relative humidity (%),global radiation (W/m²),wind speed (m/s)\n")
            for hour, (t, humidity, sun, wind) in enumerate(year(place)):
                day, h = divmod(hour, 24)
                month = 0
                lengths = [31, 28, 31, 30, 31, 30, 31, 31, 30, 31, 30, 31]
                while day >= lengths[month]:
                    day -= lengths[month]
                    month += 1
                out.write(
                    f"2023-{month + 1:02}-{day + 1:02}T{h:02}:00Z,{t:.1f},{humidity:.0f},{sun:.0f},{wind:.1f}\n"
                )


if __name__ == "__main__":
    main()
