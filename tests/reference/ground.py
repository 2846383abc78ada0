"""Reference values for the ground: step responses, wall temperatures of an hourly load, borehole resistance, brine, cylinder source.

Versions used: Python 3.11, pygfunction 2.3.1, SecondaryCoolantProps 1.5, CoolProp 8.0.0, numpy 2.4.6, scipy 1.17.1.
Run from the top of the repository: python tests/reference/ground.py
"""

import csv
from pathlib import Path

import numpy as np
import pygfunction as gt
from CoolProp.CoolProp import PropsSI
from scipy.integrate import quad
from scipy.interpolate import CubicSpline
from scipy.signal import fftconvolve
from scipy.special import jv, yv

HERE = Path(__file__).parent
YEAR = 8760.0 * 3600.0


def write(name, header, rows):
    with open(HERE / name, "w", newline="") as file:
        writer = csv.writer(file, lineterminator="\n")
        writer.writerow(header)
        writer.writerows(rows)


# Fields of bores: (H, D, r, x, y) each.
FIELDS = {
    "one": [(100.0, 4.0, 0.075, 0.0, 0.0)],
    "two": [(80.0, 1.0, 0.065, 0.0, 0.0), (80.0, 1.0, 0.065, 6.0, 0.0)],
    "four": [(100.0, 1.0, 0.065, 6.0 * i, 6.0 * j) for i in (0, 1) for j in (0, 1)],
    "unequal": [(120.0, 1.0, 0.065, 0.0, 0.0), (70.0, 3.0, 0.065, 5.0, 0.0), (95.0, 2.0, 0.075, 2.0, 7.0)],
}


def boreholes(field):
    return [gt.boreholes.Borehole(*bore) for bore in FIELDS[field]]


def responses():
    """g-functions at uniform heat extraction rate, and beside them at uniform wall temperature."""
    alpha = 1e-6
    years = np.array([1 / 8760, 12 / 8760, 1 / 12, 1.0, 5.0, 10.0, 25.0, 50.0])
    rows = []
    for field in FIELDS:
        holes = boreholes(field)
        kinds = {}
        for condition in ("UHTR", "UBWT"):
            # One segment a bore makes the mean over the line; more segments are needed for a uniform wall temperature.
            options = {"nSegments": 1 if condition == "UHTR" else 24, "disp": False}
            if condition == "UHTR":
                options["segment_ratios"] = None
            g = gt.gfunction.gFunction(
                holes, alpha, time=years * YEAR, method="similarities", boundary_condition=condition, options=options
            )
            kinds[condition] = g.gFunc
        for year, same_rate, same_wall in zip(years, kinds["UHTR"], kinds["UBWT"]):
            rows.append((field, repr(float(year)), repr(float(same_rate)), repr(float(same_wall))))
    write("ground_g_functions.csv", ["field", "years", "same_rate", "same_wall"], rows)


def load_kw(hour):
    """An invented hourly draw: winter, days, a cold spell, hot water every twelve hours, rest in summer."""
    season = np.cos(2 * np.pi * (hour % 8760 - 500) / 8760)
    day = 1.0 + 0.3 * np.cos(2 * np.pi * (hour % 24 - 5) / 24)
    spell = np.where((hour % 8760 > 1000) & (hour % 8760 < 1120), 2.5, 0.0)
    water = np.where(hour % 12 == 6, 3.0, 0.0)
    return np.round(np.maximum(0.0, 2.2 * season + 0.6) * day + spell + water, 3)


