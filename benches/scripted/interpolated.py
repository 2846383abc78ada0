"""Second way: the cycle tabulated once over source, flow and speed, then interpolated over all hours at once (NumPy, SciPy).

    python interpolated.py

prints the electricity of the year, the time of the table and the processor time of the vectorised year (fastest of 51).
"""

import time

import numpy as np
from scipy.interpolate import RegularGridInterpolator

import home
from every_hour import at_speed

SOURCES, FLOWS, SHARES = np.arange(-12.0, 26.0, 2.0), np.arange(20.0, 61.0, 4.0), np.linspace(0, 1, 9)


def table():
    """Least and greatest output over source and flow; electricity over source, flow and the share of the way between."""
    least, greatest = np.empty((len(SOURCES), len(FLOWS))), np.empty((len(SOURCES), len(FLOWS)))
    power = np.empty((len(SOURCES), len(FLOWS), len(SHARES)))
    for i, source in enumerate(SOURCES):
        for j, flow in enumerate(FLOWS):
            flow = max(flow, source + 10)
            points = np.array([at_speed(source, flow, speed) for speed in np.linspace(0.25, 1.1, 9)])
            least[i, j], greatest[i, j] = points[0, 0], points[-1, 0]
            outputs = points[0, 0] + SHARES * (points[-1, 0] - points[0, 0])
            power[i, j] = np.interp(outputs, points[:, 0], points[:, 1])
    over = {"bounds_error": False, "fill_value": None}
    return (
        RegularGridInterpolator((SOURCES, FLOWS), least, **over),
        RegularGridInterpolator((SOURCES, FLOWS), greatest, **over),
        RegularGridInterpolator((SOURCES, FLOWS, SHARES), power, **over),
    )


def year(outdoor, least_of, greatest_of, power_of):
    heat, flow = home.demand(outdoor)
    at = np.column_stack([outdoor, flow])
    least, greatest = least_of(at), greatest_of(at)
    share = np.clip((heat - least) / (greatest - least), 0, 1)
    power = power_of(np.column_stack([at, share]))
    electricity = np.where(heat < least, power * heat / least, power + np.clip(heat - greatest, 0, None))
    cold = outdoor[6::24]
    hot = np.column_stack([cold, np.full_like(cold, home.WATER_FLOW_C)])
    water = home.WATER_KWH_A_DAY * power_of(np.column_stack([hot, np.ones_like(cold)])) / greatest_of(hot)
    return (electricity.sum() + water.sum()) / home.FIELD_FACTOR


def main():
    outdoor = home.outdoor()
    begin = time.process_time()
    made = table()
    table_s = time.process_time() - begin
    times = []
    for _ in range(51):
        begin = time.process_time()
        sum_kwh = year(outdoor, *made)
        times.append(time.process_time() - begin)
    home.told(sum_kwh)
    print(f"table seconds {table_s:.6f}")
    print(f"hours {len(outdoor)} seconds {min(times):.6f}")


if __name__ == "__main__":
    main()
