"""Nodal equations of a design file, written from the documented equations of the part kinds and from nothing else.

Every circuit becomes d/dt q(x) + f(x) = 0. Parts add laws: small functions of a few controls, differentiated by complex
steps (Squire & Trapp 1998), so that no derivative is written down twice in the project.
"""
import cmath
import math
import re

import numpy as np

BOLTZMANN, CHARGE = 1.380649e-23, 1.602176634e-19  # SI 2019, exact
STEP = 2.0**-100  # a power of two: derivatives of linear laws come out exactly
PREFIX = {"f": 1e-15, "p": 1e-12, "n": 1e-9, "u": 1e-6, "µ": 1e-6, "μ": 1e-6, "m": 1e-3, "": 1.0, "k": 1e3, "K": 1e3,
          "M": 1e6, "G": 1e9, "T": 1e12}
LETTER = PREFIX | {"R": 1.0, "L": 1e-3, "F": 1.0, "H": 1.0}


def quantity(value):
    """A JSON value as a number: number, IEC 60062 letter code, or number with prefix and unit."""
    if not isinstance(value, str):
        return float(value)
    code = re.fullmatch(r"([0-9]*)([A-Za-zµμ])([0-9]*)", value)
    if code and code[2] in LETTER:
        return float(f"{code[1] or 0}.{code[3] or 0}") * LETTER[code[2]]
    plain = re.fullmatch(r"\s*([-+0-9.]+(?:[eE][-+]?[0-9]+)?)\s*(%|ppm|[fpnuµμmkKMGT]?)(?:Ω|F|H|V|A|Hz|s|K)?\s*", value)
    if not plain:
        raise ValueError(f"no quantity: {value!r}")
    scale = {"%": 1e-2, "ppm": 1e-6}.get(plain[2]) or PREFIX[plain[2]]
    return float(plain[1]) * scale


def across(a, b):
    """The voltage from a to b as weights of unknowns; also where a current from a to b enters the balances."""
    return {a: 1, b: -1} if a != b else {}


def limited_exp(u):
    return cmath.exp(u) if u.real <= 80 else math.exp(80) * (u - 79)


class Law:
    def __init__(self, controls, outputs, function):
        self.controls, self.outputs, self.function = controls, outputs, function


