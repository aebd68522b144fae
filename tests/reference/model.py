"""An independent model of single-output supplies: state equations written by hand for each way of conducting, integrated by
SciPy's DOP853 between located events, the periodic state by Newton's method with finite differences, figures by Gauss-Legendre
quadrature on the integrator's dense output. Nothing of it is shared with the service."""

import re
from math import cos, pi, radians, sin, sqrt

import numpy as np
from scipy.integrate import solve_ivp
from scipy.optimize import minimize_scalar

PREFIX = {"": 1.0, "p": 1e-12, "n": 1e-9, "u": 1e-6, "m": 1e-3, "k": 1e3, "M": 1e6}
RTOL, ATOL = 1e-12, 1e-13
NODES, WEIGHTS = np.polynomial.legendre.leggauss(10)


def quantity(text, default=0.0):
    if text is None:
        return default
    number, prefix, unit = re.fullmatch(r"([-+0-9.eE]+) ?([pnumkM]?)(V|A|W|ohm|H|F|Hz|%|deg)", text).groups()
    return float(number) * PREFIX[prefix] * (0.01 if unit == "%" else 1.0)


class Circuit:
    """One supply in plain numbers, everything on the secondary side."""

    def __init__(self, supply):
        line = supply["line"]
        self.volts, self.hertz = quantity(line["voltage"]), quantity(line["frequency"])
        self.period, self.omega = 1 / self.hertz, 2 * pi * self.hertz
        self.line_r, line_l = quantity(line.get("resistance")), quantity(line.get("inductance"))
        self.harmonics = [(h["order"], quantity(h["fraction"]), radians(quantity(h.get("phase")))) for h in line.get("harmonics", [])]
        transformer = supply.get("transformer")
        self.ratio, self.primary_r, self.winding_r, self.winding_l, primary_l = 1.0, 0.0, 0.0, 0.0, 0.0
        if transformer:
            winding = transformer["windings"][0]
            self.ratio = quantity(winding["open_circuit_voltage"]) / quantity(transformer["primary_voltage"])
            self.primary_r = quantity(transformer["primary_resistance"])
            primary_l = quantity(transformer.get("primary_leakage_inductance"))
            self.winding_r, self.winding_l = quantity(winding["resistance"]), quantity(winding.get("leakage_inductance"))
        self.has_winding = transformer is not None
        output = supply["outputs"][0]
        self.kind = output["rectifier"]["circuit"]
        diode = output["rectifier"]["diode"]
        self.vto, self.rt = quantity(diode["threshold_voltage"]), quantity(diode["slope_resistance"])
        self.in_path = 2 if self.kind == "bridge" else 1
        n = self.ratio
        self.r = n * n * (self.line_r + self.primary_r) + self.winding_r + self.in_path * self.rt
        self.l = n * n * (line_l + primary_l) + self.winding_l
        rail = output["rails"][0]
        self.sections = []
        for section in rail.get("filter", []):
            series, bank = section.get("series", {}), section["capacitor"]
            count = bank.get("count", 1)
            self.sections.append((quantity(series.get("resistance")), quantity(series.get("inductance")),
                                  quantity(bank["capacitance"]) * count, quantity(bank["esr"]) / count))
        self.choke_input = bool(self.sections) and self.sections[0][1] > 0
        load = rail["load"]
        self.load = load["kind"]
        self.load_r, self.load_i = quantity(load.get("resistance")), quantity(load.get("current"))
        if self.load == "regulator":
            self.out_v, self.out_i = quantity(load["output_voltage"]), quantity(load["output_current"])
            self.dropout, self.quiescent = quantity(load["dropout"]), quantity(load.get("quiescent_current"))

    def line_voltage(self, t):
        value = np.sin(self.omega * t)
        for order, fraction, phase in self.harmonics:
            value = value + fraction * np.sin(order * self.omega * t + phase)
        return sqrt(2) * self.volts * value

    def source(self, t):
        return self.ratio * self.line_voltage(t)

    def last_bus(self, vc, esr, i_in):
        """Voltage and load current of the bus with the load: v + esr * load(v) = vc + esr * i_in."""
        drive = vc + esr * i_in
        if self.load == "resistance":
            v = drive * self.load_r / (self.load_r + esr)
            return v, v / self.load_r
        if self.load == "current":
            return drive - esr * self.load_i, self.load_i + 0 * drive
        full = drive - esr * (self.quiescent + self.out_i)
        conductance = self.out_i / self.out_v
        dropped = (drive - esr * (self.quiescent - self.dropout * conductance)) / (1 + esr * conductance)
        v = np.where(full >= self.out_v + self.dropout, full, dropped)
        return v, self.quiescent + np.minimum(self.out_i, np.maximum(0, (v - self.dropout) * conductance))


