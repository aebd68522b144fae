"""Posts every supply to a running service and compares every figure: python compare.py BASE_URL [--stored]. The references are
computed afresh; with --stored they are read from expected.json."""

import json
import sys
import urllib.error
import urllib.request

TOLERANCE = 1e-6
LEAST = 12


def leaves(value, at=""):
    if isinstance(value, dict):
        for key, inner in value.items():
            yield from leaves(inner, f"{at}/{key}")
    elif isinstance(value, list):
        for index, inner in enumerate(value):
            yield from leaves(inner, f"{at}/{index}")
    elif isinstance(value, (int, float)) and not isinstance(value, bool):
        yield at, float(value)


def floor(pointer, reference):
    """The least size a figure is measured against. Only figures that are nothing, or a difference of far larger numbers, have
    one: a harmonic under 1e-7 of the fundamental counts as a part of the fundamental, a valley under 1e-7 of the crest (a rail that
    reaches zero) as a part of the crest, a loss of nothing as a part of all losses."""
    if pointer.endswith("/voltage/valley"):
        voltage = reference["outputs"][0]["rails"][0]["voltage"]
        return voltage["crest"] if abs(voltage["valley"]) < 1e-7 * voltage["crest"] else 0.0
    if "/line/harmonics/" in pointer:
        first = reference["line"]["harmonics"][0]
        return first if abs(dict(leaves(reference))[pointer]) < 1e-7 * first else 0.0
    if pointer.endswith("loss") or pointer.startswith("/losses/"):
        return 1e-9 * reference["losses"]["total"]
    return 0.0


def worst(answer, reference):
    """The greatest relative difference and its pointer; a figure that one side lacks differs infinitely."""
    found, expected = dict(leaves(answer)), dict(leaves(reference))
    missing = sorted(set(found) ^ set(expected))
    if missing:
        return float("inf"), f"{missing[0]} is on one side only", len(expected)
    out = (0.0, "")
    for pointer, value in expected.items():
        scale = max(abs(value), floor(pointer, reference), 1e-12)
        out = max(out, (abs(found[pointer] - value) / scale, pointer))
    return *out, len(expected)


def ask(base, supply):
    request = urllib.request.Request(f"{base}/v1/operating-point", data=json.dumps({"supply": supply}).encode(),
                                     headers={"content-type": "application/json"})
    with urllib.request.urlopen(request, timeout=60) as response:
        return json.load(response)["figures"]


def main(base, stored):
    from compute import STORED, supplies
    from steady import figures
    kept = json.loads(STORED.read_text()) if stored else {}
    passed = failed = 0
    for name, supply in supplies().items():
        try:
            reference = kept[name] if stored else figures(supply)[0]
            difference, pointer, count = worst(ask(base, supply), reference)
        except (urllib.error.URLError, RuntimeError, KeyError) as fault:
            detail = fault.read().decode()[:300] if isinstance(fault, urllib.error.HTTPError) else fault
            difference, pointer, count = float("inf"), f"no answer: {detail!r}", 0
        ok = difference <= TOLERANCE
        passed, failed = passed + ok, failed + (not ok)
        print(f"{'ok  ' if ok else 'FAIL'} {name:40} {count:3} figures, worst {difference:.1e} at {pointer}", flush=True)
    print(f"{passed} passed, {failed} failed")
    sys.exit(1 if failed or passed < LEAST else 0)


if __name__ == "__main__":
    if len(sys.argv) < 2:
        sys.exit("usage: compare.py BASE_URL [--stored]")
    main(sys.argv[1].rstrip("/"), "--stored" in sys.argv[2:])
