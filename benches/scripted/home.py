"""The home, the weather and the machine that the three scripts share: the demonstration's terrace with the larger radiators.

A script of this kind reckons a steady home: loss from the set point less gains, no storage, radiators by EN 442, and four
kilowatt-hours and a bit of hot water a day at one temperature. No frost, no cycling loss, no bill: an engineer's afternoon.
"""

from pathlib import Path

import numpy as np

ROOT = Path(__file__).resolve().parents[2]
LOSS_KW_PER_K, SET_POINT_C, GAINS_KW = 0.212, 20.0, 0.384
LOAD_KW = LOSS_KW_PER_K * (20 + 3)
FLOW_C, SPREAD_K = 42.0, 5.0
WATER_KWH_A_DAY, WATER_FLOW_C = 4.19, 52.5
PRICE, FIELD_FACTOR = 0.253, 0.85

# R290, 7 kW at 7/35: fixed exchangers and one efficiency curve.
FLUID = "R290"
SWEPT_M3_S = 7.6 / 3600
SUPERHEAT_K, SUBCOOLING_K = 5.0, 5.0
EVAPORATOR_K_PER_KW, CONDENSER_K_PER_KW = 0.8, 0.32
DRIVE, FAN_KW = 0.96, 0.05


def isentropic(ratio):
    return 0.68 / (1 + 0.35 * np.log(ratio / 2.5) ** 2)


def volumetric(ratio):
    return 1.026 - 0.0202 * ratio


def outdoor():
    """Outdoor temperature of every hour, °C."""
    path = ROOT / "weather_samples" / "morvane_sound.csv"
    with path.open(encoding="utf-8") as lines:
        return np.loadtxt((line for line in lines if line[0] == "2"), delimiter=",", usecols=1)


def demand(outdoor_c):
    """Heat to the rooms, kW, and the flow temperature that carries it, °C."""
    heat = np.clip(LOSS_KW_PER_K * (SET_POINT_C - outdoor_c) - GAINS_KW, 0, None)
    share = heat / LOAD_KW
    excess = (FLOW_C - SPREAD_K / 2 - SET_POINT_C) * share ** (1 / 1.3)
    return heat, SET_POINT_C + excess + SPREAD_K * share / 2


def told(electricity):
    print(f"{electricity:.0f} kWh, {electricity * PRICE:.0f} GBP")
