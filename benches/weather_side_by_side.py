"""Thirty years of hourly rows: pandas reading a file and parsing its dates, beside Winterledger reading, checking, repairing and
describing the same file.

    python benches/weather_side_by_side.py

from the repository root; needs pandas and cargo. Both are timed inside a running process, starting and importing not counted;
the two take turns in rounds, so that both meet the same machine. Besides the time on the clock, which other work on the
machine stretches, the processor time of pandas is given.
"""

import math
import os
import pathlib
import re
import statistics
import subprocess
import tempfile
import time
from datetime import datetime, timedelta

import pandas as pd

ROUNDS = 3
SAMPLES = 31  # as in the bench
HOURS = 262_968  # 1990 to 2019


def thirty_years(path):
    """The rows of benches/weather.rs."""
    turn = 2 * math.pi
    start = datetime(1990, 1, 1)
    with open(path, "w", encoding="utf-8") as out:
        out.write("time,temperature (C),relative humidity (%),global radiation (W/m2),wind (m/s)\n")
        for hour in range(HOURS):
            day = hour / 24
            season = math.cos(turn * (day - 20) / 365.25)
            t = 9 - 8 * season + 3 * math.cos(turn * (day - 0.6)) + 4 * math.sin(day * 0.9) + 2 * math.sin(day * 0.23)
            out.write(
                f"{start + timedelta(hours=hour):%Y-%m-%d %H:%M:%S},{t:.1f},{75 + 20 * season * math.sin(day * 1.7):.0f},"
                f"{max(400 * math.cos(turn * (day - 0.5)), 0):.0f},{4 + 2 * math.sin(day * 0.7):.1f}\n"
            )


def bench(path):
    """Median and least of one run of the divan bench, ms."""
    out = subprocess.run(
        ["cargo", "bench", "--quiet", "--bench", "weather", "--", "read_and_describe_from_disk"],
        env={**os.environ, "THIRTY_YEARS": str(path)}, capture_output=True, text=True, check=True,
    ).stdout
    row = next(line for line in out.splitlines() if "read_and_describe_from_disk" in line)
    units = {"µs": 1e-3, "ms": 1.0, "s": 1e3}
    values = [float(n) * units[u] for n, u in re.findall(r"([0-9.]+) (µs|ms|s)\b", row)]
    return values[2], values[0]


def main():
    with tempfile.TemporaryDirectory() as folder:
        path = pathlib.Path(folder) / "thirty_years.csv"
        thirty_years(path)
        bench(path)  # builds
        medians, least = {"pandas": [], "winterledger": []}, {"pandas": [], "winterledger": []}
        processor = 0.0
        for _ in range(ROUNDS):
            times = []
            for _ in range(SAMPLES):
                begin, busy = time.perf_counter(), time.process_time()
                frame = pd.read_csv(path, parse_dates=["time"])
                times.append((time.perf_counter() - begin) * 1000)
                processor += (time.process_time() - busy) * 1000 / (ROUNDS * SAMPLES)
                assert len(frame) == HOURS and frame["time"].dtype.kind == "M"
            medians["pandas"].append(statistics.median(times))
            least["pandas"].append(min(times))
            ours = bench(path)
            medians["winterledger"].append(ours[0])
            least["winterledger"].append(ours[1])
        for name in medians:
            print(f"{name:13} median {statistics.median(medians[name]):6.1f} ms, least {min(least[name]):6.1f} ms")
        middle = statistics.median(medians["winterledger"]) / statistics.median(medians["pandas"])
        print(f"ratio of medians {middle:.2f}, of the least {min(least['winterledger']) / min(least['pandas']):.2f}")
        print(f"pandas {pd.__version__}: {processor:.1f} ms of processor time a reading")
        print(f"{path.stat().st_size / 1e6:.1f} MB, {HOURS} rows, {ROUNDS} rounds of {SAMPLES}, {os.cpu_count()} processors, "
              f"load {os.getloadavg()[0]:.1f}")


if __name__ == "__main__":
    main()
