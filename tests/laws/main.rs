//! Laws that every solution obeys, over random supplies: charge, flux, energy, scaling, symmetry. The seed is fixed.

#![allow(
    clippy::unwrap_used,
    clippy::expect_used,
    clippy::new_without_default,
    missing_docs,
    unreachable_pub,
    reason = "a test that cannot go on fails; test crates export nothing"
)]

#[path = "../support/mod.rs"]
mod support;

use mainstay::figures::{self, Figures};
use mainstay::network::{Network, Signal};
use mainstay::quantity::Band;
use mainstay::solver::integral::Integrals;
use mainstay::solver::periodic::Periodic;
use mainstay::solver::{self, SolverError};
use mainstay::supply::{
    Capacitor, Circuit, Diode, Harmonic, Line, Load, Output, Parts, Phases, Rail, Rectifier, Section, Series, Supply,
    Surroundings, Transformer, Winding, WindingValues,
};
use proptest::prelude::*;
use proptest::test_runner::{Config, RngSeed};
use support::band;

/// A supply in plain numbers that can be scaled.
#[derive(Clone, Debug)]
struct Plain {
    circuit: Circuit,
    volts: f64,
    hertz: f64,
    line: (f64, f64),
    harmonic: Option<(u32, f64, f64)>,
    transformer: Option<(f64, f64, f64, f64, f64)>,
    diode: (f64, f64),
    sections: Vec<(f64, f64, f64, f64)>,
    load: PlainLoad,
}

#[derive(Clone, Debug)]
enum PlainLoad {
    Resistance(f64),
    Current(f64),
    Regulator(f64, f64, f64),
}

impl Plain {
    /// Every impedance times `z`, every time times `t`.
    fn scaled(&self, z: f64, t: f64) -> Self {
        let mut out = self.clone();
        let (ohm, henry, farad) = (z, z * t, t / z);
        out.hertz /= t;
        out.line = (self.line.0 * ohm, self.line.1 * henry);
        out.transformer = self
            .transformer
            .map(|(v, rp, lp, rs, ls)| (v, rp * ohm, lp * henry, rs * ohm, ls * henry));
        out.diode.1 *= ohm;
        for section in &mut out.sections {
            *section = (section.0 * ohm, section.1 * henry, section.2 * farad, section.3 * ohm);
        }
        out.load = match self.load {
            PlainLoad::Resistance(r) => PlainLoad::Resistance(r * ohm),
            PlainLoad::Current(i) => PlainLoad::Current(i / z),
            PlainLoad::Regulator(v, i, d) => PlainLoad::Regulator(v, i / z, d),
        };
        out
    }

    fn supply(&self) -> Supply {
        let section = |&(r, l, c, esr): &(f64, f64, f64, f64)| Section {
            series: (r > 0.0 || l > 0.0).then(|| Series {
                resistance: band(r),
                inductance: band(l),
            }),
            capacitor: Some(Capacitor {
                capacitance: band(c),
                esr: band(esr),
                count: 1,
                ratings: Default::default(),
            }),
        };
        let load = match self.load {
            PlainLoad::Resistance(r) => Load::Resistance { resistance: band(r) },
            PlainLoad::Current(i) => Load::Current { current: band(i) },
            PlainLoad::Regulator(v, i, d) => Load::Regulator {
                output_voltage: band(v),
                output_current: band(i),
                dropout: band(d),
                quiescent_current: Band::ZERO,
            },
        };
        let transformer = self.transformer.map(|(v, rp, lp, rs, ls)| Transformer {
            primary_voltage: band(self.volts),
            primary_resistance: Some(band(rp)),
            primary_leakage_inductance: band(lp),
            windings: vec![Winding {
                values: WindingValues::Measured {
                    open_circuit_voltage: band(v),
                    resistance: band(rs),
                },
                leakage_inductance: band(ls),
            }],
            regulation: None,
            rating: None,
            core_loss: None,
        });
        let harmonics = self.harmonic.iter().map(|&(order, fraction, phase)| Harmonic {
            order,
            fraction: band(fraction),
            phase: band(phase),
        });
        Supply::new(Parts {
            name: None,
            line: Line {
                voltage: band(self.volts),
                frequency: band(self.hertz),
                phases: Phases::One,
                resistance: band(self.line.0),
                inductance: band(self.line.1),
                harmonics: harmonics.collect(),
            },
            transformer,
            outputs: vec![Output {
                winding: 0,
                rectifier: Rectifier {
                    circuit: self.circuit,
                    diode: Diode {
                        threshold_voltage: band(self.diode.0),
                        slope_resistance: band(self.diode.1),
                        ratings: Default::default(),
                    },
                    stack: None,
                    coupling: None,
                },
                rails: vec![Rail {
                    filter: self.sections.iter().map(section).collect(),
                    load,
                }],
            }],
            surroundings: Surroundings::default(),
        })
        .unwrap()
    }
}

/// Log-uniform between two values.
fn decades(low: f64, high: f64) -> impl Strategy<Value = f64> {
    (low.log10()..high.log10()).prop_map(|e| 10.0_f64.powf(e))
}

