"""Chooses a typical year by ISO 15927-4 from synthetic days, independently of the Rust code.

    python tests/reference/typical_year.py

writes tests/reference/typical_year_days.csv (twelve invented years of daily means, seeded) and
tests/reference/typical_year_choice.csv (statistics and order of every month). numpy 2.4.6, scipy 1.17.1, pandas 3.1.1.
Steps of the standard [from memory]: ranks K of the daily means of one calendar month over all years, Phi = K/(N+1); ranks J
within the one month, F = J/(n+1); FS = sum |F - Phi|; rank the years by each FS, add the ranks; of the least three take the
one whose mean wind is nearest to that of all years. 29 February is left out.
"""

import pathlib

import numpy as np
import pandas as pd
from scipy.stats import rankdata

HERE = pathlib.Path(__file__).parent


def days():
    rng = np.random.default_rng(15927)
    dates = pd.date_range("2001-01-01", "2012-12-31", freq="D")
    n = len(dates)
    season = np.cos(2 * np.pi * (dates.day_of_year.to_numpy() - 20) / 365.25)

    def memory(keep):
        out = np.empty(n)
        value = rng.normal()
        for i in range(n):
            value = keep * value + np.sqrt(1 - keep**2) * rng.normal()
            out[i] = value
        return out

    by_year = rng.normal(0, 0.6, 12)[dates.year - 2001]
    return pd.DataFrame(
        {
            "date": dates.strftime("%Y-%m-%d"),
            "temperature_c": (9 - 8 * season + by_year + 3.5 * memory(0.8)).round(3),
            "global_w_per_m2": (np.clip(130 - 100 * season, 10, None) * np.exp(0.4 * memory(0.4))).clip(1, 400).round(3),
            "relative_humidity_percent": np.clip(78 + 8 * season + 8 * memory(0.6), 20, 99.9).round(3),
            "wind_m_per_s": (4 * np.exp(0.4 * memory(0.5))).round(3),
        }
    )


def choose(frame):
    when = pd.to_datetime(frame["date"])
    frame = frame[~((when.dt.month == 2) & (when.dt.day == 29))]
    when = pd.to_datetime(frame["date"])
    rows = []
    for month in range(1, 13):
        block = frame[when.dt.month == month]
        year = pd.to_datetime(block["date"]).dt.year.to_numpy()
        years = np.unique(year)
        table = pd.DataFrame({"month": month, "year": years})
        for name in ("temperature_c", "global_w_per_m2", "relative_humidity_percent"):
            values = block[name].to_numpy()
            phi = rankdata(values, method="max") / (len(values) + 1)
            fs = []
            for y in years:
                own = values[year == y]
                f = rankdata(own, method="max") / (len(own) + 1)
                fs.append(np.abs(f - phi[year == y]).sum())
            table["fs_" + name] = fs
        table["rank_sum"] = sum(
            rankdata(table[c], method="min").astype(int) for c in table.columns if c.startswith("fs_")
        )
        wind = block["wind_m_per_s"].to_numpy()
        means = np.array([wind[year == y].mean() for y in years])
        table["wind_deviation"] = np.abs(means - means.mean())
        table = table.sort_values(["rank_sum", "fs_temperature_c", "year"]).reset_index(drop=True)
        best = table.iloc[:3].sort_values("wind_deviation")
        rows.append(pd.concat([best, table.iloc[3:]]))
    return pd.concat(rows)


if __name__ == "__main__":
    frame = days()
    frame.to_csv(HERE / "typical_year_days.csv", index=False, lineterminator="\n")
    choose(pd.read_csv(HERE / "typical_year_days.csv")).to_csv(
        HERE / "typical_year_choice.csv", index=False, float_format="%.9f", lineterminator="\n"
    )
