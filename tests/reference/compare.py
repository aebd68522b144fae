"""Posts every reference supply to the service and compares every figure: python compare.py BASE_URL."""

import json
import sys
import time
import urllib.request

from model import figures
from supplies import SUPPLIES

TOLERANCE = 1e-6


def leaves(value, at=""):
    if isinstance(value, dict):
        for key, inner in value.items():
            yield from leaves(inner, f"{at}/{key}")
    elif isinstance(value, list):
        for index, inner in enumerate(value):
            yield from leaves(inner, f"{at}/{index}")
    elif isinstance(value, (int, float)):
        yield at, float(value)


def floor(pointer, reference):
    """What a figure is measured against where it is next to nothing: a harmonic against the rms current, a loss against all of them,
    a ripple against its rail."""
    if "/line/harmonics/" in pointer:
        return reference["line"]["current_rms"]
    if pointer.startswith("/losses/"):
        return reference["losses"]["total"]
    if "/voltage/" in pointer:
        return 1e-2 * reference["outputs"][0]["rails"][0]["voltage"]["mean"]
    return 0.0


def main(base):
    failed = 0
    for name, supply in SUPPLIES.items():
        began = time.time()
        reference = figures(supply)
        request = urllib.request.Request(f"{base}/v1/operating-point", data=json.dumps({"supply": supply}).encode(),
                                         headers={"content-type": "application/json"})
        answer = json.load(urllib.request.urlopen(request))["figures"]
        found = dict(leaves(answer))
        worst = (0.0, "")
        compared = 0
        for pointer, expected in leaves(reference):
            scale = max(abs(expected), floor(pointer, reference), 1e-9)
            worst = max(worst, (abs(found[pointer] - expected) / scale, pointer))
            compared += 1
        assert compared == len(found), f"{name}: {compared} of {len(found)} figures compared"
        ok = worst[0] <= TOLERANCE
        failed += not ok
        print(f"{'ok  ' if ok else 'FAIL'} {name:45} {compared:3} figures, worst {worst[0]:.1e} at {worst[1]} ({time.time() - began:.1f} s)")
    print(f"{len(SUPPLIES) - failed} passed, {failed} failed")
    if failed or len(SUPPLIES) < 12:
        sys.exit(1)


if __name__ == "__main__":
    main(sys.argv[1])