class Circuit:
    """Unknowns: net voltages, then whatever the parts need. `opened` = (part, terminal): that terminal alone gets a
    further net, `side_x`; the rest of its net is `side_y`."""

    def __init__(self, design, opened=None):
        self.temperature = float(design.get("temperature_c", 25)) + 273.15
        self.start, self.names, self.nets, self.laws = [], [], {}, []
        for part in design["parts"]:
            for net in part["terminals"].values():
                if net != "gnd" and net not in self.nets:
                    self.nets[net] = self.unknown(net, 0.0)
        for part in design["parts"]:
            at = {name: self.nets.get(net) for name, net in part["terminals"].items()}
            if opened and part["ref"] == opened[0]:
                self.side_y = at[opened[1]]
                self.side_x = at[opened[1]] = self.unknown("side x", 0.0)
            numbers = {k: v if k in ("model", "law") else quantity(v) for k, v in part.items()
                       if k not in ("ref", "kind", "terminals", "place", "spread")}
            getattr(self, part["kind"])(at, numbers)

    @property
    def size(self):
        return len(self.start)

    def unknown(self, name, start):
        self.names.append(name)
        self.start.append(start)
        return self.size - 1

    def law(self, controls, outputs, function):
        """controls, outputs: lists of {unknown or None for gnd: weight}; function(*u) gives a list of (i, q)."""
        clean = [[{k: w for k, w in c.items() if k is not None} for c in side] for side in (controls, outputs)]
        self.laws.append(Law(*clean, function))

    def linearise(self, x):
        """f, q, and the stamps [(row, column, dG, dC)] at x; a stamp appears once per control, output and weight."""
        f, q, stamps = np.zeros(self.size), np.zeros(self.size), []
        for law in self.laws:
            u = [sum(w * x[k] for k, w in c.items()) for c in law.controls]
            for (i, charge), rows in zip(law.function(*map(complex, u)), law.outputs):
                for row, weight in rows.items():
                    f[row] += weight * complex(i).real
                    q[row] += weight * complex(charge).real
            for c, columns in enumerate(law.controls):
                nudged = [complex(v, STEP if k == c else 0) for k, v in enumerate(u)]
                for (i, charge), rows in zip(law.function(*nudged), law.outputs):
                    g, capacitance = complex(i).imag / STEP, complex(charge).imag / STEP
                    for row, row_weight in rows.items():
                        for column, column_weight in columns.items():
                            weight = row_weight * column_weight
                            stamps.append((row, column, weight * g, weight * capacitance))
        return f, q, stamps

    def matrices(self, x):
        G, C = np.zeros((self.size, self.size)), np.zeros((self.size, self.size))
        for row, column, g, c in self.linearise(x)[2]:
            G[row, column] += g
            C[row, column] += c
        return G, C

    # Building blocks

    def between(self, a, b, function):
        """A current function(v_ab) → (i, q) from a to b."""
        self.law([across(a, b)], [across(a, b)], lambda v: [function(v)])

    def branch(self, a, b, name="current"):
        j = self.unknown(name, 0.0)
        self.law([{j: 1}], [across(a, b)], lambda i: [(i, 0)])
        return j

    def equation(self, row, controls, function):
        self.law(controls, [{row: 1}], lambda *u: [function(*u)])

    def ohmic(self, a, b, ohm):
        """v_ab = ohm·i with the current as an unknown, so that zero ohm is no special case."""
        j = self.branch(a, b)
        self.equation(j, [across(a, b), {j: 1}], lambda v, i: (v - ohm * i, 0))

    def forced(self, out, controls, function):
        """An ideal source at `out` to gnd of function(*controls) volts."""
        j = self.branch(out, None)
        self.equation(j, [{out: 1}, *controls], lambda v, *u: (v - function(*u), 0))

    def warmed(self, p, name):
        return p[name] * (1 + p.get("tempco", 0) * (self.temperature - 298.15))

    def junction(self, p, saturation, ideality, scaled=True):
        t = self.temperature
        if scaled:
            gap = p.get("bandgap", 1.11) * CHARGE / (ideality * BOLTZMANN)
            saturation *= (t / 298.15) ** (3 / ideality) * math.exp(gap * (1 / 298.15 - 1 / t))
        scale = ideality * BOLTZMANN * t / CHARGE
        return lambda v: saturation * (limited_exp(v / scale) - 1)

    # Part kinds, as documented

    def resistor(self, at, p):
        r, k2 = self.warmed(p, "resistance"), p.get("voltage_coefficient_2", 0)
        self.between(at["a"], at["b"], lambda v: ((v / r) / (1 + k2 * v * v), 0))

    def capacitor(self, at, p):
        c, k1, k2 = self.warmed(p, "capacitance"), p.get("voltage_coefficient_1", 0), p.get("voltage_coefficient_2", 0)
        inner = at["b"]
        if p.get("series_resistance", 0):
            inner = self.unknown("inside", 0.0)
            self.ohmic(inner, at["b"], p["series_resistance"])
        self.between(at["a"], inner, lambda v: (0, c * (v + k1 * v**2 / 2 + k2 * v**3 / 3)))

    def inductor(self, at, p):
        henry, r = self.warmed(p, "inductance"), p.get("series_resistance", 0)
        j = self.branch(at["a"], at["b"])
        self.equation(j, [across(at["a"], at["b"]), {j: 1}], lambda v, i: (r * i - v, henry * i))

    def potentiometer(self, at, p):
        r, end, position = self.warmed(p, "resistance"), p.get("end_resistance", 0), p.get("position", 0.5)
        self.ohmic(at["a"], at["w"], end + r * position)
        self.ohmic(at["w"], at["b"], end + r * (1 - position))

    def supply(self, at, p):
        j = self.branch(at["plus"], at["minus"])
        volts = self.warmed(p, "voltage")
        self.equation(j, [across(at["plus"], at["minus"])], lambda v: (v - volts, 0))

    def limiter(self, at, p):
        g, limit, cubic = p.get("gain", 1), p.get("limit", 1), p.get("cubic", 0)
        law = {"tanh": lambda v: limit * cmath.tanh(g * v / limit),
               "cubic": lambda v: g * v - cubic * v**3,
               "clip": lambda v: g * v if abs(g * v.real) <= limit else math.copysign(limit, g * v.real)}[p["law"]]
        self.forced(at["out"], [{at["in"]: 1}], law)

    def diode(self, at, p, extra=None):
        saturation, ideality = p.get("saturation_current", 4e-9), p.get("ideality", 1.9)
        forward = self.junction(p, saturation, ideality)
        current = (lambda v: forward(v) + extra(v)) if extra else forward
        stored, tt = p.get("junction_capacitance", 0), p.get("transit_time", 0)
        anode = at["a"]
        if p.get("series_resistance", 0):
            anode = self.unknown("junction", 0.0)
            self.ohmic(at["a"], anode, p["series_resistance"])
        self.between(anode, at["k"], lambda v: (current(v), tt * current(v) + stored * v))

    def zener(self, at, p):
        scale = p.get("breakdown_ideality", 2) * BOLTZMANN * self.temperature / CHARGE
        vz, iz = self.warmed(p, "breakdown_voltage"), p.get("breakdown_current", 1e-3)
        self.diode(at, p, lambda v: -iz * limited_exp(-(v + vz) / scale))

    def filament(self, at, resistance, heat_capacity, loss):
        """A resistance that depends on its own temperature θ: heat_capacity·dθ/dt = v·i − loss(θ)."""
        theta = self.unknown("temperature", self.temperature)
        v = across(at["a"], at["b"])
        self.law([v, {theta: 1}], [v, {theta: 1}],
                 lambda u, th: [(u / resistance(th), 0), (loss(th) - u * u / resistance(th), heat_capacity * th)])

    def lamp(self, at, p):
        t, cold, n = self.temperature, self.warmed(p, "cold_resistance"), p.get("exponent", 1.2)
        radiation = p.get("radiation", 0)
        self.filament(at, lambda th: cold * (th / t) ** n, p["heat_capacity"],
                      lambda th: p["conduction"] * (th - t) + radiation * (th**4 - t**4))

    def thermistor(self, at, p):
        t, r25 = self.temperature, self.warmed(p, "resistance_25")
        self.filament(at, lambda th: r25 * cmath.exp(p["beta"] * (1 / th - 1 / 298.15)), p["heat_capacity"],
                      lambda th: p["dissipation"] * (th - t))

    def jfet(self, at, p):
        vp, beta, slope = p["pinch_off"], p["beta"], p.get("lambda", 0)

        def channel(vgs, vds):
            u = vgs - vp
            if u.real <= 0:
                return 0 * vds
            square = (2 * u - vds) * vds if vds.real < u.real else u * u
            return beta * square * (1 + slope * vds)

        d, g, s = at["d"], at["g"], at["s"]
        self.law([across(g, s), across(d, s)], [across(d, s)],
                 lambda vgs, vds: [(channel(vgs, vds) if vds.real >= 0 else -channel(vgs - vds, -vds), 0)])

    def photocell(self, at, p):
        led = self.junction(p, p.get("saturation_current", 1e-18), p.get("ideality", 2), scaled=False)
        dark, g, gamma = p.get("dark_conductance", 1e-8), p["sensitivity"], p.get("gamma", 1)
        state = self.unknown("conductance", dark)
        self.between(at["anode"], at["cathode"], lambda v: (led(v), 0))

        def rate(v, conductance):
            light = led(v)
            lit = g * light**gamma if light.real > 0 else 0
            return conductance - dark - lit, p["lag"] * conductance

        self.equation(state, [across(at["anode"], at["cathode"]), {state: 1}], rate)
        cell = across(at["a"], at["b"])
        self.law([cell, {state: 1}], [cell], lambda v, conductance: [(conductance * v, 0)])

    def multiplier(self, at, p):
        self.forced(at["out"], [{at["x"]: 1}, {at["y"]: 1}], lambda x, y: p["scale"] * x * y)

    def servo(self, at, p):
        half, high, low = p["setpoint"] ** 2 / 2, p.get("control_high", 10), p.get("control_low", -10)
        m, vc = self.unknown("mean square", 0.0), self.unknown("control state", high)
        self.equation(m, [{at["sense"]: 1}, {m: 1}], lambda v, ms: (ms - v * v, p["detector_lag"] * ms))
        self.equation(vc, [{m: 1}, {vc: 1}], lambda ms, c: (
            -p["rate"] * (half - ms - half * (limited_exp((c - high) / 0.05) - limited_exp((low - c) / 0.05))), c))
        self.forced(at["control"], [{m: 1}, {vc: 1}],
                    lambda ms, c: c + p.get("bias", 0) + p.get("proportional", 0) * (half - ms))

    def opamp(self, at, p):
        plus, minus, out = at["plus"], at["minus"], at["out"]
        if p.get("model", "ideal") == "ideal":
            j = self.branch(out, None)
            self.equation(j, [across(plus, minus)], lambda v: (v, 0))
            return
        self.opamp_inputs(plus, minus, p)
        v2 = vg = self.opamp_gain(plus, minus, p)
        if "second_pole" in p:
            v2 = self.unknown("second state", 0.0)
            w2 = 2 * math.pi * p["second_pole"]
            self.equation(v2, [{vg: 1}, {v2: 1}], lambda v, y: (-w2 * (v - y), y))
        j = self.branch(out, None)
        o2, o3, r = p.get("output_2", 0), p.get("output_3", 0), p.get("output_resistance", 0)
        self.equation(j, [{out: 1}, {v2: 1}, {j: 1}], lambda v, y, i: (v - (y + o2 * y**2 + o3 * y**3) - r * i, 0))

    def opamp_inputs(self, plus, minus, p):
        if "input_resistance" in p:
            self.between(plus, minus, lambda v: (v / p["input_resistance"], 0))
        if "input_capacitance" in p:
            self.between(plus, minus, lambda v: (0, p["input_capacitance"] * v))
        cg, k, bias = p.get("input_ground_capacitance", 0), p.get("input_ground_coefficient", 0), p.get("input_bias", 0)
        for terminal in (plus, minus):
            self.between(terminal, None, lambda v: (bias, cg * (v + k * v * v / 2)))

    def opamp_gain(self, plus, minus, p):
        a0, c1, c2, c3 = (p.get(k, d) for k, d in (("dc_gain", 1e5), ("common_mode_1", 0), ("common_mode_2", 0),
                                                   ("common_mode_3", 0)))

        def difference(vp, vm):
            cm = (vp + vm) / 2
            return vp - vm + p.get("offset", 0) + c1 * cm + c2 * cm**2 + c3 * cm**3

        vg = self.unknown("gain state", 0.0)
        if "gbw" not in p:
            self.equation(vg, [{plus: 1}, {minus: 1}, {vg: 1}], lambda vp, vm, v: (v - a0 * difference(vp, vm), 0))
            return vg
        w, slew = 2 * math.pi * p["gbw"], p.get("slew_rate")
        s = slew or w  # the clamp of an op-amp without slew limit uses w·1 V

        def rate(vp, vm, v):
            drive = w * difference(vp, vm)
            speed = slew * cmath.tanh(drive / slew) if slew else drive
            clamp = (limited_exp((v - p["swing_high"]) / 0.05) if "swing_high" in p else 0) - (
                limited_exp((p["swing_low"] - v) / 0.05) if "swing_low" in p else 0)
            return -(speed - w / a0 * v - s * clamp), v

        self.equation(vg, [{plus: 1}, {minus: 1}, {vg: 1}], rate)
        return vg
