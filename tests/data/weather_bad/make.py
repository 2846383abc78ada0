#!/usr/bin/env python3
"""Makes the faulty weather files of this folder, one fault each; the message expected of each stands in NAME.txt.

    python3 tests/data/weather_bad/make.py

Standard library only; the files come out the same every time.
"""

import gzip
import math
import pathlib
import random
from datetime import datetime, timedelta

HERE = pathlib.Path(__file__).parent
HEADING = "time beginning,temperature (°C)"


def times(n=48, start=datetime(2023, 1, 1), step=timedelta(hours=1)):
    return [start + i * step for i in range(n)]


def warmth(t):
    return 5 + 3 * math.cos((t.hour + t.minute / 60 - 14) / 24 * 2 * math.pi) + 0.07 * t.day


def rows(stamps=None, form="%Y-%m-%dT%H:%MZ"):
    return [f"{t.strftime(form)},{warmth(t):.1f}" for t in (stamps or times())]


def put(name, lines, encoding="utf-8"):
    text = lines if isinstance(lines, str) else "\n".join(lines) + "\n"
    (HERE / name).write_bytes(text.encode(encoding))


def with_line(number, text, heading=HEADING):
    """A good file whose line `number` (the heading is line 1) is replaced."""
    lines = [heading] + rows()
    lines[number - 1] = text
    return lines