def walls():
    """Fall of the mean wall for ten years of an hourly load: exact convolution with pygfunction's response."""
    k, alpha = 2.0, 0.9e-6
    hours = 10 * 8760
    draw = load_kw(np.arange(hours))
    rows = []
    for field in ("one", "four"):
        holes = boreholes(field)
        length = sum(bore[0] for bore in FIELDS[field])
        # The response at every hour: pygfunction on 120 points a decade, then a cubic through the logarithm of time.
        points = np.unique(np.concatenate([np.arange(1, 101), np.round(np.geomspace(100, hours, 500))]))
        g = gt.gfunction.gFunction(
            holes, alpha, time=points * 3600.0, method="similarities", boundary_condition="UHTR",
            options={"nSegments": 1, "segment_ratios": None, "disp": False},
        ).gFunc
        response = CubicSpline(np.log(points), g)(np.log(np.arange(1, hours + 1)))
        pulse = np.diff(response, prepend=0.0)
        fall = fftconvolve(draw, pulse)[:hours] * 1000.0 / length / (2 * np.pi * k)
        chosen = list(range(0, 48)) + list(range(990, 1130, 7)) + list(range(8700, hours, 397)) + list(range(hours - 24, hours))
        rows += [(field, hour, repr(float(fall[hour]))) for hour in chosen]
        rows.append((field, "mean_year_1", repr(float(fall[:8760].mean()))))
        rows.append((field, "mean_year_10", repr(float(fall[-8760:].mean()))))
    write("ground_walls.csv", ["field", "hour", "fall_k"], rows)
    write("ground_load.csv", ["hour", "kw"], [(h, repr(float(load_kw(np.array(h))))) for h in range(8760)])


def resistances():
    """Borehole resistance of a single U-tube: pygfunction's multipoles, first order and tenth."""
    rows = []
    for r_b, r_o, spacing, k_s, k_g, r_fp in [
        (0.065, 0.020, 0.0567, 2.0, 1.5, 0.09),
        (0.065, 0.020, 0.085, 2.0, 1.5, 0.09),
        (0.055, 0.016, 0.045, 3.0, 0.9, 0.12),
        (0.075, 0.020, 0.06, 1.2, 2.0, 0.07),
        (0.065, 0.020, 0.042, 2.0, 1.0, 0.25),
    ]:
        pos = [(-spacing / 2, 0.0), (spacing / 2, 0.0)]
        out = []
        for order in (1, 10):
            R, _ = gt.pipes.thermal_resistances(pos, r_o, r_b, k_s, k_g, r_fp, J=order)
            out += [(R[0, 0] + R[0, 1]) / 2, 2 * (R[0, 0] - R[0, 1])]
        rows.append([r_b, r_o, spacing, k_s, k_g, r_fp] + [repr(float(v)) for v in out])
    write(
        "ground_resistances.csv",
        ["bore_radius_m", "pipe_radius_m", "spacing_m", "ground_k", "grout_k", "fluid_to_pipe", "rb_1", "ra_1", "rb_10", "ra_10"],
        rows,
    )


def double_tubes():
    """Two U-tubes in a bore, their legs opposite each other: pygfunction's MultipleUTube, its multipoles of several orders.

    Rb: all legs alike. Ra: legs that go down against legs that go up, for the heat of the bore, which is half of T_down - T_up for each
    pipe of a unit heat: the eigenvalue R11 - R13 of the matrix of a square of pipes.
    """
    rows = []
    for r_b, r_o, spacing, k_s, k_g, r_fp in [
        (0.065, 0.016, 0.0653, 2.3, 1.5, 0.27),
        (0.065, 0.016, 0.0653, 2.0, 1.5, 0.09),
        (0.075, 0.016, 0.090, 2.0, 1.5, 0.09),
        (0.0765, 0.020, 0.080, 3.4, 0.9, 0.12),
        (0.065, 0.016, 0.050, 1.2, 2.0, 0.07),
        (0.075, 0.020, 0.060, 2.3, 1.0, 0.25),
    ]:
        c = spacing / 2
        # Legs in first, then legs out: those of a U-tube are the first and third, second and fourth.
        pos = [(-c, 0.0), (0.0, -c), (c, 0.0), (0.0, c)]
        out = []
        for order in (0, 1, 10):
            bore = gt.boreholes.Borehole(100.0, 1.0, r_b, 0.0, 0.0)
            tube = gt.pipes.MultipleUTube(pos, r_o - 0.003, r_o, bore, k_s, k_g, r_fp, 2, config="parallel", J=order)
            R = tube.local_borehole_thermal_resistance(), tube._Rd
            full, _ = gt.pipes.thermal_resistances(pos, r_o, r_b, k_s, k_g, r_fp, J=order)
            # All legs alike: the local resistance that the library itself gives.
            assert abs(R[0] - (full[0, 0] + 2 * full[0, 1] + full[0, 2]) / 4) < 1e-9
            out += [R[0], full[0, 0] - full[0, 2]]
        rows.append([r_b, r_o, spacing, k_s, k_g, r_fp] + [repr(float(v)) for v in out])
    write(
        "ground_double_tubes.csv",
        ["bore_radius_m", "pipe_radius_m", "spacing_m", "ground_k", "grout_k", "fluid_to_pipe", "rb_0", "ra_0", "rb_1", "ra_1", "rb_10", "ra_10"],
        rows,
    )


