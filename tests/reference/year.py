"""The year of three homes once more, in another language and with another property library.

Made from the documentation and its sources (EN 442, ISO 13790, Kusuda and Achenbach, the tapping profile M of Regulation (EU) No
811/2013, the frost, cycling and combustion formulas quoted in the doc comments), the conventions of DEVELOPERS.md, and the doc
comments and constants of `src` as `cargo doc --document-private-items` shows them.

What is shared with the program, and nothing else:
- the inputs: briefs in `year/`, machine sheets, tariffs, weather;
- what `winterledger machine SHEET --format json` prints as fitted: the sixteen physical parameters, and the error of the
  physics at each tested point, from which the correction field is made anew here. The fit itself is not repeated.
Everything else is done again: machine, cycle and exchangers are solved in every hour, to 1e-7 K, without a map, on CoolProp's
properties (splines through them that the run holds to 1e-6 of CoolProp itself); frost, cycling, source, emitters, fabric, store, boiler, hybrid rule, clock and bill are written here. Moist air is
psychrolib's.

    python year.py PROGRAM        # prints the differences; writes year.csv and year_hours.csv beside this file

Written with CoolProp 8.0.0, psychrolib 2.5.0, NumPy 2, pandas 3, Python 3.11. About two minutes.
"""

import json
import math
import multiprocessing
import subprocess
import sys
import tomllib
from decimal import ROUND_HALF_UP, Decimal
from pathlib import Path

import CoolProp.CoolProp as CP
import numpy as np
import pandas as pd
import psychrolib
from scipy.interpolate import CubicSpline

HERE = Path(__file__).parent
K = 273.15
SEA_LEVEL_PA = 101325.0
WATER_KWH_PER_L_K = 4.186 / 3600
psychrolib.SetUnitSystem(psychrolib.SI)


def number(text):
    return float(str(text).split()[0])


# --- the machine ---------------------------------------------------------------------------------------------------------


class Cubic:
    """A cubic spline over even nodes that answers one number quickly."""

    def __init__(self, at, values):
        self.low, self.step = at[0], at[1] - at[0]
        self.pieces = [tuple(map(float, piece)) for piece in CubicSpline(at, values).c.T]

    def __call__(self, at):
        i = min(max(int((at - self.low) / self.step), 0), len(self.pieces) - 1)
        a, b, c, d = self.pieces[i]
        x = at - self.low - i * self.step
        return ((a * x + b) * x + c) * x + d


