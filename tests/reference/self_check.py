"""The reference model itself against published values, so that it cannot be wrong in the same way as what it checks."""

import sys
from math import pi, sqrt

from model import figures


def bridge(rms, hertz, ohms, henries, farads, load):
    line = {"voltage": f"{rms!r} V", "frequency": f"{hertz!r} Hz", "resistance": f"{ohms!r} ohm", "inductance": f"{henries!r} H"}
    return {"line": line, "outputs": [{"rectifier": {"circuit": "bridge", "diode": {"threshold_voltage": "0 V", "slope_resistance": "0 ohm"}},
            "rails": [{"filter": [{"capacitor": {"capacitance": f"{farads!r} F", "esr": "0 ohm"}}], "load": {"kind": "resistance", "resistance": f"{load!r} ohm"}}]}]}


def main():
    failed = 0

    def check(source, found, expected, digit):
        nonlocal failed
        ok = abs(found - expected) <= 0.6 * digit
        failed += not ok
        print(f"{'ok  ' if ok else 'FAIL'} {source}: {found:.8g} for {expected}")

    # Full-wave with capacitor, k = 100 and 10, r = 1 %: Schade's cases, recomputed by two methods to six digits.
    for k, dc, ripple in ((100.0, 0.936842, 0.748715), (10.0, 0.886090, 7.13748)):
        f = figures(bridge(1 / sqrt(2), 1 / (2 * pi), 0.01, 0.0, k, 1.0))
        v = f["outputs"][0]["rails"][0]["voltage"]
        check(f"Schade 1943, full-wave, k={k:g}, r=1 %: mean", v["mean"], dc, 1e-6)
        check("  ripple in percent", 100 * v["ripple_rms"] / v["mean"], ripple, 1e-5)
    # Bridge behind R and L: 230 V, reference impedance of IEC TR 60725, 470 uF, 500 ohm.
    f = figures(bridge(230.0, 50.0, 0.4, 0.795775e-3, 470e-6, 500.0))
    check("IEC TR 60725 impedance, 470 uF, 500 ohm: mean", f["outputs"][0]["rails"][0]["voltage"]["mean"], 320.5085, 1e-4)
    check("  line rms", f["line"]["current_rms"], 1.78557, 1e-5)
    check("  line peak", f["line"]["current_peak"], 6.43437, 1e-5)
    check("  distortion in percent", 100 * f["line"]["thd"], 171.082, 1e-3)
    print(f"self-check: {failed} failed")
    sys.exit(1 if failed else 0)


if __name__ == "__main__":
    main()
