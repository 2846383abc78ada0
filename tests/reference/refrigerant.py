"""Reference values for tests/refrigerant_reference.rs and tests/cycle_reference.rs.

Made with the PyPI package CoolProp 8.0.0 (an independent implementation of the same published
equations of state). Reference state IIR: 200 kJ/kg and 1 kJ/kgK for saturated liquid at 0 degC.

Run:  python tests/reference/refrigerant.py      (from the repository root)

Writes refrigerant_saturation.csv, refrigerant_superheated.csv, refrigerant_subcooled.csv and
refrigerant_cycles.csv beside this file. Random conditions come from a fixed seed.
"""

import csv
import random
from pathlib import Path

import CoolProp.CoolProp as CP

assert CP.get_global_param_string("version").startswith("8.0"), "made with CoolProp 8.0.0"

HERE = Path("tests/reference")
FLUIDS = ["R290", "R32", "R410A", "R134a", "R1234yf", "R600a"]
K = 273.15


def state(fluid):
    return CP.AbstractState("HEOS", fluid)


def offsets(fluid):
    """What brings CoolProp's own zero to the IIR reference state."""
    s = state(fluid)
    s.update(CP.QT_INPUTS, 0.0, K)
    return 200e3 - s.hmass(), 1e3 - s.smass()


def row(s, offset):
    """temperature_c, pressure_kpa, enthalpy_kj_per_kg, entropy_kj_per_kg_k, density_kg_per_m3"""
    return [
        s.T() - K,
        s.p() / 1e3,
        (s.hmass() + offset[0]) / 1e3,
        (s.smass() + offset[1]) / 1e3,
        s.rhomass(),
    ]


STATE = ["temperature_c", "pressure_kpa", "enthalpy_kj_per_kg", "entropy_kj_per_kg_k", "density_kg_per_m3"]


def write(name, header, rows):
    with open(HERE / name, "w", newline="") as file:
        writer = csv.writer(file, lineterminator="\n")
        writer.writerow(header)
        for line in rows:
            writer.writerow([x if isinstance(x, str) else f"{x:.10g}" for x in line])
    print(name, len(rows), "rows")


saturation, superheated, subcooled, cycles = [], [], [], []
for fluid in FLUIDS:
    s, offset = state(fluid), offsets(fluid)
    critical_c = s.T_critical() - K
    # saturation: every 5 K from -70 degC, then closer and closer to the critical point
    temperatures = [t for t in range(-70, 200, 5) if t < critical_c - 5]
    temperatures += [critical_c - d for d in (5.0, 3.0, 2.0, 1.0)]
    # where a solver without a guess was seen to leave the line of saturation (R290, R1234yf)
    window = [80.13 + 0.005 * i for i in range(20) if critical_c > 90]
    for t in temperatures + window:
        phases = []
        for quality in (0.0, 1.0):
            s.update(CP.QT_INPUTS, quality, t + K)
            phases.append(row(s, offset))
        liquid, vapour = phases
        saturation.append([fluid, t, liquid[1], vapour[1], *liquid[2:], *vapour[2:]])
    # vapour, superheated by up to 100 K, and liquid, subcooled by up to 40 K, on the same isobars
    for t in temperatures[2::2]:
        if t > critical_c - 3:
            continue
        s.update(CP.QT_INPUTS, 1.0, t + K)
        pressure = s.p()
        for superheat in (0.5, 5.0, 20.0, 60.0, 100.0):
            s.update(CP.PT_INPUTS, pressure, t + superheat + K)
            superheated.append([fluid, *row(s, offset)])
        s.update(CP.QT_INPUTS, 0.0, t + K)
        pressure = s.p()
        for subcooling in (0.5, 5.0, 15.0, 40.0):
            if t - subcooling < -70:
                continue
            s.update(CP.PT_INPUTS, pressure, t - subcooling + K)
            subcooled.append([fluid, *row(s, offset)])

    # cycles at random conditions inside the range of a heating machine
    draw = random.Random(f"winterledger {fluid}")
    highest = min(critical_c - 8, 80)
    done = 0
    while done < 200:
        te = draw.uniform(-40, 25)
        tc = draw.uniform(max(15, te + 10), highest)
        superheat, subcooling = draw.uniform(0.5, 15), draw.uniform(0.5, min(12, tc - te))
        efficiency = draw.uniform(0.45, 0.85)
        s.update(CP.QT_INPUTS, 1.0, te + K)
        low = s.p()
        s.update(CP.QT_INPUTS, 0.0, tc + K)
        high = s.p()
        s.update(CP.PT_INPUTS, low, te + superheat + K)
        h1, s1, rho1 = s.hmass(), s.smass(), s.rhomass()
        s.update(CP.PSmass_INPUTS, high, s1)
        h2s = s.hmass()
        h2 = h1 + (h2s - h1) / efficiency
        s.update(CP.HmassP_INPUTS, h2, high)
        t2 = s.T() - K
        if t2 > 200:  # no compressor reaches this; the least efficient corners of the draw do
            continue
        s.update(CP.PT_INPUTS, high, tc - subcooling + K)
        h3 = s.hmass()
        cycles.append(
            [fluid, te, tc, superheat, subcooling, efficiency, low / 1e3, high / 1e3, rho1]
            + [(h1 + offset[0]) / 1e3, (h2s - h1) / 1e3, (h2 - h1) / 1e3, (h1 - h3) / 1e3, (h2 - h3) / 1e3]
            + [t2, (h2 - h3) / (h2 - h1)]
        )
        done += 1

write(
    "refrigerant_saturation.csv",
    ["refrigerant", "temperature_c", "bubble_kpa", "dew_kpa"]
    + [f"{phase}_{name}" for phase in ("liquid", "vapour") for name in STATE[2:]],
    saturation,
)
write("refrigerant_superheated.csv", ["refrigerant", *STATE], superheated)
write("refrigerant_subcooled.csv", ["refrigerant", *STATE], subcooled)
write(
    "refrigerant_cycles.csv",
    ["refrigerant", "evaporating_c", "condensing_c", "superheat_k", "subcooling_k", "isentropic_efficiency"]
    + ["evaporating_kpa", "condensing_kpa", "suction_kg_per_m3", "suction_kj_per_kg"]
    + ["isentropic_work_kj_per_kg", "work_kj_per_kg", "evaporator_kj_per_kg", "condenser_kj_per_kg"]
    + ["discharge_c", "cop_heating"],
    cycles,
)
