"""First way: low-level CoolProp in every hour, exchanger approaches iterated, speed found by a bracketing solver.

    python every_hour.py [HOURS]

prints the electricity of the year (or of so many hours spread over it) and the processor time of the hours alone.
"""

import sys
import time

import CoolProp.CoolProp as CP
import numpy as np
from scipy.optimize import brentq

import home

K = 273.15
fluid = CP.AbstractState("HEOS", home.FLUID)


def at_speed(source_c, flow_c, speed):
    """Heat and electricity, kW."""
    te, tc = source_c - 9, flow_c + 2
    for _ in range(100):
        fluid.update(CP.QT_INPUTS, 1, te + K)
        low = fluid.p()
        fluid.update(CP.PT_INPUTS, low, te + home.SUPERHEAT_K + K)
        suction, entropy, density = fluid.hmass(), fluid.smass(), fluid.rhomass()
        fluid.update(CP.QT_INPUTS, 0, tc + K)
        high = fluid.p()
        fluid.update(CP.PT_INPUTS, high, tc - home.SUBCOOLING_K + K)
        liquid = fluid.hmass()
        fluid.update(CP.PSmass_INPUTS, high, entropy)
        ratio = high / low
        work = (fluid.hmass() - suction) / home.isentropic(ratio) / 1000
        mass = density * home.volumetric(ratio) * home.SWEPT_M3_S * speed
        cold = mass * (suction - liquid) / 1000
        heat = cold + mass * work
        new_te = source_c - home.SUPERHEAT_K - home.EVAPORATOR_K_PER_KW * cold
        new_tc = flow_c + home.CONDENSER_K_PER_KW * heat
        change = abs(new_te - te) + abs(new_tc - tc)
        te, tc = new_te, new_tc
        if change < 1e-4:
            return heat, mass * work / home.DRIVE + home.FAN_KW
    raise ArithmeticError("not settled")


def electricity(source_c, flow_c, wanted_kw):
    """Electricity for a mean heat, kW: by speed between the least and the greatest, below the least in proportion."""
    least = at_speed(source_c, flow_c, 0.25)
    if wanted_kw <= least[0]:
        return least[1] * wanted_kw / least[0]
    greatest = at_speed(source_c, flow_c, 1.1)
    if wanted_kw >= greatest[0]:
        return greatest[1] + wanted_kw - greatest[0]
    speed = brentq(lambda n: at_speed(source_c, flow_c, n)[0] - wanted_kw, 0.25, 1.1, xtol=1e-4)
    return at_speed(source_c, flow_c, speed)[1]


def main(hours):
    outdoor = home.outdoor()
    outdoor = outdoor[:: len(outdoor) // hours][:hours]
    begin = time.process_time()
    heat, flow = home.demand(outdoor)
    sum_kwh = 0.0
    for hour in range(hours):
        if heat[hour] > 0:
            sum_kwh += electricity(outdoor[hour], flow[hour], heat[hour])
        if hour % 24 == 6:
            power = at_speed(outdoor[hour], home.WATER_FLOW_C, 1.1)
            sum_kwh += home.WATER_KWH_A_DAY * power[1] / power[0]
    took = time.process_time() - begin
    home.told(sum_kwh / home.FIELD_FACTOR)
    print(f"hours {hours} seconds {took:.6f}")


if __name__ == "__main__":
    main(int(sys.argv[1]) if len(sys.argv) > 1 else 8760)
