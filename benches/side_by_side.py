"""The demonstration's year as an engineer would script it, three ways, beside Winterledger; speed, memory, linearity, instructions.

    python benches/side_by_side.py [--quick]

from the repository root; needs cargo, NumPy, SciPy and CoolProp (8.0.0 was used). `--quick` takes every tenth hour of the slowest
script. Prints the table of BENCHMARKS.md: every figure is a ratio of one run of this command.

The scripts (`benches/scripted`) take the same weather and home, the terrace with larger radiators and the air-source machine, and model
far less: no storage, frost, cycling loss, draw by draw, limits, bill. Years are timed inside a running process (processor time of
the scripts, divan's fastest sample here, which other work on the machine stretches least); whole processes by the clock from start
to end, the fastest of five.
"""

import os
import re
import subprocess
import sys
import tempfile
import time
from datetime import datetime, timedelta
from pathlib import Path

ROOT = Path(__file__).resolve().parents[1]
SCRIPTS = ROOT / "benches" / "scripted"
PROGRAM = ROOT / "target" / "release" / "winterledger"


def script(name, *arguments):
    """What a script says it took: seconds of its year, and hours it went through."""
    out = subprocess.run([sys.executable, SCRIPTS / f"{name}.py", *arguments], capture_output=True, text=True, check=True).stdout
    print(f"  {name}: {out.splitlines()[0]}", file=sys.stderr)
    hours, seconds = re.search(r"^hours (\d+) seconds ([0-9.e-]+)", out, re.MULTILINE).groups()
    return float(seconds) * 8760 / int(hours)


def process(command, times=5):
    """Least seconds by the clock and most memory (MiB) of a whole process."""
    least, most = float("inf"), 0.0
    for _ in range(times):
        begin = time.perf_counter()
        child = subprocess.Popen(command, stdout=subprocess.DEVNULL, stderr=subprocess.DEVNULL)
        _, status, used = os.wait4(child.pid, 0)
        least = min(least, time.perf_counter() - begin)
        if os.waitstatus_to_exitcode(status) != 0:
            raise SystemExit(f"{command} failed")
        most = max(most, used.ru_maxrss / 1024)
    return least, most


def bench(wanted):
    """Fastest sample of each line of a divan bench, seconds, by name and argument."""
    out = subprocess.run(["cargo", "bench", "--quiet", "--bench", "year", "--", wanted], cwd=ROOT, capture_output=True, text=True, check=True).stdout
    units = {"ns": 1e-9, "µs": 1e-6, "ms": 1e-3, "s": 1.0}
    found, name = {}, ""
    for line in out.splitlines():
        row = re.match(r"[\s│├╰─]*(\w+)\s*(?:([0-9.]+) (ns|µs|ms|s)\b)?", line)
        if row and row[2]:
            found[int(row[1])] = float(row[2]) * units[row[3]]
    return found


def thirty_years(folder):
    """A brief of the demonstration under thirty years of weather: its year again and again on the calendar of 1990 to 2019."""
    rows = [line.split(",") for line in (ROOT / "weather_samples/morvane_sound.csv").read_text().splitlines() if line[0] == "2"]
    start, hours = datetime(1990, 1, 1), 262_968
    with (folder / "thirty.csv").open("w", encoding="utf-8") as out:
        out.write("time beginning (UTC),temperature (°C),relative humidity (%),global radiation (W/m²),wind speed (m/s)\n")
        for hour in range(hours):
            row = rows[hour % len(rows)]
            out.write(f"{start + timedelta(hours=hour):%Y-%m-%dT%H:%MZ}," + ",".join(row[1:]) + "\n")
    brief = (ROOT / "briefs/terrace.toml").read_text()
    brief = brief.replace("../weather_samples/morvane_sound.csv", "thirty.csv")
    for name in ("../tariffs", "machines/"):
        brief = brief.replace(f'"{name}', f'"{(ROOT / "briefs" / name).as_posix()}' + ("/" if name.endswith("/") else ""))
    # Today's system and two choices: three systems.
    parts = brief.split("[[choice]]")
    (folder / "thirty.toml").write_text("[[choice]]".join([parts[0], *parts[2:]]), encoding="utf-8")
    return folder / "thirty.toml"


