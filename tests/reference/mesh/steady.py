"""The periodic state of a supply by SciPy's DOP853 between located events and Newton's method on the map of one cycle, and its
figures by Gauss-Legendre quadrature on the integrator's own steps. After the run every condition of every pattern is looked at
on all quadrature nodes, so that an event that was stepped over is an error and not a wrong figure."""

from math import sqrt

import numpy as np
from scipy.integrate import solve_ivp
from scipy.optimize import minimize_scalar

from model import Circuit

RTOL, ATOL = 1e-12, 1e-14
STEPS = 200
NODES, WEIGHTS = np.polynomial.legendre.leggauss(8)


class Stretch:
    """One pattern's part of the cycle."""

    def __init__(self, pattern, knots, dense):
        self.pattern, self.knots, self.dense = pattern, knots, dense


class Run:
    def __init__(self, circuit):
        self.c = circuit
        self.patterns = list(circuit.patterns())
        self.crest = sqrt(2) * circuit.volts * circuit.ratio

    def choose(self, t, w, u):
        """The pattern that can follow: it keeps every flux, and a short step into it breaks none of its conditions."""
        best, step = None, 1e-8 * self.c.period
        flux = np.max(np.abs(self.c.L), initial=0.0) * max(1.0, np.max(np.abs(w), initial=0.0))
        for pattern in self.patterns:
            x, jump = pattern.enter(w, u)
            if jump > 1e-9 * flux:
                continue
            k1 = pattern.derivative(t, x)
            k2 = pattern.derivative(t + step / 2, x + step / 2 * k1)
            k3 = pattern.derivative(t + step, x + step * (2 * k2 - k1))
            ahead = x + step / 6 * (k1 + 4 * k2 + k3)
            worst = float(np.min(pattern.guard(t + step, ahead), initial=np.inf))
            if best is None or worst > best[0]:
                best = (worst, pattern, x)
        if best is None or best[0] < -1e-7 * self.crest:
            # A bank without ESR under a load that holds its rail at zero has no determined currents: that is not modelled.
            raise RuntimeError(f"no pattern follows at {t}: the best breaks a condition by {best and best[0]}")
        return best[1], best[2]

    def march(self, t, end, pattern, x, keep=None):
        """From t to the end, through every event."""
        for _ in range(400):
            if end - t <= 1e-15 * self.c.period:
                return pattern, x
            events = []
            for k in range(len(pattern.Gb)):
                def event(t, x, k=k, pattern=pattern):
                    return pattern.Gx[k] @ x + pattern.Gb[k] + pattern.Ge[k] * self.c.line_voltage(t)
                event.terminal, event.direction = True, -1
                events.append(event)
            if len(x):
                run = solve_ivp(pattern.derivative, (t, end), x, method="DOP853", rtol=RTOL, atol=ATOL,
                                max_step=self.c.period / STEPS, events=events, dense_output=True)
                if run.status < 0:
                    raise RuntimeError(run.message)
                knots, dense, reached, x = run.t, run.sol, run.t[-1], run.y[:, -1]
            else:
                knots, dense, reached = self.without_states(pattern, t, end)
            if keep is not None and reached > t:
                keep.append(Stretch(pattern, knots, dense))
            if reached >= end:
                return pattern, x
            t = reached
            w = pattern.currents(t, x)
            pattern, x = self.choose(t, w, x[pattern.states:])
        raise RuntimeError("too many events in one cycle")

    def without_states(self, pattern, t, end):
        """A pattern without inductors and capacitors only needs its end located: integrate a dummy state with the events."""
        empty = np.zeros(0)
        events = []
        for k in range(len(pattern.Gb)):
            def event(t, _, k=k):
                return pattern.guard(t, empty)[k]
            event.terminal, event.direction = True, -1
            events.append(event)
        run = solve_ivp(lambda t, y: [1.0], (t, end), [0.0], method="DOP853", rtol=RTOL, atol=ATOL,
                        max_step=self.c.period / STEPS, events=events)
        return run.t, lambda t: np.zeros((0, np.size(t))), run.t[-1]

    def initial(self):
        """Banks near the crest and no currents; behind a choke banks near the mean, and the load's current in the choke."""
        c, w = self.c, np.zeros(len(self.c.loops))
        choke = bool(c.series) and c.series[0][1] > 0
        u = max(0.05 * self.crest, (0.6 if choke else 0.85) * self.crest - c.in_path * c.threshold)
        if choke:
            load = c.pieces[0]
            w[c.loops.index("p")] = load.current if load.current is not None else u / load.ohms
        return w, np.full(len(c.banks), u)

    def steady(self, marches=6):
        c, T = self.c, self.c.period
        t = 0.01 * T
        pattern, x = self.choose(t, *self.initial())
        for _ in range(marches):
            kept = []
            pattern, x = self.march(t, t + T, pattern, x, kept)
        # Begin in the middle of the longest stretch, away from every event.
        longest = max(kept, key=lambda s: s.knots[-1] - s.knots[0])
        home, middle = longest.pattern, 0.5 * (longest.knots[0] + longest.knots[-1])
        x = longest.dense(middle)
        x = x[:, 0] if np.ndim(x) > 1 else x
        t = middle - T

        def after(x):
            pattern, reached = self.march(t, t + T, home, x)
            return home.enter(pattern.currents(t + T, reached), reached[pattern.states:])[0]

        scale = np.maximum(np.abs(x), 1e-3 * np.max(np.abs(x), initial=1.0))
        residual = 0.0
        for iteration in range(40):
            reached = after(x)
            residual = float(np.max(np.abs(reached - x) / scale, initial=0.0))
            if residual < 2e-12 or len(x) == 0:
                break
            jacobian = np.zeros((len(x), len(x)))
            for k in range(len(x)):
                moved = x.copy()
                moved[k] += 3e-6 * scale[k]
                jacobian[:, k] = (after(moved) - reached) / (3e-6 * scale[k])
            move = np.linalg.solve(np.eye(len(x)) - jacobian, reached - x)
            if residual < 1e-10 and iteration > 25:
                break
            # The best point of a damped step, far from the solution.
            factor = 1.0
            while factor > 0.05:
                try:
                    if residual < 1e-6 or np.max(np.abs(after(x + factor * move) - x - factor * move) / scale) < residual:
                        break
                except RuntimeError:
                    pass
                factor *= 0.5
            x = x + factor * move
        if residual > 1e-10:
            raise RuntimeError(f"no periodic state: residual {residual}")
        kept = []
        self.march(t, t + T, home, x, kept)
        return kept, residual


