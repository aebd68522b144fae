"""Computes every reference and writes expected.json: python compute.py; with --check it writes nothing and fails where the stored
figures differ."""

import json
import sys
import time
from pathlib import Path

from steady import figures

HERE = Path(__file__).resolve().parent
STORED = HERE / "expected.json"
# Two runs on different machines agree far better than the service is asked to.
AGREEMENT = 1e-8

# What a supply is here for, so that changed values cannot quietly take it away.
WANTED = {"bridge-choke-overlap": {"overlap": True, "gap": False}, "centre-tap-choke-overlap": {"overlap": True, "gap": False},
          "bridge-choke-continuous": {"gap": False}, "bridge-choke-gapped": {"overlap": False, "gap": True},
          "bridge-regulator-dropout": {"load pieces": 2}, "bridge-regulator-always-dropping-out": {"load pieces": 1},
          "half-wave-current-to-zero": {"load pieces": 2}}


def supplies():
    return {path.stem: json.loads(path.read_text()) for path in sorted((HERE / "supplies").glob("*.json"))}


def balance(f):
    """Energy: what the line gives is what the load and the losses take, relative."""
    power = f["outputs"][0]["rails"][0]["power"]
    return abs(f["line"]["active_power"] - power - f["losses"]["total"]) / f["line"]["active_power"]


def compute(report=print):
    out = {}
    for name, supply in supplies().items():
        began = time.monotonic()
        out[name], residual, happens = figures(supply)
        gap = balance(out[name])
        report(f"{name:40} period residual {residual:.0e}, energy {gap:.0e}, {time.monotonic() - began:.1f} s", flush=True)
        if gap > 1e-9:
            raise SystemExit(f"{name}: energy is not balanced")
        lost = {key: happens[key] for key, value in WANTED.get(name, {}).items() if happens[key] != value}
        if lost:
            raise SystemExit(f"{name}: no longer shows what it is here for: {lost}")
    return out


def main():
    began = time.monotonic()
    computed = compute()
    print(f"{len(computed)} supplies in {time.monotonic() - began:.0f} s")
    if "--check" not in sys.argv:
        STORED.write_text(json.dumps(computed, indent=1) + "\n")
        return
    from compare import worst
    stored = json.loads(STORED.read_text())
    apart = {name: worst(computed[name], stored[name]) for name in computed if name in stored}
    bad = [name for name in computed if name not in apart or apart[name][0] > AGREEMENT]
    print(f"stored figures: {len(computed) - len(bad)} passed, {len(bad)} failed {bad or ''}")
    sys.exit(1 if bad or set(stored) != set(computed) else 0)


if __name__ == "__main__":
    main()