def main():
    subprocess.run(["cargo", "build", "--release", "--quiet"], cwd=ROOT, check=True)
    print(f"load {os.getloadavg()[0]:.1f} of {os.cpu_count()} cores", file=sys.stderr)
    year = bench("system_year")
    hourly = script("every_hour", "876" if "--quick" in sys.argv else "8760")
    vectorised, regression = script("interpolated"), script("regression")
    second_whole, _ = process([sys.executable, str(SCRIPTS / "interpolated.py")], 3)
    plain, plain_mib = process([str(PROGRAM), "estimate", "--samples", "0"])
    sampled, _ = process([str(PROGRAM), "estimate"])
    by_hours, by_systems, by_years = bench("hours_of_air"), bench("systems"), bench("years_of_three_systems")
    with tempfile.TemporaryDirectory() as name:
        folder = Path(name)
        written, _ = process([str(PROGRAM), "estimate", "--out", str(folder / "out"), "--force"])
        thirty = [str(PROGRAM), "estimate", str(thirty_years(folder)), "--format", "json"]
        _, thirty_mib = process([*thirty, "--samples", "0"], 1)
        _, thirty_sampled_mib = process(thirty, 1)
    air = year[2]

    def row(what, figure, target, met):
        verdict = "–" if target == "–" else "yes" if met else "**no**"
        print(f"| {what} | {figure} | {target} | {verdict} |")

    print("| what | this run | target | met |\n|---|---|---|---|")
    row("air-source year with meters and bill, against CoolProp in every hour", f"{hourly / air:.0f} times as fast ({air * 1e3:.2f} ms against {hourly:.1f} s)", "5000", hourly / air >= 5000)
    row("the same, against the vectorised year of the interpolated table", f"{vectorised / air:.2f} times as fast ({vectorised * 1e3:.2f} ms)", "over 1", vectorised > air)
    row("the same, against the bare regression", f"{air / regression:.1f} times as long ({regression * 1e3:.2f} ms)", "at most 4", air <= 4 * regression)
    row("whole `estimate --samples 0` of four systems with break-evens, against the whole process of the interpolated table", f"{second_whole / plain:.0f} times as fast ({plain:.2f} s against {second_whole:.1f} s)", "20", second_whole >= 20 * plain)
    row("the same with the odds of 80 samples (`estimate`)", f"{second_whole / sampled:.1f} times as fast ({sampled:.2f} s)", "–", True)
    row("the same with `--out`: ledgers, pictures, page", f"{second_whole / written:.1f} times as fast ({written:.2f} s)", "–", True)
    row("thirty years of three systems through `estimate --samples 0`", f"{thirty_mib:.0f} MiB at most", "under 64", thirty_mib < 64)
    row("the same with the odds of 80 samples", f"{thirty_sampled_mib:.0f} MiB at most", "–", True)
    ten = by_hours[87600] / by_hours[8760] / 10
    row("ten years' hours, per hour, over one year's", f"{ten:.2f}", "0.9 to 1.1", 0.9 <= ten <= 1.1)
    # The boiler's year is far cheaper than a machine's: the sum is what three must cost.
    three = by_systems[3] / sum(year.values())
    row("three systems together over the sum of each alone", f"{three:.2f}", "0.9 to 1.1", 0.9 <= three <= 1.1)
    years = by_years[30] / by_years[1] / 30
    row("thirty years of three systems, per year, over one", f"{years:.2f}", "0.9 to 1.1", 0.9 <= years <= 1.1)
    print(f"\nmemory of plain `estimate`: {plain_mib:.0f} MiB; binary: {PROGRAM.stat().st_size / 2**20:.1f} MiB", file=sys.stderr)


if __name__ == "__main__":
    main()