class Machine:
    """Cycle, compressor and exchangers solved together, and the correction that the tested points ask for."""

    def __init__(self, program, sheet_path):
        told = json.loads(subprocess.run([program, "machine", sheet_path, "--format", "json"], capture_output=True, check=True).stdout)
        sheet = tomllib.loads(Path(sheet_path).read_text())
        head = sheet["machine"]
        self.parameters = {entry["name"]: entry["value"] for entry in told["parameters"]}
        self.fluid = CP.AbstractState("HEOS", told["refrigerant"])
        self.air = head["source"] == "air"
        self.fixed = head["speed"] == "fixed"
        assumed = {entry["name"]: entry["value"] for entry in told["assumptions"]}
        self.superheat = number(head.get("superheat", assumed.get("superheat")))
        self.subcooling = number(head.get("subcooling", assumed.get("subcooling")))
        self.cycling_coefficient = number(head.get("cycling_coefficient", assumed.get("cycling_coefficient")))
        self.field_factor = told["field_factor"]
        self.idle_kw = {name: number(value) / 1000 for name, value in sheet["idle_power"].items()}
        limits = sheet["limits"]
        self.source_range = number(limits["lowest_source"]), number(limits["highest_source"])
        knots = sorted((number(knot["source"]), number(knot["flow"])) for knot in limits["highest_flow"])
        self.highest_flow_knots = [list(column) for column in zip(*knots)]
        p = self.parameters
        self.fan_kw = p["fan or pump in the tested points"] / 1000
        self.pump_at_home_kw = number(head["source_power_at_home"]) / 1000 - self.fan_kw if "source_power_at_home" in head else 0.0
        # The point that says most about size: tested at maximum nearest the rated condition.
        rated = {"air": (7, 35), "brine": (0, 35), "water": (10, 35)}[head["source"]]
        at_maximum = [point for point in told["points"] if point["at"] == "maximum"]
        nearest = min(at_maximum, key=lambda point: math.hypot(point["source_c"] - rated[0], point["flow_c"] - rated[1]))
        self.nominal_kw = nearest["heat_kw"]
        self.evaporator_k_per_kw = p["evaporator approach above superheat"] / (0.78 * self.nominal_kw)
        self.condenser_k_per_kw = p["condenser approach"] / self.nominal_kw
        self.swept_m3_s = p["volume swept at speed 1"] / 3600
        if not self.fixed:
            at_2 = p["speed at 2 °C over that at 7 °C"]
            at_m7 = at_2 * p["speed at −7 °C over that at 2 °C"]
            at_m15 = at_m7 * p["speed at −15 °C over that at −7 °C"]
            self.speed_knots = [at_m15, at_m7, at_2, 1.0, p["speed at 15 °C over that at 7 °C"]]
        self.tabulate()
        self.states = {}
        self.begin = self.superheat + 3.0, 0.6  # approach and speed that the next solution begins from
        self.cop_field = self.greatest_field = self.least_field = lambda *_: 0.0
        self.strength = told["correction_kept"]
        self.fit_corrections(told["points"], sheet["tested"])

    def fit_corrections(self, points, tested):
        cop, greatest, least = [], [], []
        for point, given in zip(points, tested):
            frosted = self.air and given.get("defrost_included", True)
            source, flow, net = point["source_c"], point["flow_c"], point["heat_kw"]
            humidity = standard_humidity_ratio(source) if frosted else None
            gross, _, _ = self.gross(source, flow, net, humidity)
            for at, speed, found in (("maximum", self.greatest_speed(source, flow), greatest), ("least", self.least_speed(), least)):
                if point["at"] == at:
                    now = self.at_speed(source, flow, speed)
                    given_kw = now["heat"] * (1 - self.frost_loss(source, now, humidity)[0])
                    found.append((source, flow, 0.0, net / given_kw - 1))
            operation = self.at_output(source, flow, gross)
            loss = self.frost_loss(source, operation, humidity)
            cop.append((source, flow, gross / self.nominal_kw, point["cop"] / (operation["cop"] * (1 - loss[1])) - 1))
            told = 1 / (1 + point["physics_percent"] / 100) - 1
            assert abs(told - cop[-1][3]) < 2e-4, (point, told, cop[-1])
            if point.get("physics_heat_percent"):
                told = 1 / (1 + point["physics_heat_percent"] / 100) - 1
                assert abs(told - (greatest if point["at"] == "maximum" else least)[-1][3]) < 2e-4, (point, told, greatest, least)
        self.cop_field, self.greatest_field, self.least_field = map(field, (cop, greatest, least))

    # physics

    def tabulate(self):
        """CoolProp's properties every half kelvin and the isentropic work every kelvin, joined by cubics."""
        cold, hot = np.arange(-50.0, 41.0, 0.5), np.arange(5.0, self.fluid.T_critical() - K - 5, 0.5)
        low, high = ([math.log(CP.PropsSI("P", "T", c + K, "Q", q, self.fluid.name())) for c in at] for at, q in ((cold, 1), (hot, 0)))
        suction, _, _, density, _ = np.array([self.state(te, 45.0) for te in cold]).T
        liquid = [self.state(-10.0, tc)[2] for tc in hot]
        self.suction, self.density, self.low = Cubic(cold, suction), Cubic(cold, np.log(density)), Cubic(cold, low)
        self.liquid, self.high = Cubic(hot, liquid), Cubic(hot, high)
        hot = hot[1::2]
        self.work_at = [Cubic(hot, [(s[1] - s[0]) / math.log(s[4]) for tc in hot for s in [self.state(te, tc)]]) for te in cold[::2]]
        random = np.random.default_rng(1)
        for te, tc in zip(random.uniform(-35, 20, 200), random.uniform(30, 65, 200)):
            error = np.abs(np.array(self.quick(te, tc)) / np.array(self.state(te, tc)) - 1).max()
            assert error < 1e-6, (te, tc, error)

    def quick(self, te, tc):
        ratio = math.exp(self.high(tc) - self.low(te))
        suction = self.suction(te)
        # Lagrange's cubic through the four nearest evaporating temperatures, a kelvin apart.
        i = min(max(int(te + 50.0), 1), len(self.work_at) - 3)
        x = te + 50.0 - i
        weights = -x * (x - 1) * (x - 2) / 6, (x + 1) * (x - 1) * (x - 2) / 2, -(x + 1) * x * (x - 2) / 2, (x + 1) * x * (x - 1) / 6
        work = sum(w * line(tc) for w, line in zip(weights, self.work_at[i - 1 : i + 3])) * math.log(ratio)
        return suction, suction + work, self.liquid(tc), math.exp(self.density(te)), ratio

    def state(self, te, tc):
        """Suction, isentropic and liquid enthalpy, J/kg; suction density, kg/m³; pressure ratio."""
        fluid = self.fluid
        fluid.update(CP.QT_INPUTS, 1, te + K)
        low = fluid.p()
        if self.superheat > 0:
            fluid.update(CP.PT_INPUTS, low, te + self.superheat + K)
        suction, entropy, density = fluid.hmass(), fluid.smass(), fluid.rhomass()
        fluid.update(CP.QT_INPUTS, 0, tc + K)
        high = fluid.p()
        fluid.update(CP.PT_INPUTS, high, tc - self.subcooling + K)
        liquid = fluid.hmass()
        fluid.update(CP.PSmass_INPUTS, high, entropy)
        return suction, fluid.hmass(), liquid, density, high / low

    def per_kilogram(self, te, tc, speed):
        p = self.parameters
        suction, isentropic, liquid, density, ratio = self.quick(te, tc)
        efficiency = p["peak isentropic efficiency"] * (1 - p.get("penalty away from the best speed", 0.0) * (speed - 0.65) ** 2)
        efficiency /= 1 + p["falloff away from that ratio"] * math.log(ratio / p["pressure ratio at the peak"]) ** 2
        work = (isentropic - suction) / efficiency / 1000
        moved = density * (1.026 - 0.0202 * ratio) * self.swept_m3_s
        return work, (suction - liquid) / 1000, moved

    def greatest_speed(self, source, flow):
        if self.fixed:
            return 1.0
        at_35 = float(np.interp(source, [-15, -7, 2, 7, 15], self.speed_knots))
        return at_35 * (1 + self.parameters["speed rise with flow temperature"] * (flow - 35))

    def least_speed(self):
        return 1.0 if self.fixed else self.parameters["least speed"]

    def fan(self, source, flow, speed):
        share = speed / self.greatest_speed(source, flow)
        return self.fan_kw if self.fixed else self.fan_kw * (0.15 + 0.85 * share**2)

    def operation(self, source, flow, speed, heat, cold, work_kw, te):
        compressor = work_kw / self.parameters["drive efficiency"]
        fan = self.fan(source, flow, speed)
        return {"heat": heat, "extracted": cold, "compressor": compressor, "fan": fan, "cop": heat / (compressor + fan), "te": te, "speed": speed}

    def at_speed(self, source, flow, speed):
        key = source, flow, speed
        if key not in self.states:
            te, tc = source - self.superheat - 4, flow + 2
            for _ in range(200):
                work, cooling, moved = self.per_kilogram(te, tc, speed)
                mass = moved * speed
                cold, heat = mass * cooling, mass * (cooling + work)
                new_te = source - self.superheat - self.evaporator_k_per_kw * cold
                new_tc = flow + self.condenser_k_per_kw * heat
                change = abs(new_te - te) + abs(new_tc - tc)
                te, tc = new_te, new_tc
                if change < 1e-7:
                    break
            else:
                raise ArithmeticError(f"not settled at {source}/{flow}")
            self.states[key] = self.operation(source, flow, speed, heat, cold, mass * work, te)
        return self.states[key]

    def at_output(self, source, flow, heat):
        approach, speed = self.begin
        te, tc = source - approach, flow + self.condenser_k_per_kw * heat
        for step in range(400):
            work, cooling, moved = self.per_kilogram(te, tc, speed)
            mass = heat / (cooling + work)
            new_speed = mass / moved
            new_te = source - self.superheat - self.evaporator_k_per_kw * mass * cooling
            change = abs(new_te - te) + abs(new_speed - speed)
            damping = 1.0 if step < 30 else 0.5
            te, speed = te + damping * (new_te - te), speed + damping * (new_speed - speed)
            if change < 1e-7:
                self.begin = source - te, speed
                return self.operation(source, flow, speed, heat, mass * cooling, mass * work, te)
        raise ArithmeticError(f"not settled at {source}/{flow}")

    # with correction

    def greatest_kw(self, source, flow):
        heat = self.at_speed(source, flow, self.greatest_speed(source, flow))["heat"]
        return heat * (1 + self.strength * self.greatest_field(source, flow, 0.0))

    def least_kw(self, source, flow):
        greatest = self.greatest_kw(source, flow)
        if self.fixed:
            return greatest
        heat = self.at_speed(source, flow, self.least_speed())["heat"]
        return min(heat * (1 + self.strength * self.least_field(source, flow, 0.0)), 0.95 * greatest)

    def corrected(self, source, flow, heat):
        physics = self.at_output(source, flow, heat)
        cop = physics["cop"] * (1 + self.strength * self.cop_field(source, flow, heat / self.nominal_kw))
        electric = heat / cop
        compressor = electric - physics["fan"]
        extracted = heat - compressor * self.parameters["drive efficiency"]
        te = source - self.superheat - self.evaporator_k_per_kw * extracted
        return {"heat": heat, "electric": electric, "fan": physics["fan"], "compressor": compressor, "extracted": extracted, "te": te, "cop": cop}

    # frost

    def frost_loss(self, source, operation, humidity):
        """Shares of output and of COP that frost costs."""
        if humidity is None or not self.air or source > 15:
            return 0.0, 0.0
        surface = source - 0.6 * (source - operation["te"])
        if surface >= 0:
            return 0.0, 0.0
        moisture = max(humidity - psychrolib.GetHumRatioFromRelHum(surface, 1.0, SEA_LEVEL_PA), 0.0)
        latent = 2834 * moisture
        frosts = min(surface / -4.0, 1.0)
        frosts *= frosts * (3 - 2 * frosts)
        share = latent / (1.006 * (source - surface) + latent) * frosts
        cop = min(self.parameters["frost strength"] * share, 0.35)
        return cop * 0.100 / 0.086, cop

    def gross(self, source, flow, net, humidity, corrected=False):
        """Output before frost that leaves a net output."""
        solve = self.corrected if corrected else self.at_output
        gross = net
        for _ in range(40):
            operation = solve(source, flow, gross)
            loss = self.frost_loss(source, operation, humidity)
            new = net / (1 - loss[0])
            settled = abs(new - gross) < 1e-9 * net
            gross = new
            if settled:
                break
        return gross, operation, loss

    # an hour

    def clamp_flow(self, source, flow):
        return max(flow, source + 10.0, 20.0)

    def steady(self, offer, flow, net, humidity):
        """At a net output, or at the greatest or least, in balance with the source: net output, electricity by part, extracted."""
        open_c, k_per_kw = offer
        source = open_c
        for _ in range(80):
            f = self.clamp_flow(source, flow)
            low, high = self.least_kw(source, f), self.greatest_kw(source, f)
            if net == "greatest" or net == "least":
                gross = high if net == "greatest" else low
                operation = self.corrected(source, f, gross)
                loss = self.frost_loss(source, operation, humidity)
            else:
                gross, operation, loss = self.gross(source, f, net, humidity, corrected=True)
                if not low <= gross <= high:
                    gross = min(max(gross, low), high)
                    operation = self.corrected(source, f, gross)
                    loss = self.frost_loss(source, operation, humidity)
            new = open_c - k_per_kw * operation["extracted"]
            settled = abs(new - source) < 1e-7
            source = new
            if settled:
                break
        given = gross * (1 - loss[0])
        whole = given / (operation["cop"] * (1 - loss[1]))
        return {"net": given, "electric": whole, "extracted": operation["extracted"], "source": source}

    def highest_flow(self, source):
        return float(np.interp(source, *self.highest_flow_knots))

    def deliver(self, offer, flow, spread, heat_kw, hours, humidity, at_full_output=False):
        """Heat, electricity, running hours, whether it cycled and whether it was short."""
        nothing = {"heat": 0.0, "electric": 0.0, "running": 0.0, "cycling": False, "short": False}
        open_c = offer[0]
        if not self.source_range[0] <= open_c <= self.source_range[1]:
            return nothing
        highest = self.highest_flow(open_c)
        wanted = heat_kw
        if wanted <= 0 or flow > highest + 1e-6:
            return nothing
        home = self.pump_at_home_kw
        if at_full_output:
            steady = self.steady(offer, flow, "greatest", humidity)
            running = min(wanted * hours / steady["net"], hours)
            electric = (steady["electric"] + home) * running
            return {"heat": steady["net"] * running, "electric": electric / self.field_factor, "running": running, "cycling": False, "short": False}
        greatest = self.steady(offer, flow, "greatest", humidity)
        if wanted >= greatest["net"] * (1 - 1e-9):
            electric = (greatest["electric"] + home) * hours
            short = wanted > greatest["net"] * (1 + 1e-9)
            return {"heat": greatest["net"] * hours, "electric": electric / self.field_factor, "running": hours, "cycling": False, "short": short}
        least = self.steady(offer, flow, "least", humidity)
        if wanted >= least["net"]:
            steady = self.steady(offer, flow, wanted, humidity)
            electric = (steady["electric"] + home) * hours
            return {"heat": wanted * hours, "electric": electric / self.field_factor, "running": hours, "cycling": False, "short": False}
        share = wanted / least["net"]
        for _ in range(60):
            rise = min(spread / share, 10.0) * (1 - share)
            least = self.steady(offer, min(flow + rise, highest), "least", humidity)
            new = min(wanted / least["net"], 1.0)
            settled = abs(new - share) < 1e-8
            share = new
            if settled:
                break
        starting_up = (1 - self.cycling_coefficient) * least["electric"] * (1 - share)
        electric = (least["electric"] + home) * share * hours + starting_up * hours
        return {"heat": wanted * hours, "electric": electric / self.field_factor, "running": share * hours, "cycling": True, "short": False}