class Waves:
    """Every signal on the quadrature nodes of one cycle, and anywhere within a stretch."""

    def __init__(self, circuit, stretches):
        self.c, self.stretches = circuit, stretches
        t, weight, parts = [], [], []
        for s in stretches:
            a, b = s.knots[:-1, None], s.knots[1:, None]
            nodes = (0.5 * (b - a) * NODES + 0.5 * (a + b)).ravel()
            t.append(nodes)
            weight.append((0.5 * (b - a) * WEIGHTS).ravel())
            parts.append(self.signals(s, nodes))
            low = float(np.min(s.pattern.Gx @ s.dense(nodes) + s.pattern.Gb[:, None] + np.outer(s.pattern.Ge, circuit.line_voltage(nodes)), initial=0.0))
            if low < -1e-9 * sqrt(2) * circuit.volts * circuit.ratio:
                raise RuntimeError(f"an event was stepped over: {low}")
        self.t, self.weight = np.concatenate(t), np.concatenate(weight)
        self.values = {name: np.concatenate([p[name] for p in parts]) for name in parts[0]}

    def signals(self, stretch, t):
        c, p = self.c, stretch.pattern
        x, e = stretch.dense(t), c.line_voltage(t)
        w = p.Wx @ x + p.Wb[:, None] + np.outer(p.We, e)
        excess = p.Ex @ x + p.Eb[:, None] + np.outer(p.Ee, e)
        u = x[p.states:]
        out = {"source": e, "line": c.ratio * (c.k_line @ w), "load": c.k_load @ w}
        for name in c.polarities:
            k = c.loops.index(name)
            flows = p.on[c.polarities.index(name)]
            out[f"diode {name}"] = w[k]
            out[f"on {name}"] = np.full(len(t), float(flows))
            # The loop's excess has the thresholds taken off; diodes in series share what blocks.
            out[f"reverse {name}"] = np.zeros(len(t)) if flows else -(excess[k] / c.in_path + c.threshold)
        for k, vector in enumerate(c.k_halves or [c.k_winding]):
            out[f"winding {k}"] = vector @ w
        for k, vector in enumerate(c.k_bank):
            out[f"bank {k}"] = vector @ w
            out[f"terminals {k}"] = u[k] + c.esr[k] * (vector @ w)
        for k in range(len(c.series)):
            out[f"series {k}"] = c.k_series[k] @ w
        if c.ohms["core"] > 0:
            out["core"] = c.ratio * w[c.loops.index("c")]
        ohms = p.piece.ohms if not c.banks else None
        out["rail"] = ohms * out["load"] if ohms is not None else out[f"terminals {len(c.banks) - 1}"]
        return out

    def mean(self, values):
        return float(self.weight @ values) / self.c.period

    def rms(self, name):
        return sqrt(self.mean(self.values[name] ** 2))

    def top(self, name, sign=1.0):
        """The greatest value of sign·signal: knots and nodes of every stretch, then refined between the neighbours of the best."""
        best = -np.inf
        for s in self.stretches:
            a, b = s.knots[:-1, None], s.knots[1:, None]
            grid = np.concatenate([(a + (b - a) * np.array([0.0, 0.25, 0.5, 0.75])).ravel(), s.knots[-1:]])
            values = sign * self.signals(s, grid)[name]
            k = int(np.argmax(values))
            best = max(best, float(values[k]))
            low, high = grid[max(k - 1, 0)], grid[min(k + 1, len(grid) - 1)]
            if high > low and values[k] > best - 1e-3 * abs(best):
                found = minimize_scalar(lambda t: -sign * float(self.signals(s, np.array([t]))[name][0]), bounds=(low, high),
                                        method="bounded", options={"xatol": 1e-8 * (high - low)})
                best = max(best, -float(found.fun))
        return best

    def peak(self, name):
        return max(self.top(name), self.top(name, -1.0))

    def phasor(self, name, order):
        angle = order * self.c.omega * self.t
        v = self.values[name]
        return 2.0 * (self.mean(v * np.cos(angle)) - 1j * self.mean(v * np.sin(angle)))


