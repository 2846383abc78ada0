"""Break-even SPF at the published household cap of April to June 2026 (24.67 p/kWh and 57.21 p/day of electricity,
5.74 p/kWh and 29.09 p/day of gas), found by making two yearly bills equal, for tests/study.rs.

Made with Python 3.11 and scipy:
    python tests/reference/study_break_even_spf.py > tests/reference/study_break_even_spf.csv
"""

from scipy.optimize import brentq

ELECTRICITY, GAS = 0.2467, 0.0574
ELECTRICITY_DAY, GAS_DAY = 0.5721, 0.2909
# Pump and fan of a boiler: 175 kWh in a home that takes 11 500 kWh of gas at 85 %.
BOILER_ELECTRICITY = 175.0 / (11_500 * 0.85)

print("gas_kwh,efficiency,boiler_electricity_kwh,unit_rates,whole_bill")
for gas in (8_000, 12_000, 18_000):
    for efficiency in (0.85, 0.90):
        heat = gas * efficiency
        own = heat * BOILER_ELECTRICITY

        def boiler(standing, pump):
            return gas * GAS + standing * 365 * GAS_DAY + pump * own * ELECTRICITY + 365 * ELECTRICITY_DAY

        def heat_pump(spf):
            return heat / spf * ELECTRICITY + 365 * ELECTRICITY_DAY

        unit = brentq(lambda spf: heat_pump(spf) - boiler(0, 0), 0.5, 20, xtol=1e-12)
        whole = brentq(lambda spf: heat_pump(spf) - boiler(1, 1), 0.5, 20, xtol=1e-12)
        print(f"{gas},{efficiency},{own!r},{unit!r},{whole!r}")