def field(residuals):
    """The smoothest surface through residuals: reach 12 K, 15 K, 0.4 of nominal; 0.04 signal, 0.001 noise; within ±10 %."""
    if not residuals:
        return lambda *_: 0.0
    bound, reach = 0.10, np.array([12.0, 15.0, 0.4])
    at = np.array([row[:3] for row in residuals]) / reach
    values = np.array([row[3] for row in residuals])
    values = bound * np.arctanh(np.clip(values / bound, -0.98, 0.98))
    distance = ((at[:, None] - at[None]) ** 2).sum(axis=2)
    weights = np.linalg.solve(0.04**2 * np.exp(-distance / 2) + 0.001**2 * np.eye(len(at)), values)

    def surface(source, flow, share):
        distance = ((at - np.array([source, flow, share]) / reach) ** 2).sum(axis=1)
        return bound * math.tanh(float(0.04**2 * np.exp(-distance / 2) @ weights) / bound)

    return surface


def humidity_ratio(outdoor_c, relative_humidity):
    """Of air whose relative humidity is over liquid water at all temperatures, as stations state it (ASHRAE equation 6)."""
    t = outdoor_c + K
    logarithm = -5.8002206e3 / t + 1.3914993 - 4.8640239e-2 * t + 4.1764768e-5 * t**2 - 1.4452093e-8 * t**3 + 6.5459673 * math.log(t)
    return psychrolib.GetHumRatioFromVapPres(relative_humidity * math.exp(logarithm), SEA_LEVEL_PA)