fn or_zero(low: f64, high: f64) -> impl Strategy<Value = f64> {
    prop_oneof![1 => Just(0.0), 2 => decades(low, high)]
}

/// Supplies from a thousandth to ten times what an engineer would call sensible.
fn plain() -> impl Strategy<Value = Plain> {
    let circuit = prop_oneof![Just(Circuit::HalfWave), Just(Circuit::Bridge), Just(Circuit::CentreTap)];
    let section = (
        or_zero(1e-2, 10.0),
        or_zero(1e-4, 0.3),
        decades(1e-5, 3e-2),
        or_zero(1e-3, 0.3),
    );
    let load = prop_oneof![
        decades(3.0, 3e3).prop_map(PlainLoad::Resistance),
        decades(1e-3, 2.0).prop_map(PlainLoad::Current),
        (5.0..24.0_f64, decades(1e-2, 2.0), 0.2..2.0_f64).prop_map(|(v, i, d)| PlainLoad::Regulator(v, i, d)),
    ];
    let transformer = (
        6.0..40.0_f64,
        decades(1.0, 100.0),
        or_zero(1e-4, 0.1),
        decades(0.05, 3.0),
        or_zero(1e-6, 3e-3),
    );
    let harmonic = proptest::option::of((2..12_u32, 0.005..0.1_f64, 0.0..360.0_f64));
    (
        circuit,
        (decades(0.05, 2.0), or_zero(1e-5, 3e-3)),
        harmonic,
        transformer,
        (0.3..1.2_f64, decades(1e-3, 0.2)),
        proptest::collection::vec(section, 1..3),
        load,
        prop_oneof![Just(50.0), Just(60.0), Just(400.0)],
    )
        .prop_map(
            |(circuit, line, harmonic, transformer, diode, sections, load, hertz)| Plain {
                circuit,
                volts: 230.0,
                hertz,
                line,
                harmonic,
                transformer: Some(transformer),
                diode,
                sections,
                load,
            },
        )
}

fn config(cases: u32) -> Config {
    Config {
        cases,
        rng_seed: RngSeed::Fixed(20_261_201),
        max_global_rejects: cases / 100,
        failure_persistence: None,
        ..Config::default()
    }
}