def pipes():
    """Friction, film and pipe resistance of brine in a pipe."""
    rows = []
    r_in, r_out, k_p, rough = 0.0163, 0.020, 0.42, 1.5e-6
    for flow in (0.05, 0.12, 0.2, 0.3, 0.45, 0.8):
        rho, cp, mu, k = 1043.0, 3700.0, 0.0045, 0.45
        h = gt.pipes.convective_heat_transfer_coefficient_circular_pipe(flow, r_in, mu, rho, k, cp, rough)
        f = gt.pipes.fluid_friction_factor_circular_pipe(flow, r_in, mu, rho, rough)
        velocity = flow / (rho * np.pi * r_in**2)
        resistance = gt.pipes.conduction_thermal_resistance_circular_pipe(r_in, r_out, k_p) + 1 / (2 * np.pi * r_in * h)
        rows.append([flow, repr(float(f * rho * velocity**2 / (4 * r_in))), repr(float(resistance))])
    write("ground_pipes.csv", ["kg_per_s", "pascal_per_m", "resistance_m_k_per_w"], rows)


def brines():
    """Two sets of data: Melinder's polynomials (MEG, MPG) and those of another collection (MEG2, MPG2), both in CoolProp."""
    rows = []
    for fluid, name in (("ethylene glycol", "MEG"), ("propylene glycol", "MPG")):
        for share in (0.15, 0.25, 0.35, 0.45):
            for kind in (name + "2", name):
                code = f"INCOMP::{kind}[{share}]"
                freezing = PropsSI("T_FREEZE", "T", 283.15, "P", 2e5, code) - 273.15
                for celsius in (-5.0, 0.0, 10.0, 20.0):
                    if celsius < freezing:
                        continue
                    at = [PropsSI(p, "T", celsius + 273.15, "P", 2e5, code) for p in ("D", "C", "V", "L")]
                    rows.append([fluid, share, kind, celsius, repr(freezing)] + [repr(float(v)) for v in at])
    write("ground_brines.csv", ["fluid", "share", "set", "c", "freezing_c", "density", "heat_capacity", "viscosity", "conductivity"], rows)


def cylinder():
    """Wall of a cylinder of constant flux (Carslaw and Jaeger 1959 §13.5), in units of q'/(2 pi k)."""
    def wall(fo):
        def f(u):
            above = jv(1, u) * yv(0, u) - yv(1, u) * jv(0, u)
            return (1 - np.exp(-u * u * fo)) * above / (u * u * (jv(1, u) ** 2 + yv(1, u) ** 2))
        edges = [1e-9, 1e-3, 0.1, 1, 10, 100, 2000]
        return 2 / np.pi * sum(quad(f, a, b, limit=400)[0] for a, b in zip(edges, edges[1:]))

    at = [0.02, 0.05, 0.1, 0.15, 0.2, 0.22, 0.24, 0.26, 0.28, 0.3, 0.35, 0.4, 0.5, 0.7, 1, 2, 3, 5, 10, 50]
    write("ground_cylinder.csv", ["fourier", "wall"], [(fo, repr(float(wall(fo)))) for fo in at])


responses()
walls()
resistances()
double_tubes()
pipes()
brines()
cylinder()