def standard_humidity_ratio(dry_bulb):
    return psychrolib.GetHumRatioFromTWetBulb(dry_bulb, dry_bulb - 1.0, SEA_LEVEL_PA)


# --- the home ------------------------------------------------------------------------------------------------------------

PROFILE_M = {7: 0.105 + 1.4 + 0.105, 8: 4 * 0.105, 9: 0.21, 10: 0.105, 11: 0.21, 12: 0.315, 14: 0.105, 15: 0.105, 16: 0.105, 18: 0.315, 19: 0.105, 20: 0.735, 21: 0.105 + 1.4}


class Home:
    def __init__(self, brief):
        home, emitters, water = brief["home"], brief["home"]["emitters"], brief["home"]["hot_water"]
        self.loss_kw_k = number(home["heat_loss"]) / 1000
        self.capacity = 165 * number(home["floor_area"]) / 3600  # ISO 13790 table 12, medium
        self.set_point = number(home["indoor"])
        self.gains_kw = number(home["internal_gains"]) / 1000
        self.aperture = number(home["solar_aperture"])
        self.load_kw = self.loss_kw_k * (self.set_point - number(home["design_outdoor"]))
        self.flow, self.back = number(emitters["flow"]), number(emitters["return"])
        self.line = [tuple(number(part) for part in point.split("/")) for point in emitters.get("line", [])]
        daily = number(water["daily_energy"])
        self.draws = [daily * PROFILE_M.get(hour, 0.0) / 5.845 for hour in range(24)]
        self.cold = number(water["cold"])
        self.store_set, self.hysteresis = number(water["setpoint"]), number(water["hysteresis"])
        volume = number(water["store"])
        self.store_capacity = volume * WATER_KWH_PER_L_K
        self.store_loss = (16.66 + 8.33 * volume**0.4) / 45 / 1000

    # fabric: C dT/dt = Q + G − H (T − To), exact for an hour of constant right-hand side

    def left(self, hours):
        return math.exp(-hours * self.loss_kw_k / self.capacity)

    def heat_to_reach(self, room, target, outdoor, gains, hours):
        left = self.left(hours)
        steady = (target - room * left) / (1 - left)
        return max(self.loss_kw_k * (steady - outdoor) - gains, 0.0)

    def heat_wanted(self, room, outdoor, gains):
        hours = 6 if room < self.set_point else 1
        return self.heat_to_reach(room, self.set_point, outdoor, gains, hours)

    def room_after(self, room, heat, outdoor, gains):
        steady = outdoor + (heat + gains) / self.loss_kw_k
        # Airing from 3 K above the set point takes away what would warm the rooms further, by air that is itself no cooler.
        return min(steady + (room - steady) * self.left(1), max(self.set_point + 3.0, outdoor, room))

    # emitters: EN 442, arithmetic mean water; water flow as designed

    def carried(self, heat, room):
        """Mean water and spread at the designed flow."""
        share = heat / self.load_kw
        excess = ((self.flow + self.back) / 2 - self.set_point) * share ** (1 / 1.3)
        return room + excess, (self.flow - self.back) * share

    def output(self, flow, room):
        low, high = 0.0, 5 * self.load_kw
        for _ in range(100):
            middle = (low + high) / 2
            mean, spread = self.carried(middle, room)
            low, high = (middle, high) if mean + spread / 2 < flow else (low, middle)
        return low

    def greatest_output(self):
        return self.output(self.flow + 10, self.set_point)

    def supply(self, heat, room, outdoor):
        """Heat that is carried, flow, return, spread at the designed water flow."""
        mean, spread = self.carried(heat, room)
        if not self.line:
            return heat, mean + spread / 2, mean - spread / 2, spread
        (cold, hot_flow), (mild, mild_flow) = sorted(self.line)
        flow = float(np.interp(outdoor, [cold, mild], [hot_flow, mild_flow]))
        flow = min(flow, self.flow + 10)
        if flow < mean + spread / 2:
            heat = self.output(flow, room)
            mean, spread = self.carried(heat, room)
        return heat, flow, 2 * mean - flow, spread


