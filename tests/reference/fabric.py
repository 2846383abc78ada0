"""One heat capacity behind one heat-loss coefficient, through a random year, by scipy's integrator.

    python tests/reference/fabric.py > tests/reference/fabric.csv

Made with scipy 1.17.1 and numpy 2.4.6. C dT/dt = Q + G - H (T - To) with inputs that hold for an hour, integrated hour by hour
with DOP853 at a relative and absolute tolerance of 1e-11. H = 187 W/K, C = 5.3 kWh/K, 18 degrees at the beginning.
"""

import numpy as np
from scipy.integrate import solve_ivp

H_KW_PER_K = 0.187
C_KWH_PER_K = 5.3
random = np.random.default_rng(20230101)
hours = np.arange(8760)
outdoor = np.round(9 - 8 * np.cos(2 * np.pi * (hours - 500) / 8760) + random.normal(0, 3, 8760), 1)
gains = np.round(0.3 + random.exponential(0.4, 8760) * (random.random(8760) < 0.4), 2)
heat = np.round(np.maximum(0, H_KW_PER_K * (20 - outdoor) - 0.4) * random.uniform(0, 2, 8760), 2)

print("outdoor_c,gains_kw,heat_kw,room_c")
room = 18.0
for to, g, q in zip(outdoor, gains, heat):
    solved = solve_ivp(
        lambda t, y: (q + g - H_KW_PER_K * (y - to)) / C_KWH_PER_K,
        (0, 1), [room], method="DOP853", rtol=1e-11, atol=1e-11,
    )
    room = solved.y[0, -1]
    print(f"{to},{g},{q},{room:.8f}")