class State:
    """Which components of the state vector there are: source current, first voltage, second current, second voltage."""

    def __init__(self, c):
        self.names = (["i"] if c.l > 0 or c.choke_input else []) + (["v1"] if c.sections else [])
        if len(c.sections) == 2:
            self.names += (["i2"] if c.sections[1][1] > 0 else []) + ["v2"]

    def get(self, y, name, default=0.0):
        return y[self.names.index(name)] if name in self.names else default


def second(c, s, y, i, parts):
    """Current out of the first bus, and the last bus, of a filter behind the source current i."""
    if not c.sections:
        v, load = i * c.load_r, i
        return dict(out=i, bus=v, v=v, load=load)
    _, _, _, e1 = parts[0]
    v1 = s.get(y, "v1")
    if len(parts) == 1:
        v, load = c.last_bus(v1, e1, i)
        return dict(out=load, bus=v, v=v, load=load)
    r2, l2, _, e2 = parts[1]
    v2 = s.get(y, "v2")
    if l2 > 0:
        i2 = s.get(y, "i2")
    elif c.load == "resistance":
        k = c.load_r / (c.load_r + e2)
        i2 = (v1 + e1 * i - v2 * k) / (r2 + e1 + e2 * k)
    else:
        i2 = (v1 + e1 * i - v2 + e2 * c.load_i) / (r2 + e1 + e2)
    v, load = c.last_bus(v2, e2, i2)
    return dict(out=i2, bus=v1 + e1 * (i - i2), v=v, load=load)


def current(c, s, t, y, sign):
    """Source current while it conducts with a polarity."""
    if "i" in s.names:
        return s.get(y, "i")
    drive = sign * c.source(t) - c.in_path * c.vto
    if not c.sections:
        return drive / (c.r + c.load_r)
    e1, v1 = c.sections[0][3], s.get(y, "v1")
    if len(c.sections) == 1 and c.load == "resistance":
        k = c.load_r / (c.load_r + e1)
        return (drive - v1 * k) / (c.r + e1 * k)
    if len(c.sections) == 1 and c.load == "current":
        return (drive - v1 + e1 * c.load_i) / (c.r + e1)
    if len(c.sections) == 2 and c.sections[1][1] > 0:
        return (drive - v1 + e1 * s.get(y, "i2")) / (c.r + e1)
    raise ValueError("this combination has no closed form here")


def rectified(c, t, i):
    """Voltage behind a bridge that feeds a choke: the diodes of both halves conduct while the line cannot carry the current."""
    r_line = c.r - 2 * c.rt
    return -2 * c.vto - c.rt * i + np.maximum(0, np.abs(c.source(t)) - (r_line + c.rt) * i)


def derivative(c, s, t, y, sign):
    i = current(c, s, t, y, sign) if sign else 0.0 * np.asarray(t)
    bus = second(c, s, y, i, c.sections)
    out = []
    for name in s.names:
        if name == "i":
            if not sign:
                out.append(0.0)
            elif c.choke_input:
                out.append((rectified(c, t, i) - c.sections[0][0] * i - bus["bus"]) / c.sections[0][1])
            else:
                out.append((sign * c.source(t) - c.in_path * c.vto - c.r * i - bus["bus"]) / c.l)
        elif name == "v1":
            out.append((i - bus["out"]) / c.sections[0][2])
        elif name == "i2":
            r2, l2, _, _ = c.sections[1]
            out.append((bus["bus"] - r2 * s.get(y, "i2") - bus["v"]) / l2)
        else:
            out.append((bus["out"] - bus["load"]) / c.sections[1][2])
    return out