/// Solves a supply. A refusal for want of a periodic state within the budget (an undamped filter at resonance may have none) is
/// an honest answer, of which [`config`] allows one in a hundred; any other failure is a fault.
fn solved<T>(plain: &Plain, read: impl FnOnce(&Network, &Periodic<'_>, Figures) -> T) -> Result<T, TestCaseError> {
    let network = Network::of(&plain.supply());
    match solver::solve(&network) {
        Ok(periodic) => {
            let figures = figures::compute(&network, &periodic);
            Ok(read(&network, &periodic, figures))
        }
        Err(error @ SolverError::NotPeriodic { .. }) => Err(TestCaseError::reject(format!("{error}: {plain:?}"))),
        Err(error) => Err(TestCaseError::fail(format!("{error}: {plain:?}"))),
    }
}

/// The integral of a signal over the cycle, and of its magnitude's bound.
fn integral(periodic: &Periodic<'_>, signal: &Signal) -> f64 {
    let mut sum = 0.0;
    let mut coefficients = Vec::new();
    for flow in periodic.run.flows.iter().filter(|f| f.length > 0.0) {
        let regime = periodic.regimes.get(flow.regime);
        flow.signal(regime, &regime.modal(&regime.signal(signal)), &mut coefficients);
        sum += Integrals::new(&regime.basis, flow).integral(&coefficients);
    }
    sum
}

fn near(what: &str, a: f64, b: f64, relative: f64, floor: f64) -> Result<(), TestCaseError> {
    let error = (a - b).abs();
    prop_assert!(
        error <= relative * a.abs().max(b.abs()) + floor,
        "{what}: {a:e} and {b:e}"
    );
    Ok(())
}

proptest! {
    #![proptest_config(config(400))]

    #[test]
    fn energy_charge_and_flux_balance(plain in plain()) {
        solved(&plain, |network, periodic, figures| -> Result<(), TestCaseError> {
            prop_assert!(periodic.residual < 1e-9, "residual {:e}", periodic.residual);
            let load: f64 = figures.outputs[0].rails[0].power;
            let (line, losses) = (&figures.line, &figures.losses);
            // Line power is load power and every loss.
            near("energy", line.active_power, load + losses.total, 1e-8, 1e-12)?;
            near("losses", losses.total, losses.line + losses.transformer + losses.rectifiers + losses.capacitors + losses.filters, 1e-12, 0.0)?;
            // What the diodes carry on average is what the load draws: capacitors keep no charge.
            let output = &figures.outputs[0];
            let through: f64 = match plain.circuit {
                Circuit::HalfWave => output.diodes[0].current_mean,
                _ => output.diodes[0].current_mean + output.diodes[1].current_mean,
            };
            near("charge", through, output.rails[0].current.mean, 1e-8, 1e-12)?;
            for choke in &output.chokes {
                near("choke charge", choke.current_mean, output.rails[0].current.mean, 1e-8, 1e-12)?;
            }
            // No inductor keeps flux: its mean voltage vanishes.
            for &branch in &network.inductors {
                let volts = integral(periodic, &Signal::voltage(branch)) / network.oscillator.period();
                prop_assert!(volts.abs() < 1e-8 * network.voltage_scale, "inductor mean {volts:e} V");
            }
            for &branch in &network.capacitors {
                let amperes = integral(periodic, &Signal::current(branch)) / network.oscillator.period();
                prop_assert!(amperes.abs() < 1e-8 * network.current_scale.max(line.current_rms), "capacitor mean {amperes:e} A");
            }
            // Mean square of the line current is that of its harmonics and its mean, as far as they are counted.
            let counted: f64 = line.harmonics.iter().map(|h| h * h).sum();
            prop_assert!(counted <= line.current_rms.powi(2) * (1.0 + 1e-9));
            prop_assert!(output.rails[0].voltage.valley <= output.rails[0].voltage.mean);
            prop_assert!(output.rails[0].voltage.mean <= output.rails[0].voltage.crest);
            prop_assert!(line.power_factor <= 1.0 + 1e-9);
            Ok(())
        })??;
    }

    #[test]
    fn impedance_and_time_scale(plain in plain(), z in decades(0.1, 10.0), t in decades(0.2, 5.0)) {
        let (one, other) = (solved(&plain, |_, _, f| f)?, solved(&plain.scaled(z, t), |_, _, f| f)?);
        let (a, b) = (&one.outputs[0], &other.outputs[0]);
        for (what, x, y) in [
            ("mean", a.rails[0].voltage.mean, b.rails[0].voltage.mean),
            ("valley", a.rails[0].voltage.valley, b.rails[0].voltage.valley),
            ("crest", a.rails[0].voltage.crest, b.rails[0].voltage.crest),
            ("diode rms", a.diodes[0].current_rms, b.diodes[0].current_rms * z),
            ("diode peak", a.diodes[0].current_peak, b.diodes[0].current_peak * z),
            ("angle", a.diodes[0].conduction_angle, b.diodes[0].conduction_angle),
            ("line rms", one.line.current_rms, other.line.current_rms * z),
            ("power", one.line.active_power, other.line.active_power * z),
            ("distortion", one.line.thd, other.line.thd),
        ] {
            near(what, x, y, 1e-7, 1e-9)?;
        }
    }

    #[test]
    fn a_bridge_treats_its_diodes_alike(plain in plain()) {
        let plain = Plain { circuit: Circuit::Bridge, harmonic: plain.harmonic.filter(|h| h.0 % 2 == 1), ..plain };
        let figures = solved(&plain, |_, _, f| f)?;
        let diodes = &figures.outputs[0].diodes;
        for diode in &diodes[1..] {
            near("mean", diode.current_mean, diodes[0].current_mean, 1e-8, 1e-12)?;
            near("peak", diode.current_peak, diodes[0].current_peak, 1e-8, 1e-12)?;
            near("reverse", diode.reverse_voltage_peak, diodes[0].reverse_voltage_peak, 1e-8, 1e-12)?;
        }
        for order in (2..=40).step_by(2) {
            prop_assert!(figures.line.harmonics[order - 1] < 1e-8 * figures.line.current_rms.max(1e-9), "even order {order}");
        }
    }
}

/// Waveforms are the same solution: their mean approaches the mean that was integrated.
#[test]
fn samples_agree_with_integrals() {
    let plain = Plain {
        circuit: Circuit::Bridge,
        volts: 230.0,
        hertz: 50.0,
        line: (0.4, 0.8e-3),
        harmonic: None,
        transformer: Some((20.5, 38.0, 0.0, 0.31, 60e-6)),
        diode: (0.78, 0.028),
        sections: vec![(0.0, 0.0, 4700e-6, 0.042)],
        load: PlainLoad::Current(1.0),
    };
    let network = Network::of(&plain.supply());
    let periodic = solver::solve(&network).unwrap();
    let figures = figures::compute(&network, &periodic);
    let waves = figures::waveforms(&network, &periodic, 20_001);
    let mean = |values: &[f64]| values[1..].iter().sum::<f64>() / (values.len() - 1) as f64;
    support::close(
        "rail",
        mean(&waves.rails[0]),
        figures.outputs[0].rails[0].voltage.mean,
        1e-7,
    );
    support::close(
        "diode",
        mean(&waves.diodes[0]),
        figures.outputs[0].diodes[0].current_mean,
        1e-5,
    );
    let highest = waves.rails[0].iter().copied().fold(f64::MIN, f64::max);
    support::close("crest", highest, figures.outputs[0].rails[0].voltage.crest, 1e-6);
    assert_eq!(waves.time.len(), 20_001);
    support::close("end", waves.time[20_000], 0.02, 1e-12);
}