# --- boiler --------------------------------------------------------------------------------------------------------------


def flue_efficiency(flue_c):
    """Methane at 25 % excess air: one less sensible heat above 25 °C less the latent heat of the steam that stays."""
    air, oxygen, water = 1.25, 2.0, 2.0
    dry = {"CO2": 1.0, "N2": 3.76 * air * oxygen, "O2": (air - 1) * oxygen}
    pressure = psychrolib.GetSatVapPres(flue_c)
    steam = min(water, sum(dry.values()) * pressure / (SEA_LEVEL_PA - pressure))
    heat = dry["CO2"] * 0.0380 + dry["N2"] * 0.0291 + dry["O2"] * 0.0296 + steam * 0.0337 + (water - steam) * 0.0753
    return 1 - (heat * (flue_c - 25) + 43.99 * steam) / 890.6


class Boiler:
    """Follows the load; keeps 0.92 of the ideal in a home; the flue gas leaves 5 K above the return."""

    def __init__(self, table):
        self.output = number(table["output"])
        self.electric_per_heat = 175 / 9775

    def fuel(self, heat, return_c):
        return heat / (0.92 * flue_efficiency(return_c + 5)) if heat > 0 else 0.0


# --- the year ------------------------------------------------------------------------------------------------------------


def undisturbed(hourly, depth, diffusivity):
    """Kusuda and Achenbach at a depth, the wave by the first Fourier coefficient of the air."""
    hours = np.arange(len(hourly))
    turn = 2 * np.pi / 8766
    mean = hourly.mean()
    a = 2 / len(hourly) * (hourly * np.cos(turn * (hours + 0.5))).sum()
    b = 2 / len(hourly) * (hourly * np.sin(turn * (hours + 0.5))).sum()
    amplitude, coldest = math.hypot(a, b), math.atan2(-b, -a) / turn
    damping = depth * math.sqrt(math.pi / (8766 * 3600 * diffusivity))
    return mean - amplitude * math.exp(-damping) * np.cos(turn * (hours + 0.5 - coldest) - damping)


