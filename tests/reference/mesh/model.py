"""A single-output supply as mesh currents and capacitor voltages, straight from its JSON.

Loops: c (core loss), p and q (the two polarities of the rectifier), s2, s3 … (series branches between filter banks), l (load).
Every branch has a vector k of loop coefficients, so that its current is k·w; resistances and inductances are then sums of
r k kᵀ and h k kᵀ, both symmetric. A bridge is the same network as a centre tap whose whole impedance is common to both
polarities and whose two diodes in series have twice the threshold and slope: opposite diodes carry equal currents, for the
winding floats. Everything of the line and the primary is referred to the secondary by the square of the turns ratio.

A pattern says which of p and q flow and on which straight piece of its characteristic the load sits. Within a pattern the
inductance matrix of the free loops may be singular: its null space holds algebraic currents, its range the states."""

import itertools
import re
from math import pi, radians, sqrt

import numpy as np

PREFIX = {"": 1.0, "p": 1e-12, "n": 1e-9, "u": 1e-6, "m": 1e-3, "k": 1e3, "M": 1e6}
FORM = re.compile(r"([-+]?[0-9.]+(?:[eE][-+]?[0-9]+)?) ?([pnumkM]?)(ohm|deg|Hz|V|A|W|H|F|%)")


def quantity(text, default=0.0):
    """A quantity of the contract in SI base units; percent as a fraction, degrees as degrees."""
    if text is None:
        return default
    match = FORM.fullmatch(text)
    if match is None:
        raise ValueError(f"not a plain quantity: {text!r}")
    number, prefix, unit = match.groups()
    return float(number) * PREFIX[prefix] * (0.01 if unit == "%" else 1.0)


class Piece:
    """A straight piece of a load's characteristic: a fixed current between two voltages, or volts = offset + ohms·current between
    two currents."""

    def __init__(self, low, high, current=None, ohms=0.0, offset=0.0):
        self.low, self.high, self.current, self.ohms, self.offset = low, high, current, ohms, offset


def load_pieces(load):
    kind, inf = load["kind"], np.inf
    if kind == "resistance":
        return [Piece(-inf, inf, ohms=quantity(load["resistance"]))]
    if kind == "current":
        amperes = quantity(load["current"])
        return [Piece(0.0, inf, current=amperes), Piece(0.0, amperes)]
    if kind == "regulator":
        volts, amperes = quantity(load["output_voltage"]), quantity(load["output_current"])
        dropout, quiescent = quantity(load["dropout"]), quantity(load.get("quiescent_current"))
        ohms = volts / amperes
        pieces = [Piece(dropout + volts, inf, current=quiescent + amperes),
                  Piece(quiescent, quiescent + amperes, ohms=ohms, offset=dropout - ohms * quiescent)]
        if quiescent > 0:
            return pieces + [Piece(0.0, dropout, current=quiescent), Piece(0.0, quiescent)]
        return pieces + [Piece(-inf, dropout, current=0.0)]
    raise ValueError(f"no model of a load of kind {kind}")


