"""The supplies of the reference runs. Invented, within ordinary engineering ranges."""


def supply(circuit, load, filters, line=None, transformer=None, diode=("0.75 V", "25 mohm")):
    out = {
        "line": line or {"voltage": "230 V", "frequency": "50 Hz", "resistance": "0.4 ohm", "inductance": "0.8 mH"},
        "outputs": [{
            "rectifier": {"circuit": circuit, "diode": {"threshold_voltage": diode[0], "slope_resistance": diode[1]}},
            "rails": [{"filter": filters, "load": load}],
        }],
    }
    if transformer is not None:
        out["transformer"] = transformer
    return out


def bank(capacitance, esr, count=1, series=None):
    section = {"capacitor": {"capacitance": capacitance, "esr": esr, "count": count}}
    if series:
        section["series"] = series
    return section


def winding(volts, ohms, leakage=None, primary="30 ohm", primary_leakage=None):
    out = {"primary_voltage": "230 V", "primary_resistance": primary, "windings": [{"open_circuit_voltage": volts, "resistance": ohms}]}
    if leakage:
        out["windings"][0]["leakage_inductance"] = leakage
    if primary_leakage:
        out["primary_leakage_inductance"] = primary_leakage
    return out


def current(text):
    return {"kind": "current", "current": text}


def resistance(text):
    return {"kind": "resistance", "resistance": text}


def regulator(volts, amperes, dropout="1.5 V", quiescent="6 mA"):
    return {"kind": "regulator", "output_voltage": volts, "output_current": amperes, "dropout": dropout, "quiescent_current": quiescent}


LOW = {"voltage": "24 V", "frequency": "60 Hz", "resistance": "0.6 ohm"}
LEAKY = {"voltage": "36 V", "frequency": "400 Hz", "resistance": "0.3 ohm", "inductance": "60 uH"}
DISTORTED = {"voltage": "230 V", "frequency": "50 Hz", "resistance": "0.5 ohm", "inductance": "0.6 mH", "harmonics": [
    {"order": 3, "fraction": "2 %", "phase": "30 deg"}, {"order": 5, "fraction": "4 %", "phase": "180 deg"}, {"order": 2, "fraction": "0.7 %", "phase": "50 deg"}]}

SUPPLIES = {
    "half-wave, resistance, no leakage": supply("half-wave", resistance("120 ohm"), [bank("470 uF", "80 mohm")], LOW),
    "half-wave, leakage, current": supply("half-wave", current("0.2 A"), [bank("2200 uF", "60 mohm")], transformer=winding("15 V", "0.8 ohm", "150 uH")),
    "half-wave, leakage, regulator": supply("half-wave", regulator("9 V", "0.3 A"), [bank("3300 uF", "50 mohm")], transformer=winding("13 V", "0.5 ohm", "90 uH")),
    "bridge on the line, current": supply("bridge", current("0.8 A"), [bank("4700 uF", "40 mohm")], LOW),
    "bridge, leakage, current, two capacitors": supply("bridge", current("1.1 A"), [bank("2200 uF", "70 mohm", 2)], transformer=winding("20 V", "0.3 ohm", "70 uH")),
    "bridge, leakage, resistance": supply("bridge", resistance("22 ohm"), [bank("3300 uF", "55 mohm")], transformer=winding("20 V", "0.3 ohm", "200 uH", primary_leakage="20 mH")),
    "bridge at 400 Hz, resistance": supply("bridge", resistance("30 ohm"), [bank("330 uF", "30 mohm")], LEAKY),
    "bridge, leakage, R section, current": supply("bridge", current("0.6 A"), [bank("2200 uF", "60 mohm"), bank("1000 uF", "90 mohm", series={"resistance": "0.7 ohm"})], transformer=winding("18 V", "0.4 ohm", "60 uH")),
    "bridge, leakage, R section, resistance": supply("bridge", resistance("35 ohm"), [bank("1500 uF", "60 mohm"), bank("1500 uF", "90 mohm", series={"resistance": "1.2 ohm"})], transformer=winding("24 V", "0.5 ohm", "80 uH")),
    "bridge, leakage, L section, resistance": supply("bridge", resistance("25 ohm"), [bank("1500 uF", "60 mohm"), bank("2200 uF", "50 mohm", series={"resistance": "0.2 ohm", "inductance": "3 mH"})], transformer=winding("20 V", "0.3 ohm", "60 uH")),
    "bridge on the line, L section, current": supply("bridge", current("0.5 A"), [bank("1000 uF", "60 mohm"), bank("1000 uF", "50 mohm", series={"resistance": "0.3 ohm", "inductance": "5 mH"})], LOW),
    "bridge, regulator": supply("bridge", regulator("15 V", "1 A"), [bank("4700 uF", "42 mohm")], transformer=winding("20.5 V", "0.31 ohm", "60 uH")),
    "bridge, regulator dropping out": supply("bridge", regulator("22 V", "1 A"), [bank("2200 uF", "42 mohm")], transformer=winding("20.5 V", "0.31 ohm", "60 uH")),
    "bridge, distorted line": supply("bridge", current("0.9 A"), [bank("3300 uF", "50 mohm")], DISTORTED, winding("19 V", "0.3 ohm", "70 uH")),
    "centre tap, leakage on both sides, current": supply("centre-tap", current("0.9 A"), [bank("3300 uF", "50 mohm")], transformer=winding("19 V", "0.45 ohm", "120 uH", primary_leakage="8 mH")),
    "centre tap, leakage, L section": supply("centre-tap", resistance("20 ohm"), [bank("1500 uF", "60 mohm"), bank("1500 uF", "60 mohm", series={"resistance": "0.1 ohm", "inductance": "2 mH"})], transformer=winding("17 V", "0.4 ohm", "100 uH")),
    "bridge, choke input, continuous": supply("bridge", current("1 A"), [bank("2200 uF", "60 mohm", series={"resistance": "0.6 ohm", "inductance": "60 mH"})], LOW),
    "bridge, choke input, gapped": supply("bridge", resistance("150 ohm"), [bank("2200 uF", "60 mohm", series={"resistance": "0.6 ohm", "inductance": "20 mH"})], LOW),
    "bridge without a filter, line inductance": supply("bridge", resistance("40 ohm"), [], {"voltage": "24 V", "frequency": "60 Hz", "resistance": "0.6 ohm", "inductance": "4 mH"}),
}