def price_column(tariff, clock):
    """Pence a kilowatt-hour of each hour; a band that ends within an hour shares it by minutes."""
    bands = tariff["band"]
    minutes = np.zeros(1440)
    for band in bands:
        rate = number(band["rate"])
        if "from" not in band:
            minutes[:] = rate
            continue
        begin, end = (int(t[:2]) * 60 + int(t[3:]) for t in (band["from"], band["to"]))
        span = np.arange(begin, end if end > begin else end + 1440) % 1440
        minutes[span] = rate
    return minutes.reshape(24, 60).mean(axis=1)[clock.hour]


def year(brief, machine, home, weather, zone):
    choice = brief["choice"][0]
    clock = weather.index.tz_convert(zone)
    electricity = read_tariff(brief, "electricity")
    gas = read_tariff(brief, "gas")
    price = price_column(electricity, clock) / 100
    gas_price = price_column(gas, clock) / 100
    boiler = Boiler(choice["boiler"]) if "boiler" in choice else None
    backup_kw = number(choice["backup"])
    ground = undisturbed(weather["t"].to_numpy(), number(choice["loop_depth"]), number(choice["soil_diffusivity"])) if "loop_depth" in choice else None
    resistance = number(choice["loop_resistance"]) if ground is not None else 0.0
    room, store, charging = home.set_point, home.store_set, False
    greatest = home.greatest_output()
    rows = []
    for hour, (outdoor, humidity, sun) in enumerate(weather[["t", "rh", "g"]].itertuples(index=False)):
        gains = home.gains_kw + home.aperture * sun / 1000
        offer = (outdoor, 0.0) if ground is None else (ground[hour], resistance)
        moisture = humidity_ratio(outdoor, humidity) if machine.air else None
        # Hot water: drawn, lost, then a block at full output when it has fallen by the hysteresis.
        draw = min(home.draws[clock[hour].hour], max((store - home.cold) * home.store_capacity, 0.0))
        lost = home.store_loss * (store - 20.0)
        before = store - (draw + lost) / home.store_capacity
        charging = charging or before <= home.store_set - home.hysteresis
        block = max((home.store_set - before) * home.store_capacity, 0.0) if charging else 0.0
        wanted = min(home.heat_wanted(room, outdoor, gains), greatest)
        least = home.heat_to_reach(room, home.set_point - 0.5, outdoor, gains, 1)

        def by_machine():
            used = water = electric = space = helped = 0.0
            cycling = False
            if block > 0:
                reach = min(home.store_set, machine.highest_flow(offer[0]) - 5.0)
                asked = min(max((reach - before) * home.store_capacity, 0.0), block)
                got = machine.deliver(offer, (before + reach) / 2 + 5.0, 5.0, asked, 1.0, moisture, at_full_output=True)
                used, water, electric = got["running"], got["heat"], got["electric"]
            left = 1.0 - used
            running, circulation = used, 0.0
            lift_kw = backup_kw if boiler is None else backup_kw + boiler.output
            if wanted > 0:
                helped = min(max(least, 0.0), lift_kw)
                if left > 1e-6:
                    got, helped = in_balance(machine, home, offer, wanted, least, lift_kw, room, outdoor, left, moisture)
                    space, cycling = got["heat"], got["cycling"]
                    electric += got["electric"]
                    running += got["running"]
                circulation = 0.025 * left
            idle = 0.0 if cycling else machine.idle_kw["thermostat_off"] if running > 0 or wanted > 0 else machine.idle_kw["standby"] + machine.idle_kw["crankcase"]
            electric += circulation + idle * max(1 - running, 0.0)
            fuel = 0.0
            if boiler is None:
                electric += helped
            elif helped > 0:
                _, flow, back, _ = home.supply(helped + space, room, outdoor)
                # Behind the machine: what it has warmed enters the boiler.
                enters = flow - (flow - back) * helped / (helped + space) if space > 0 else back
                fuel = boiler.fuel(helped, enters)
                electric += helped * boiler.electric_per_heat
            return {"space": space + helped, "water": water, "electricity": electric, "fuel": fuel, "backup": helped, "running": running}

        def by_boiler():
            water = min(block, boiler.output)
            space, _, back, _ = home.supply(min(wanted, boiler.output - water), room, outdoor)
            fuel = boiler.fuel(space, back) + boiler.fuel(water, 55.0)
            electric = (water + space) * boiler.electric_per_heat
            electric += machine.idle_kw["standby"] + machine.idle_kw["crankcase"]
            return {"space": space, "water": water, "electricity": electric, "fuel": fuel, "backup": 0.0, "running": 0.0}

        row = by_machine()
        if boiler is not None:
            other = by_boiler()
            per_heat = lambda r: (r["electricity"] * price[hour] + r["fuel"] * gas_price[hour]) / heat if (heat := r["space"] + r["water"]) > 0 else math.inf
            if per_heat(other) < per_heat(row) or (row["space"] + row["water"] == 0 and other["space"] + other["water"] > 0):
                row = other
        store = before + row["water"] / home.store_capacity
        charging = charging and block > 0 and store < home.store_set - 1e-9 * block
        room = home.room_after(room, row["space"], outdoor, gains)
        row |= {"indoor": room, "store": store}
        rows.append(row)
    frame = pd.DataFrame(rows, index=weather.index)
    frame[["electricity", "fuel"]] = frame[["electricity", "fuel"]].round(4)  # as they are stored, so that the bill is theirs
    days = len(clock) / 24  # a civil day cut by the end of the series counts by its hours
    return frame, bill(electricity, frame["electricity"], clock, days), bill(gas, frame["fuel"], clock, days)