class Circuit:
    def __init__(self, supply):
        line, transformer, output = supply["line"], supply.get("transformer"), supply["outputs"][0]
        if line.get("phases", 1) != 1 or len(supply["outputs"]) != 1 or len(output["rails"]) != 1:
            raise ValueError("one phase, one output, one rail")
        self.volts, self.hertz = quantity(line["voltage"]), quantity(line["frequency"])
        self.period, self.omega = 1.0 / self.hertz, 2.0 * pi * self.hertz
        self.spectrum = [(1, 1.0, 0.0)] + [(h["order"], quantity(h["fraction"]), radians(quantity(h.get("phase"))))
                                          for h in line.get("harmonics", [])]
        rectifier = output["rectifier"]
        self.kind = rectifier["circuit"]
        self.threshold = quantity(rectifier["diode"]["threshold_voltage"])
        self.slope = quantity(rectifier["diode"]["slope_resistance"])
        self.in_path = {"half-wave": 1, "bridge": 2, "centre-tap": 1}[self.kind]
        self.polarities = ["p"] if self.kind == "half-wave" else ["p", "q"]
        self.ratio = 1.0
        if transformer:
            winding = transformer["windings"][output.get("winding", 0)]
            self.ratio = quantity(winding["open_circuit_voltage"]) / quantity(transformer["primary_voltage"])
        rail = output["rails"][0]
        self.pieces = load_pieces(rail["load"])
        self.banks, self.series = [], []
        for section in rail["filter"]:
            series, bank = section.get("series", {}), section["capacitor"]
            count = bank.get("count", 1)
            self.series.append((quantity(series.get("resistance")), quantity(series.get("inductance"))))
            self.banks.append((quantity(bank["capacitance"]) * count, quantity(bank.get("esr")) / count))
        if not self.banks and rail["load"]["kind"] != "resistance":
            raise ValueError("without a filter only a resistance is modelled")
        core = quantity(transformer.get("core_loss")) if transformer else 0.0
        self.loops = (["c"] if core > 0 else []) + self.polarities
        self.loops += [f"s{k + 2}" for k in range(len(self.banks) - 1)] + (["l"] if self.banks else [])
        self.branches(line, transformer, core, rail["load"])

    def vector(self, **coefficients):
        return np.array([float(coefficients.get(name, 0.0)) for name in self.loops])

    def branches(self, line, transformer, core, load):
        """Resistance, inductance, source and capacitor coefficients of the loops, and the branch vectors that figures need."""
        size, n2, m = len(self.loops), self.ratio**2, self.in_path
        self.R, self.L = np.zeros((size, size)), np.zeros((size, size))
        self.f = np.zeros(size)

        def place(vector, ohms, henries=0.0):
            self.R += ohms * np.outer(vector, vector)
            self.L += henries * np.outer(vector, vector)

        through_core = {"c": 1.0} if core > 0 else {}
        self.k_line = self.vector(p=1.0, q=-1.0, **through_core)
        self.k_winding = self.vector(p=1.0, q=-1.0)
        self.k_dc = self.vector(p=1.0, q=1.0)
        self.ohms = dict(line=quantity(line.get("resistance")), primary=0.0, winding=0.0, core=0.0)
        place(self.k_line, n2 * self.ohms["line"], n2 * quantity(line.get("inductance")))
        halves = []
        if transformer:
            winding = transformer["windings"][0]
            self.ohms["primary"] = quantity(transformer["primary_resistance"])
            self.ohms["winding"] = quantity(winding["resistance"])
            place(self.k_line, n2 * self.ohms["primary"], n2 * quantity(transformer.get("primary_leakage_inductance")))
            if core > 0:
                self.ohms["core"] = quantity(transformer["primary_voltage"]) ** 2 / core
                place(self.vector(c=1.0), n2 * self.ohms["core"])
            halves = [self.vector(p=1.0), self.vector(q=1.0)] if self.kind == "centre-tap" else [self.k_winding]
            for vector in halves:
                place(vector, self.ohms["winding"], quantity(winding.get("leakage_inductance")))
        self.k_halves = halves
        for name in self.polarities:
            place(self.vector(**{name: 1.0}), m * self.slope)
            self.f[self.loops.index(name)] = -m * self.threshold
        self.source = self.k_line * self.ratio
        self.k_series = [self.k_dc] + [self.vector(**{f"s{k + 2}": 1.0}) for k in range(len(self.banks) - 1)]
        self.k_load = self.vector(l=1.0) if self.banks else self.k_dc
        after = self.k_series[1:] + [self.k_load]
        self.k_bank = [into - out for into, out in zip(self.k_series, after)] if self.banks else []
        for vector, (ohms, henries) in zip(self.k_series, self.series):
            place(vector, ohms, henries)
        for vector, (_, esr) in zip(self.k_bank, self.banks):
            place(vector, esr)
        # A bank's voltage opposes the loop that charges it.
        self.B = -np.array(self.k_bank).T if self.banks else np.zeros((size, 0))
        self.capacitance = np.array([c for c, _ in self.banks])
        self.esr = [esr for _, esr in self.banks]
        if not self.banks:
            place(self.k_load, quantity(load["resistance"]))

    def line_voltage(self, t):
        return sqrt(2.0) * self.volts * sum(a * np.sin(k * self.omega * t + phi) for k, a, phi in self.spectrum)

    def patterns(self):
        for on in itertools.product((True, False), repeat=len(self.polarities)):
            for piece in range(len(self.pieces)):
                try:
                    yield Pattern(self, on, piece)
                except np.linalg.LinAlgError:
                    continue


