"""The worked example of the bin method (EN 14825), reckoned independently of the program.

Inputs from memory of the standard's example for a fixed-capacity machine, average climate; bin hours from EU 813/2013.
Prints annual heat and heater in kWh, SCOPon and SCOPnet, first with the cycling correction made at the points (as the
program does), then bin by bin. Plain Python 3, no packages.

    python rating.py
"""

HOURS = [1, 25, 23, 24, 27, 68, 91, 89, 165, 173, 240, 280, 320, 357, 356, 303, 330, 326, 348, 335, 315, 215, 169, 151, 105, 74]
POINTS = [(-10, 7.80, 2.60), (-7, 9.55, 3.26), (-6, 9.70, 3.30), (2, 11.17, 4.00), (7, 12.66, 4.91), (12, 14.30, 5.50)]
DESIGN_KW, CC = 11.46, 0.9


def load(t):
    return DESIGN_KW * (t - 16) / (-10 - 16)


def corrected(cop, capacity, t):
    ratio = min(1.0, load(t) / capacity)
    return cop * ratio / (CC * ratio + 1 - CC)


def line(xs, ys, x):
    for i in range(1, len(xs)):
        if x <= xs[i] or i == len(xs) - 1:
            return ys[i - 1] + (x - xs[i - 1]) / (xs[i] - xs[i - 1]) * (ys[i] - ys[i - 1])


temperatures, capacities, cops = zip(*POINTS)
at_points = [corrected(cop, capacity, t) for t, capacity, cop in POINTS]
for way in ("at the points", "bin by bin"):
    heat = heater = machine = 0.0
    for t, hours in zip(range(-10, 16), HOURS):
        capacity = line(temperatures, capacities, t)
        if way == "at the points":
            cop = line(temperatures, at_points, t)
        else:
            cop = corrected(line(temperatures, cops, t), capacity, t)
        missing = max(0.0, load(t) - capacity)
        heat += hours * load(t)
        heater += hours * missing
        machine += hours * (load(t) - missing) / cop
    print(f"{way}: {heat:.0f} {heater:.1f} {heat / (machine + heater):.3f} {(heat - heater) / machine:.3f}")
