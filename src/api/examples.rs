//! The scenario of the examples, the page and the tour: an invented kiln controller.

use serde_json::{Value, json};

/// A supply: 24 V transformer, bridge, reservoir, linear regulator for 15 V.
#[must_use]
pub fn supply() -> Value {
    json!({
        "name": "Kiln controller, 15 V rail",
        "line": {
            "voltage": "230 V ±10 %",
            "frequency": "50 Hz",
            "resistance": "0.4 ohm",
            "inductance": "0.8 mH"
        },
        "transformer": {
            "primary_voltage": "230 V",
            "primary_resistance": "38 ohm",
            "windings": [{"open_circuit_voltage": "20.5 V", "resistance": "0.31 ohm", "leakage_inductance": "60 uH"}],
            "rating": "40 VA",
            "core_loss": "1.9 W"
        },
        "outputs": [{
            "rectifier": {
                "circuit": "bridge",
                "diode": {
                    "threshold_voltage": "0.78 V",
                    "slope_resistance": "28 mohm",
                    "ratings": {
                        "reverse_voltage": "100 V", "current_mean": "3 A", "current_surge": "80 A"
                    }
                }
            },
            "rails": [{
                "filter": [{
                    "capacitor": {
                        "capacitance": "4700 uF ±20 %", "esr": "42 mohm",
                        "ratings": {"voltage": "50 V", "ripple_current": "3.1 A"}
                    }
                }],
                "load": {"kind": "regulator", "output_voltage": "15 V", "output_current": "1 A (0.1 A to 1 A)", "dropout": "1.2 V", "quiescent_current": "5 mA"}
            }]
        }]
    })
}

/// A need: what the same controller asks for.
#[must_use]
pub fn need() -> Value {
    json!({
        "line": {"voltage": "230 V ±10 %", "frequency": "50 Hz", "resistance": "0.4 ohm", "inductance": "0.8 mH"},
        "surroundings": {"ambient": "25 degC (0 degC to 50 degC)"},
        "need": {
            "rails": [{"valley_min": "16.5 V", "crest_max": "35 V", "load": {"kind": "current", "current": "1 A (0.1 A to 1 A)"}}],
            "circuits": ["bridge", "centre-tap"]
        },
        "choose_from": "values",
        "minimise": "volume",
        "policy": "reliability-center-severe",
        "limit": 3
    })
}