def diode_figures(c, q, name):
    mean, rms = q.mean(q.values[f"diode {name}"]), q.rms(f"diode {name}")
    return {"current_mean": mean, "current_rms": rms, "current_peak": q.top(f"diode {name}"),
            "reverse_voltage_peak": max(0.0, q.top(f"reverse {name}")), "conduction_angle": 360.0 * q.mean(q.values[f"on {name}"]),
            "loss": c.threshold * mean + c.slope * rms**2}


def line_figures(q):
    v = q.values
    rms, dc = q.rms("line"), q.mean(v["line"])
    harmonics = [abs(q.phasor("line", k)) / sqrt(2) for k in range(1, 41)]
    active, apparent = q.mean(v["source"] * v["line"]), q.rms("source") * rms
    turn = q.phasor("line", 1) * np.conj(q.phasor("source", 1))
    return {"current_rms": rms, "current_peak": q.peak("line"), "active_power": active, "apparent_power": apparent,
            "power_factor": active / apparent, "displacement_factor": float(turn.real / abs(turn)),
            "thd": sqrt(max(0.0, rms**2 - dc**2 - harmonics[0] ** 2)) / harmonics[0], "harmonics": harmonics}


def happenings(circuit, stretches):
    """What happens in the cycle: both polarities at once (overlap), none (gap), and how many pieces of the load are visited."""
    on = [sum(s.pattern.on) for s in stretches]
    return {"overlap": max(on) == 2, "gap": min(on) == 0, "load pieces": len({circuit.pieces.index(s.pattern.piece) for s in stretches})}


def figures(supply):
    """All figures of the operating point, in the shape of the contract's answer under `figures`, the residual of the period, and
    what happens in the cycle."""
    c = Circuit(supply)
    stretches, residual = Run(c).steady()
    q = Waves(c, stretches)
    v = q.values
    crest, valley, mean = q.top("rail"), -q.top("rail", -1.0), q.mean(v["rail"])
    power = q.mean(v["rail"] * v["load"])
    rail = {"voltage": {"mean": mean, "valley": valley, "crest": crest, "ripple_pp": crest - valley,
                        "ripple_rms": sqrt(max(0.0, q.mean((v["rail"] - mean) ** 2)))},
            "current": {"mean": q.mean(v["load"]), "rms": q.rms("load")}, "power": power}
    # In a bridge D1 and D4 carry one polarity, D2 and D3 the other; the contract fixes no order.
    order = {"half-wave": "p", "centre-tap": "pq", "bridge": "pqqp"}[c.kind]
    each = {name: diode_figures(c, q, name) for name in c.polarities}
    diodes = [dict(each[name]) for name in order]
    capacitors = [{"voltage_peak": q.peak(f"terminals {k}"), "ripple_current_rms": q.rms(f"bank {k}"), "loss": esr * q.rms(f"bank {k}") ** 2}
                  for k, esr in enumerate(c.esr)]
    chokes = [{"current_mean": q.mean(v[f"series {k}"]), "current_rms": q.rms(f"series {k}"), "current_peak": q.peak(f"series {k}")}
              for k, (_, henries) in enumerate(c.series) if henries > 0]
    copper = sum(c.ohms["winding"] * q.rms(f"winding {k}") ** 2 for k in range(len(c.k_halves)))
    line = line_figures(q)
    core = c.ohms["core"] * q.rms("core") ** 2 if c.ohms["core"] > 0 else 0.0
    losses = {"line": c.ohms["line"] * line["current_rms"] ** 2, "transformer": c.ohms["primary"] * line["current_rms"] ** 2 + copper + core,
              "rectifiers": sum(d["loss"] for d in diodes), "capacitors": sum(k["loss"] for k in capacitors),
              "filters": sum(ohms * q.rms(f"series {k}") ** 2 for k, (ohms, _) in enumerate(c.series))}
    losses["total"] = sum(losses.values())
    winding = {"current_rms": q.rms("winding 0"), "current_peak": q.peak("winding 0"), "copper_loss": copper}
    return {"outputs": [{"rails": [rail], "diodes": diodes, "capacitors": capacitors, "chokes": chokes, "winding": winding}],
            "line": line, "losses": losses, "efficiency": power / line["active_power"]}, residual, happenings(c, stretches)
