"""Thirty years of hourly rows: pandas reading the file and parsing its dates, beside `winterledger weather` as a whole.

    cargo build --release
    python benches/weather_side_by_side.py target/release/winterledger

pandas is timed inside a running interpreter, its import not counted. Winterledger is timed as a process from start to end:
reading, checking, repairing, describing and printing. The two take turns, so that both meet the same machine. Needs pandas.
"""

import math
import pathlib
import statistics
import subprocess
import sys
import tempfile
import time
from datetime import datetime, timedelta

import pandas as pd

ROUNDS = 31
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


def timed(what):
    begin = time.perf_counter()
    what()
    return (time.perf_counter() - begin) * 1000


def main():
    binary = sys.argv[1] if len(sys.argv) > 1 else "target/release/winterledger"
    with tempfile.TemporaryDirectory() as folder:
        path = pathlib.Path(folder) / "thirty_years.csv"
        thirty_years(path)

        def library():
            frame = pd.read_csv(path, parse_dates=["time"])
            assert len(frame) == HOURS and frame["time"].dtype.kind == "M"

        def ours():
            done = subprocess.run(
                [binary, "weather", str(path), "--time-zone", "UTC", "--format", "json"], capture_output=True, check=True
            )
            assert f'"hours": {HOURS}'.encode() in done.stdout

        library(), ours()
        theirs_ms, ours_ms = [], []
        for _ in range(ROUNDS):
            theirs_ms.append(timed(library))
            ours_ms.append(timed(ours))
        for name, values in (("pandas " + pd.__version__, theirs_ms), ("winterledger", ours_ms)):
            print(f"{name:15} median {statistics.median(values):6.1f} ms, least {min(values):6.1f} ms")
        print(f"ratio of medians {statistics.median(ours_ms) / statistics.median(theirs_ms):.2f}, "
              f"of the least {min(ours_ms) / min(theirs_ms):.2f} ({path.stat().st_size / 1e6:.1f} MB, {ROUNDS} rounds)")


if __name__ == "__main__":
    main()