def forward(c, s, t, y, sign):
    """Forward voltage left over for conduction with a polarity, while nothing conducts."""
    bus = second(c, s, y, 0.0, c.sections)["bus"]
    drive = abs(c.source(t)) if c.choke_input else sign * c.source(t)
    return drive - c.in_path * c.vto - bus


def polarities(c):
    return [1] if c.kind == "half-wave" or c.choke_input else [1, -1]


def cycle(c, s, start, y, keep=False):
    """One line cycle from the state y with nothing conducting, or the choke's current flowing; the stretches if they are kept."""
    t, end, stretches = start, start + c.period, []
    sign = 1 if c.choke_input and y[0] > 0 else 0
    y = np.array(y, dtype=float)
    guard = 0
    while t < end - 1e-15 * c.period and guard < 60:
        guard += 1
        if sign:
            def stop(t, y, sign=sign):
                return current(c, s, t, y, sign)
            stop.terminal, stop.direction = True, -1
            events = [stop]
            if c.choke_input:
                def kink(t, y):
                    return abs(c.source(t)) - (c.r - c.rt) * y[0]
                def zero(t, y):
                    return c.source(t)
                kink.terminal = zero.terminal = True
                events += [kink, zero]
        else:
            events = []
            for polarity in polarities(c):
                def begin(t, y, polarity=polarity):
                    return forward(c, s, t, y, polarity)
                begin.terminal, begin.direction = True, 1
                events.append(begin)
            ready = [p for p in polarities(c) if forward(c, s, t, y, p) > 1e-11 * c.volts]
            if ready:
                sign = ready[0]
                continue
        if s.names:
            solution = solve_ivp(lambda t, y: derivative(c, s, t, y, sign), (t, end), y, method="DOP853", rtol=RTOL, atol=ATOL,
                                 max_step=c.period / 150, events=events, dense_output=True)
            reached, at = solution.t[-1], solution.y[:, -1]
            # Right after an event the same function may be zero again: step over it.
            if reached - t < 1e-12 * c.period:
                step = 1e-7 * c.period
                solution = solve_ivp(lambda t, y: derivative(c, s, t, y, sign), (t, min(end, t + step)), y, method="DOP853",
                                     rtol=RTOL, atol=ATOL, dense_output=True)
                reached, at = solution.t[-1], solution.y[:, -1]
                hit = None
            else:
                hit = next((k for k, times in enumerate(solution.t_events) if len(times)), None)
            knots, sol = solution.t, solution.sol
        else:
            raise ValueError("a circuit without states is not integrated here")
        if keep:
            stretches.append((knots, sol, sign))
        t, y = reached, np.array(at)
        if hit is None:
            continue
        if sign and hit == 0:
            sign = 0
            if "i" in s.names:
                y[0] = 0.0
        elif not sign:
            sign = polarities(c)[hit]
    return y, stretches


def steady(c):
    s = State(c)
    start = -0.03 * c.period
    crest = sqrt(2) * c.volts * c.ratio - c.in_path * c.vto
    guess = {"i": 0.0, "v1": 0.9 * crest, "i2": 0.0, "v2": 0.9 * crest}
    if c.choke_input:
        guess.update(v1=0.6 * crest, i=0.6 * crest / (c.load_r or crest / max(c.load_i, 1e-9)))
    y = np.array([guess[name] for name in s.names])
    # Source current is nothing at the start, but for a choke's.
    free = [k for k, name in enumerate(s.names) if name != "i" or c.choke_input]
    for _ in range(8):
        y, _ = cycle(c, s, start, y)
    for _ in range(25 if free else 0):
        end, _ = cycle(c, s, start, y)
        change = (end - y)[free]
        if np.max(np.abs(change)) < 3e-12 * crest:
            break
        jacobian = np.zeros((len(free), len(free)))
        for column, k in enumerate(free):
            moved, width = y.copy(), 1e-5 * crest
            moved[k] += width
            jacobian[:, column] = (cycle(c, s, start, moved)[0] - end)[free] / width
        step = np.linalg.solve(np.eye(len(free)) - jacobian, change)
        y[free] += step
        if c.choke_input:
            y[0] = max(y[0], 0.0)
    return s, y, start, cycle(c, s, start, y, keep=True)[1]