def in_balance(machine, home, offer, wanted, least, lift_kw, room, outdoor, hours, moisture):
    """The machine, and what is added behind it in the flow, kWh.

    Alone it gives what the emitters take at a flow that it reaches. Where that is less than keeps the rooms above the point where
    they are helped, it warms the return of the whole as far as it can.
    """
    highest = machine.highest_flow(offer[0])

    def carried(heat):
        got = home.supply(heat, room, outdoor)
        if got[1] <= highest:
            return got
        heat = min(heat, home.output(highest, room))
        mean, spread = home.carried(heat, room)
        return heat, highest, 2 * mean - highest, spread

    heat, flow, _, spread = carried(wanted)
    got = machine.deliver(offer, flow, spread, heat, hours, moisture)
    if got["short"]:
        low, high = got["heat"] / hours, heat
        for _ in range(22):
            ask = (low + high) / 2
            heat, flow, _, spread = carried(ask)
            got = machine.deliver(offer, flow, spread, heat, hours, moisture)
            low, high = (low, ask) if got["short"] else (ask, high)
    if got["heat"] >= least or lift_kw <= 0:
        return got, 0.0
    total = min(home.supply(least, room, outdoor)[0], home.greatest_output())
    if total <= got["heat"]:
        return got, 0.0
    if got["heat"] <= 0:
        return got, min(total, lift_kw)

    def machine_part(total):
        """Most that the machine can bring of a heat: its flow is the return of the whole and what it adds."""
        _, flow, _, spread = home.supply(total, room, outdoor)

        def bears(part):
            at = flow - spread * (1 - part / total)
            return at <= highest and machine.steady(offer, at, "greatest", moisture)["net"] >= part

        low, high = 0.0, total
        if bears(high):
            return high, flow, spread
        for _ in range(22):
            middle = (low + high) / 2
            low, high = (middle, high) if bears(middle) else (low, middle)
        return low, flow - spread * (1 - low / total), spread * low / total

    if machine_part(total)[0] * hours + lift_kw < total:
        low, high = got["heat"], total
        for _ in range(22):
            middle = (low + high) / 2
            low, high = (middle, high) if machine_part(middle)[0] * hours + lift_kw >= middle else (low, middle)
        total = low
    part, flow, spread = machine_part(total)
    got = machine.deliver(offer, flow, spread, part, hours, moisture)
    return got, min(max(total - got["heat"], 0.0), lift_kw)


