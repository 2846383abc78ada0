"""Moist-air properties on a grid, made with psychrolib 2.5.0 (SI units).

    python tests/reference/air.py > tests/reference/air.csv

psychrolib states a tolerance of 0.001 °C for its iterations in SI (PSYCHROLIB_TOLERANCE).
"""

import psychrolib

psychrolib.SetUnitSystem(psychrolib.SI)
print("temperature_c,relative_humidity,pressure_pa,saturation_pa,humidity_ratio,dew_point_c,wet_bulb_c,enthalpy_kj_per_kg")
for pressure in (101325, 95000, 80000):
    for t in (-40, -30, -20, -15, -10, -7, -5, -3, -2, -1, -0.5, 0, 0.5, 1, 2, 3, 5, 7, 10, 12, 15, 20, 25, 30, 40, 50):
        for rh in (0.05, 0.2, 0.35, 0.5, 0.65, 0.75, 0.85, 0.92, 0.97, 1.0):
            w = psychrolib.GetHumRatioFromRelHum(t, rh, pressure)
            print(
                t, rh, pressure,
                repr(psychrolib.GetSatVapPres(t)),
                repr(w),
                repr(psychrolib.GetTDewPointFromRelHum(t, rh)),
                repr(psychrolib.GetTWetBulbFromRelHum(t, rh, pressure)),
                repr(psychrolib.GetMoistAirEnthalpy(t, w) / 1000),
                sep=",",
            )