class Pattern:
    """The linear equations of one way of conducting. The state x holds currents of the range of the inductance matrix, then the
    banks' voltages: x' = A x + b + g·line voltage; loop currents w = Wx x + Wb + We·line voltage."""

    def __init__(self, c, on, piece):
        self.c, self.on, self.piece = c, on, c.pieces[piece]
        size, caps = len(c.loops), len(c.banks)
        fixed = np.zeros(size)
        free = np.ones(size, dtype=bool)
        for name, flows in zip(c.polarities, on):
            free[c.loops.index(name)] = flows
        R, f = c.R.copy(), c.f.copy()
        if c.banks:
            load = c.loops.index("l")
            if self.piece.current is not None:
                free[load], fixed[load] = False, self.piece.current
            else:
                R[load, load] += self.piece.ohms
                f[load] -= self.piece.offset
        self.free = np.flatnonzero(free)
        F = self.free
        values, vectors = np.linalg.eigh(c.L[np.ix_(F, F)])
        moving = values > 1e-9 * np.max(np.append(np.abs(c.L), 1e-300))
        self.V, self.values = vectors[:, moving], values[moving]
        N = vectors[:, ~moving]
        self.states = self.V.shape[1]
        order = self.states + caps
        rhs_x = np.hstack([np.zeros((len(F), self.states)), c.B[F]])
        rhs_b = f[F] - R[F] @ fixed
        rhs_e = c.source[F]
        Wx, Wb, We = np.zeros((size, order)), fixed.copy(), np.zeros(size)
        Wx[F, :self.states] = self.V
        if N.shape[1]:
            K = N.T @ R[np.ix_(F, F)] @ N
            if np.linalg.cond(K) > 1e13:
                raise np.linalg.LinAlgError("currents of this pattern are not determined")
            solve = N @ np.linalg.solve(K, N.T)
            Wx[F] += solve @ (rhs_x - R[np.ix_(F, F)] @ np.hstack([self.V, np.zeros((len(F), caps))]))
            Wb[F] += solve @ rhs_b
            We[F] += solve @ rhs_e
        self.Wx, self.Wb, self.We = Wx, Wb, We
        # Range of the inductance: flux equations. Banks: charge.
        scale = self.V.T / self.values[:, None] if self.states else np.zeros((0, len(F)))
        RF = R[np.ix_(F, F)]
        charge = -(c.B.T / c.capacitance[:, None]) if caps else np.zeros((0, size))
        self.A = np.vstack([scale @ (rhs_x - RF @ Wx[F]), charge @ Wx])
        self.b = np.concatenate([scale @ (rhs_b - RF @ (Wb - fixed)[F]), charge @ Wb])
        self.g = np.concatenate([scale @ (rhs_e - RF @ We[F]), charge @ We])
        # Voltage left over in every loop, conducting or not: zero in the free ones.
        drop = c.L[:, F] @ self.V
        left = np.hstack([np.zeros((size, self.states)), c.B])
        self.Ex = left - R @ Wx - drop @ self.A[:self.states]
        self.Eb = f - R @ Wb - drop @ self.b[:self.states]
        self.Ee = c.source - R @ We - drop @ self.g[:self.states]
        self.guards()

    def guards(self):
        """Rows (x, constant, line voltage) of what must not be negative while the pattern lasts."""
        c, rows = self.c, []
        for name, flows in zip(c.polarities, self.on):
            k = c.loops.index(name)
            rows.append((self.Wx[k], self.Wb[k], self.We[k]) if flows else (-self.Ex[k], -self.Eb[k], -self.Ee[k]))
        if c.banks:
            k, p = c.loops.index("l"), self.piece
            row = (self.Ex[k], self.Eb[k], self.Ee[k]) if p.current is not None else (self.Wx[k], self.Wb[k], self.We[k])
            if np.isfinite(p.low):
                rows.append((row[0], row[1] - p.low, row[2]))
            if np.isfinite(p.high):
                rows.append((-row[0], p.high - row[1], -row[2]))
        self.Gx, self.Gb, self.Ge = (np.array([r[k] for r in rows]) for k in range(3))

    def derivative(self, t, x):
        return self.A @ x + self.b + self.g * self.c.line_voltage(t)

    def guard(self, t, x):
        return self.Gx @ x + self.Gb + self.Ge * self.c.line_voltage(t)

    def currents(self, t, x):
        return self.Wx @ x + self.Wb + self.We * self.c.line_voltage(t)

    def enter(self, w, u):
        """The state of this pattern with the flux linkages of the loop currents w and the bank voltages u, and the jump of flux
        that entering it would force elsewhere (nothing, for a pattern that can follow)."""
        c = self.c
        fixed = np.where(np.isin(np.arange(len(w)), self.free), 0.0, self.Wb)
        y = (self.V.T @ (c.L[self.free] @ (w - fixed))) / self.values if self.states else np.zeros(0)
        x = np.concatenate([y, u])
        inside = fixed.copy()
        inside[self.free] += self.V @ y
        return x, float(np.max(np.abs(c.L @ (inside - w)), initial=0.0))