class Samples:
    """Every signal at the quadrature nodes of one cycle."""

    def __init__(self, c, s, stretches):
        times, weights, states, signs = [], [], [], []
        for knots, sol, sign in stretches:
            for a, b in zip(knots[:-1], knots[1:]):
                t = 0.5 * (b - a) * NODES + 0.5 * (a + b)
                times.append(t)
                weights.append(0.5 * (b - a) * WEIGHTS)
                states.append(sol(t))
                signs.append(np.full(len(t), sign))
        self.t, self.w = np.concatenate(times), np.concatenate(weights)
        self.y, self.sign = np.concatenate(states, axis=1), np.concatenate(signs)
        self.c, self.s = c, s
        self.signals = signals(c, s, self.t, self.y, self.sign)

    def mean(self, values):
        return float(np.sum(self.w * values) / self.c.period)

    def rms(self, values):
        return sqrt(self.mean(values * values))


def signals(c, s, t, y, sign):
    on = sign != 0
    i = np.where(on, current(c, s, t, y, np.where(on, sign, 1)), 0.0)
    bus = second(c, s, y, i, c.sections)
    u = c.source(t)
    polarity = np.where(on, sign, 0)
    if c.choke_input:
        r_line = c.r - 2 * c.rt
        ac = np.clip(u / (r_line + c.rt), -i, i)
        halves = (0.5 * (i + ac), 0.5 * (i - ac))
        v_rect = np.where(on, rectified(c, t, i), bus["bus"])
    else:
        ac = polarity * i
        halves = (np.where(polarity > 0, i, 0.0), np.where(polarity < 0, i, 0.0))
        v_rect = bus["bus"]
    out = dict(i=i, ac=ac, one=halves[0], other=halves[1], v=bus["v"], load=bus["load"], line=c.ratio * ac, u_line=c.line_voltage(t))
    drop = c.vto + c.rt * i
    if c.kind == "half-wave":
        out["reverse"] = np.where(on, 0.0, v_rect - u)
    elif c.kind == "bridge":
        other = np.abs(out["other"])
        # A diode of one pair blocks while the other pair conducts; while nothing does, two in series share the voltage.
        blocked = on & (other == 0) if c.choke_input else polarity > 0
        out["reverse_other"] = np.where(on, np.where(blocked, v_rect + drop, 0.0), 0.5 * (v_rect + u))
        blocked = on & (np.abs(out["one"]) == 0) if c.choke_input else polarity < 0
        out["reverse_one"] = np.where(on, np.where(blocked, v_rect + drop, 0.0), 0.5 * (v_rect - u))
    else:
        rates = np.array([derivative(c, s, tt, y[:, k], ss)[0] if c.l > 0 and ss else 0.0 for k, (tt, ss) in enumerate(zip(t, sign))]) if np.ndim(t) else 0.0
        across = 2 * v_rect + c.vto + (c.rt + c.winding_r) * i + c.winding_l * rates
        out["reverse"] = np.where(on, across, v_rect + np.abs(u))
    for index, (_, _, _, _) in enumerate(c.sections):
        inflow = i if index == 0 else bus["out"]
        outflow = bus["out"] if index == 0 and len(c.sections) == 2 else bus["load"]
        out[f"c{index}"] = inflow - outflow
        vc = s.get(y, "v1" if index == 0 else "v2")
        out[f"vc{index}"] = vc + c.sections[index][3] * out[f"c{index}"]
    if "i2" in s.names:
        out["choke"] = s.get(y, "i2")
    if c.choke_input:
        out["choke"] = i
    if len(c.sections) == 2:
        out["series"] = bus["out"]
    return out


def extreme(c, s, stretches, name, sign):
    """The largest value of sign times a signal over the cycle: on a fine grid, then refined."""
    best = -np.inf
    for knots, sol, conducting in stretches:
        a, b = knots[0], knots[-1]
        grid = np.unique(np.concatenate([knots, np.linspace(a, b, 200)]))
        def value(t, sol=sol, conducting=conducting):
            t = np.atleast_1d(t)
            return sign * np.atleast_1d(signals(c, s, t, sol(t), np.full(len(t), conducting))[name] + 0 * t)
        values = value(grid)
        k = int(np.argmax(values))
        best = max(best, values[k])
        low, high = grid[max(k - 1, 0)], grid[min(k + 1, len(grid) - 1)]
        if high > low:
            found = minimize_scalar(lambda t: -value(t)[0], bounds=(low, high), method="bounded", options={"xatol": 1e-9 * (high - low)})
            best = max(best, -found.fun)
    return float(best)