def main():
    good = [HEADING] + rows()
    # Not a table of readings.
    put("empty.csv", "")
    put("blank_lines.csv", "\n\r\n\n")
    put("remarks_only.csv", "# nothing here\n# nor here\n")
    put("heading_only.csv", HEADING + "\n")
    (HERE / "binary.dat").write_bytes(b"\x89PNG\r\n\x1a\n\x00\x00\x00\rIHDR" + bytes(range(64)))
    (HERE / "spreadsheet.xlsx").write_bytes(b"PK\x03\x04\x14\x00\x06\x00" + bytes(40))
    put("web_page.csv", "<!DOCTYPE html>\n<html>\n<head><title>Not found</title></head>\n<body>404</body>\n</html>\n")
    # Bytes.
    put("utf16_without_mark.csv", "\n".join(good), "utf-16-le")
    put("not_utf8.csv", good, "latin-1")
    put("zero_byte.csv", with_line(8, "2023-01-01T06:00Z,5.\x000"))
    (HERE / "broken.csv.gz").write_bytes(gzip.compress("\n".join(good).encode(), mtime=0)[:200])
    (HERE / "bomb.csv.gz").write_bytes(gzip.compress(b"0" * (129 * 1024 * 1024), 9, mtime=0))
    # Layout.
    put("mixed_delimiters.csv", good[:40] + [line.replace(",", ";") for line in good[40:]])
    put("no_delimiter.csv", ["temperature"] + [f"{warmth(t):.1f}" for t in times()])
    put("no_headings.csv", [line + ",x" for line in rows()])
    put("no_time_heading.csv", ["moment of reading;" + HEADING.split(",")[1]] + [r.replace(",", ";") for r in rows()])
    put("no_temperature_heading.csv", ["time,warmth"] + rows())
    put("two_temperatures.csv", ["time,air temperature (C),outside temperature (C)"] + [r + ",5.0" for r in rows()])
    put("short_row.csv", with_line(20, "2023-01-01T18:00Z"))
    put("decimal_comma.csv", [HEADING] + [r.replace(".", ",") for r in rows()])
    put("long_line.csv", with_line(12, "2023-01-01T10:00Z," + "7" * 200_000))
    put("open_quote.csv", with_line(15, '"2023-01-01T13:00Z,7.9'))
    put("heading_repeated.csv", good[:25] + [HEADING] + good[25:])
    # Times.
    put("unreadable_time.csv", with_line(31, "yesterday noon,6.1"))
    put("no_such_day.csv", with_line(26, "2023-02-30T00:00Z,3.0"))
    put("no_times_at_all.csv", [HEADING] + [f"reading {i},{warmth(t):.1f}" for i, t in enumerate(times())])
    stamps = times(24, datetime(2023, 1, 30)) + times(24, datetime(2023, 1, 31))
    mixed = rows(stamps[:24], "%d/%m/%Y %H:%M") + rows(stamps[24:], "%m/%d/%Y %H:%M")
    put("two_date_orders.csv", [HEADING] + mixed)
    put("order_undecided.csv", [HEADING] + rows(times(24, datetime(2023, 4, 3)), "%d/%m/%Y %H:%M"))
    put("stamps_centuries_apart.csv", with_line(49, "2151-01-02T23:00Z,4.0"))
    put("twelve_hourly.csv", [HEADING] + rows(times(48, step=timedelta(hours=12))))
    put("three_hourly.csv", [HEADING] + rows(times(24, step=timedelta(hours=3))))
    put("ten_minutely.csv", [HEADING] + rows(times(6 * 30, step=timedelta(minutes=10))))
    put("off_the_hour.csv", [HEADING] + rows([t + timedelta(minutes=53) for t in times()]))
    put("one_row.csv", good[:2])
    shuffled = rows(times(48, datetime(2022, 12, 31)))
    random.Random(7).shuffle(shuffled)
    put("two_years_shuffled.csv", [HEADING] + shuffled)
    put("out_of_order.csv", good[:10] + good[20:25] + good[10:20] + good[25:])
    spring = [r for r in rows(times(48, datetime(2023, 3, 25)), "%Y-%m-%d %H:%M") if " 02:00" not in r or "-25" in r]
    put("clock_forward.csv", [HEADING] + spring)
    autumn = rows(times(48, datetime(2023, 10, 28)), "%Y-%m-%d %H:%M")
    put("clock_back.csv", [HEADING] + autumn[:26] + ["2023-10-29 01:00,4.0"] + autumn[26:])
    put("no_time_zone.csv", ["time,temperature (°C)"] + rows(form="%Y-%m-%d %H:%M"))
    put("twenty_four.csv", ["time,temperature (°C)"] + [
        f"2023-01-01 {h:02}:00,{warmth(datetime(2023, 1, 1, h % 24)):.1f}" for h in range(1, 25)
    ])
    # Readings.
    put("all_missing.csv", [HEADING] + [r.split(",")[0] + "," for r in rows()])
    put("nan.csv", with_line(17, "2023-01-01T15:00Z,NaN"))
    put("infinity.csv", with_line(17, "2023-01-01T15:00Z,inf"))
    put("huge.csv", with_line(17, "2023-01-01T15:00Z,1e308"))
    put("word.csv", with_line(17, "2023-01-01T15:00Z,warm"))
    put("minus_9999.csv", with_line(17, "2023-01-01T15:00Z,-9999"))
    put("out_of_bounds.csv", with_line(17, "2023-01-01T15:00Z,61.0"))
    put("spike.csv", with_line(17, "2023-01-01T15:00Z,25.0"))
    put("stuck.csv", good[:10] + [r.split(",")[0] + ",4.2" for r in good[10:40]] + good[40:])
    put("fahrenheit_called_celsius.csv", [HEADING] + [
        f"{t.strftime('%Y-%m-%dT%H:%MZ')},{warmth(t) * 9 + 32:.1f}" for t in times()
    ])
    put("fahrenheit_unstated.csv", ["time beginning,temperature"] + [
        f"{t.strftime('%Y-%m-%dT%H:%MZ')},{warmth(t) * 1.8 + 50:.1f}" for t in times()
    ])
    put("kelvin_unstated.csv", ["time beginning,temperature"] + [
        f"{t.strftime('%Y-%m-%dT%H:%MZ')},{warmth(t) + 273.15:.2f}" for t in times()
    ])
    put("tenths_unstated.csv", ["time beginning,temperature"] + [
        f"{t.strftime('%Y-%m-%dT%H:%MZ')},{warmth(t) * 10 + 100:.0f}" for t in times()
    ])
    # Holes and doubles.
    put("gap_of_2_hours.csv", good[:12] + good[14:])
    put("gap_of_10_hours.csv", good[:12] + good[22:])
    put("gap_of_30_hours.csv", [HEADING] + rows(times(24)) + rows(times(24, datetime(2023, 1, 3, 6))))
    put("doubled_row.csv", good[:12] + [good[11]] + good[12:])
    put("doubled_hour_differs.csv", good[:12] + ["2023-01-01T10:00Z,1.0"] + good[12:])
    put("humidity_missing.csv", [HEADING + ",relative humidity (%)"] + [
        r + ("," if i % 3 else ",80") for i, r in enumerate(rows())
    ])


if __name__ == "__main__":
    main()