def read_tariff(brief, name):
    return tomllib.loads((HERE / "year" / brief["energy"][name]).read_text())


def cents(amount):
    return amount.quantize(Decimal("0.01"), rounding=ROUND_HALF_UP)


def bill(tariff, kwh, clock, days):
    """Lines of a year: each rate's kilowatt-hours, and the standing charge; tax is in the rates. Half up, once a line."""
    if kwh.sum() == 0:
        return Decimal(0)
    lines = {}
    prices = [number(band["rate"]) for band in tariff["band"]]
    if len(prices) == 1:
        lines[prices[0]] = kwh.sum()
    else:
        for rate in prices:
            only = {**tariff, "band": [{**band, "rate": "1" if number(band["rate"]) == rate else "0"} for band in tariff["band"]]}
            lines[rate] = (kwh.to_numpy() * price_column(only, clock)).sum()
    total = sum(cents(Decimal(repr(float(amount))) * Decimal(repr(rate)) / 100) for rate, amount in lines.items())
    return total + cents(Decimal(str(number(tariff["standing"]))) * Decimal(days) / 100)


def read_weather(path):
    frame = pd.read_csv(path, comment="#", skipinitialspace=True)
    frame.columns = ["time", "t", "rh", "g", "wind"]
    frame.index = pd.to_datetime(frame.pop("time"), utc=True)
    frame["rh"] /= 100
    return frame


HOMES = ["air", "ground", "hybrid"]


def one(name, program, keep):
    path = HERE / "year" / f"{name}.toml"
    brief = tomllib.loads(path.read_text())
    weather = read_weather(path.parent / brief["weather"]["file"])
    machine = Machine(program, path.parent / brief["choice"][0]["machine"])
    frame, electricity_cost, fuel_cost = year(brief, machine, Home(brief), weather, brief["home"]["time_zone"])
    if keep:
        frame.to_csv(Path(keep) / f"{name}.csv")
    sums = frame[["space", "water", "electricity", "fuel", "backup"]].sum()
    row = {
        "home": name,
        "space_heat_kwh": sums["space"],
        "hot_water_kwh": sums["water"],
        "electricity_kwh": sums["electricity"],
        "fuel_kwh": sums["fuel"],
        "backup_kwh": sums["backup"],
        "cost": float(electricity_cost + fuel_cost),
    }
    return row, frame[["electricity", "fuel"]].add_prefix(f"{name}_").add_suffix("_kwh").reset_index(drop=True)


def main(program, keep=None):
    with multiprocessing.Pool() as pool:
        rows, hours = zip(*pool.starmap(one, [(name, program, keep) for name in HOMES]))
    for row in rows:
        told = json.loads(subprocess.run([program, "estimate", HERE / "year" / f"{row['home']}.toml", "--format", "json"], capture_output=True, check=True).stdout)
        system = told["systems"][1]
        print(row["home"])
        for key, value in list(row.items())[1:]:
            theirs = system.get(key) or 0.0
            print(f"  {key:16} {value:12.3f}  program {theirs:12.3f}  {100 * (value / theirs - 1) if theirs else 0:+.4f} %")
    pd.DataFrame(rows).to_csv(HERE / "year.csv", index=False, float_format="%.4f")
    hours = pd.concat(hours, axis=1)
    hours.loc[:, hours.any()].to_csv(HERE / "year_hours.csv", index=False, float_format="%.4f")


if __name__ == "__main__":
    main(*sys.argv[1:])