def figures(supply):
    c = Circuit(supply)
    s, _, _, stretches = steady(c)
    q = Samples(c, s, stretches)
    x = q.signals
    top = lambda name: extreme(c, s, stretches, name, 1)
    peak = lambda name: max(top(name), extreme(c, s, stretches, name, -1))
    crest, valley = top("v"), -extreme(c, s, stretches, "v", -1)
    mean = q.mean(x["v"])
    power = q.mean(x["v"] * x["load"])
    rail = dict(voltage=dict(mean=mean, valley=valley, crest=crest, ripple_pp=crest - valley, ripple_rms=sqrt(max(0, q.mean((x["v"] - mean) ** 2)))),
                current=dict(mean=q.mean(x["load"]), rms=q.rms(x["load"])), power=power)

    def diode(name):
        flows = x[name] > (0 if not c.choke_input else 1e-12)
        angle = 360 * float(np.sum(q.w * flows)) / c.period
        return dict(current_mean=q.mean(x[name]), current_rms=q.rms(x[name]), current_peak=top(name), reverse_voltage_peak=top(f"reverse_{name}" if c.kind == "bridge" else "reverse"),
                    conduction_angle=angle, loss=c.vto * q.mean(x[name]) + c.rt * q.rms(x[name]) ** 2)

    names = {"half-wave": ["one"], "centre-tap": ["one", "other"], "bridge": ["one", "other", "other", "one"]}[c.kind]
    diodes = [diode(name) for name in names]
    capacitors = [dict(voltage_peak=peak(f"vc{k}"), ripple_current_rms=q.rms(x[f"c{k}"]), loss=esr * q.rms(x[f"c{k}"]) ** 2)
                  for k, (_, _, _, esr) in enumerate(c.sections)]
    chokes = [dict(current_mean=q.mean(x["choke"]), current_rms=q.rms(x["choke"]), current_peak=peak("choke"))] if "choke" in x else []
    winding = x["one"] if c.kind == "centre-tap" else x["ac"]
    parts = 2 if c.kind == "centre-tap" else 1
    copper = parts * c.winding_r * q.rms(winding) ** 2
    line = x["line"]
    coefficient = lambda values, k: 2 * (q.mean(values * np.cos(k * c.omega * q.t)) - 1j * q.mean(values * np.sin(k * c.omega * q.t)))
    harmonics = [abs(coefficient(line, k)) / sqrt(2) for k in range(1, 41)]
    rms, dc = q.rms(line), q.mean(line)
    active, apparent = q.mean(x["u_line"] * line), rms * q.rms(x["u_line"])
    angle = coefficient(line, 1) * np.conj(coefficient(x["u_line"], 1))
    losses = dict(line=c.line_r * rms**2, transformer=c.primary_r * rms**2 * c.has_winding + copper, rectifiers=sum(d["loss"] for d in diodes),
                  capacitors=sum(k["loss"] for k in capacitors), filters=0.0)
    if "series" in x:
        losses["filters"] = c.sections[1][0] * q.rms(x["series"]) ** 2
    if c.choke_input:
        losses["filters"] += c.sections[0][0] * q.rms(x["i"]) ** 2
    losses["total"] = sum(losses.values())
    return dict(outputs=[dict(rails=[rail], diodes=diodes, capacitors=capacitors, chokes=chokes,
                              winding=dict(current_rms=q.rms(winding), current_peak=peak("one" if c.kind == "centre-tap" else "ac"), copper_loss=copper))],
                line=dict(current_rms=rms, current_peak=peak("line"), active_power=active, apparent_power=apparent, power_factor=active / apparent,
                          displacement_factor=float(angle.real / abs(angle)), thd=sqrt(max(0, rms**2 - dc**2 - harmonics[0] ** 2)) / harmonics[0], harmonics=harmonics),
                losses=losses, efficiency=power / active)
