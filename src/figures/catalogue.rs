//! The list of all figures: each has one pointer, one unit, one definition and one source.

/// One figure of the list.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub struct Figure {
    /// JSON Pointer inside the figures, indices written as `{output}`, `{rail}`, `{diode}` and so on.
    pub pointer: &'static str,
    /// Unit of the number.
    pub unit: &'static str,
    /// What it tells an engineer.
    pub meaning: &'static str,
    /// How it is computed.
    pub definition: &'static str,
    /// Where the definition comes from.
    pub source: &'static str,
}

const fn figure(
    pointer: &'static str,
    unit: &'static str,
    meaning: &'static str,
    definition: &'static str,
    source: &'static str,
) -> Figure {
    Figure {
        pointer,
        unit,
        meaning,
        definition,
        source,
    }
}

const IEV_MEAN: &str = "IEC 60050-103, mean value of a periodic quantity";
const IEV_RMS: &str = "IEC 60050-103, root-mean-square value";
const DIODE: &str = "IEC 60747-2, rectifier diodes: ratings and characteristics";
const DEFINED: &str = "defined here";

/// Every figure, in the order of an operating point.
pub const CATALOGUE: &[Figure] = &[
    figure(
        "/outputs/{output}/rails/{rail}/voltage/mean",
        "V",
        "Mean voltage at the load",
        "(1/T) integral of u dt over one line cycle",
        IEV_MEAN,
    ),
    figure(
        "/outputs/{output}/rails/{rail}/voltage/valley",
        "V",
        "Lowest instantaneous voltage at the load: what a regulator behind must live with",
        "minimum of u over one line cycle, at a located turning point or change of conduction",
        DEFINED,
    ),
    figure(
        "/outputs/{output}/rails/{rail}/voltage/crest",
        "V",
        "Highest instantaneous voltage at the load",
        "maximum of u over one line cycle, located likewise",
        DEFINED,
    ),
    figure(
        "/outputs/{output}/rails/{rail}/voltage/ripple_pp",
        "V",
        "Ripple, peak to peak",
        "crest less valley",
        "common practice",
    ),
    figure(
        "/outputs/{output}/rails/{rail}/voltage/ripple_rms",
        "V",
        "Ripple, rms of the alternating part",
        "square root of (mean of u squared less the square of the mean)",
        IEV_RMS,
    ),
    figure(
        "/outputs/{output}/rails/{rail}/current/mean",
        "A",
        "Mean load current",
        "(1/T) integral of i dt",
        IEV_MEAN,
    ),
    figure(
        "/outputs/{output}/rails/{rail}/current/rms",
        "A",
        "Rms load current",
        "square root of (1/T) integral of i squared dt",
        IEV_RMS,
    ),
    figure(
        "/outputs/{output}/rails/{rail}/power",
        "W",
        "Mean power into the load; for a regulator, into the regulator and what is behind it",
        "(1/T) integral of u i dt",
        "IEC 60050-131, active power",
    ),
    figure(
        "/outputs/{output}/diodes/{diode}/current_mean",
        "A",
        "Mean forward current of one diode",
        "(1/T) integral of i dt",
        DIODE,
    ),
    figure(
        "/outputs/{output}/diodes/{diode}/current_rms",
        "A",
        "Rms forward current of one diode",
        "square root of (1/T) integral of i squared dt",
        DIODE,
    ),
    figure(
        "/outputs/{output}/diodes/{diode}/current_peak",
        "A",
        "Largest instantaneous forward current in the steady state; switch-on is higher",
        "maximum of i over one line cycle",
        DIODE,
    ),
    figure(
        "/outputs/{output}/diodes/{diode}/reverse_voltage_peak",
        "V",
        "Largest reverse voltage in the steady state, line transients not included; a string of open diodes divides it equally",
        "minus the minimum of the diode's voltage over one line cycle",
        DIODE,
    ),
    figure(
        "/outputs/{output}/diodes/{diode}/conduction_angle",
        "deg",
        "Part of the cycle with current",
        "360 degrees times the time with current over T",
        "common practice",
    ),
    figure(
        "/outputs/{output}/diodes/{diode}/loss",
        "W",
        "Forward loss of one diode",
        "(1/T) integral of u i dt = V(TO) times mean current + r(T) times rms current squared",
        DIODE,
    ),
    figure(
        "/outputs/{output}/capacitors/{capacitor}/voltage_peak",
        "V",
        "Largest voltage across the bank, its loss resistance included",
        "maximum of the magnitude of u over one line cycle",
        DEFINED,
    ),
    figure(
        "/outputs/{output}/capacitors/{capacitor}/ripple_current_rms",
        "A",
        "Rms current of the whole bank",
        "square root of (1/T) integral of i squared dt",
        "IEC 60384-4, ripple current",
    ),
    figure(
        "/outputs/{output}/capacitors/{capacitor}/loss",
        "W",
        "Loss of the whole bank",
        "loss resistance of the bank times ripple current squared",
        "IEC 60384-1, equivalent series resistance",
    ),
    figure(
        "/outputs/{output}/chokes/{choke}/current_mean",
        "A",
        "Mean choke current",
        "(1/T) integral of i dt",
        IEV_MEAN,
    ),
    figure(
        "/outputs/{output}/chokes/{choke}/current_rms",
        "A",
        "Rms choke current",
        "square root of (1/T) integral of i squared dt",
        IEV_RMS,
    ),
    figure(
        "/outputs/{output}/chokes/{choke}/current_peak",
        "A",
        "Largest instantaneous choke current: what must not saturate it",
        "maximum of the magnitude of i over one line cycle",
        DEFINED,
    ),
    figure(
        "/outputs/{output}/winding/current_rms",
        "A",
        "Rms current of the winding, of each half where it is tapped; of the line where there is no transformer",
        "square root of (1/T) integral of i squared dt",
        IEV_RMS,
    ),
    figure(
        "/outputs/{output}/winding/current_peak",
        "A",
        "Largest instantaneous winding current",
        "maximum of the magnitude of i over one line cycle",
        DEFINED,
    ),
    figure(
        "/outputs/{output}/winding/copper_loss",
        "W",
        "Copper loss of the secondary winding, all halves and phases",
        "resistance times rms current squared, summed",
        "Joule's law",
    ),
    figure(
        "/line/current_rms",
        "A",
        "Rms line current, phase 1",
        "square root of (1/T) integral of i squared dt",
        IEV_RMS,
    ),
    figure(
        "/line/current_peak",
        "A",
        "Largest instantaneous line current, phase 1",
        "maximum of the magnitude of i over one line cycle",
        DEFINED,
    ),
    figure(
        "/line/active_power",
        "W",
        "Power from the source, all phases, losses in the line's own resistance included",
        "(1/T) integral of the source's u i dt, summed over the phases",
        "IEC 60050-131, active power",
    ),
    figure(
        "/line/apparent_power",
        "VA",
        "Apparent power at the source, all phases",
        "rms voltage times rms current, summed over the phases",
        "IEC 60050-131, apparent power",
    ),
    figure(
        "/line/power_factor",
        "1",
        "Power factor; 0 where there is no current",
        "active power over apparent power",
        "IEC 60050-131, power factor",
    ),
    figure(
        "/line/displacement_factor",
        "1",
        "Displacement factor; 0 where there is no current",
        "cosine of the angle between the fundamentals of voltage and current, phase 1",
        "IEC 60050-161, phase displacement of the fundamentals",
    ),
    figure(
        "/line/thd",
        "1",
        "Total harmonic distortion of the line current, phase 1, every order counted; 0 where there is no current",
        "square root of (rms squared less mean squared less fundamental squared) over the fundamental",
        "IEC 61000-3-2, total harmonic current, not cut off at order 40",
    ),
    figure(
        "/line/harmonics/{order}",
        "A",
        "Rms line current of one order, phase 1; the list begins with order 1",
        "magnitude of the Fourier coefficient over the square root of 2, integrated in closed form",
        "Fourier; orders 1 to 40 as IEC 61000-3-2",
    ),
    figure(
        "/losses/total",
        "W",
        "All losses",
        "sum of the losses below",
        "conservation of energy",
    ),
    figure(
        "/losses/line",
        "W",
        "Loss in the line's resistance, all phases",
        "resistance times rms current squared",
        "Joule's law",
    ),
    figure(
        "/losses/transformer",
        "W",
        "Copper loss of primary and secondary, and core loss",
        "resistance times rms current squared, plus the power of the core's loss resistance",
        "Joule's law",
    ),
    figure(
        "/losses/rectifiers",
        "W",
        "Forward loss of all diodes",
        "sum of the diodes' losses",
        DIODE,
    ),
    figure(
        "/losses/capacitors",
        "W",
        "Loss of all capacitor banks",
        "sum of the banks' losses",
        "IEC 60384-1, equivalent series resistance",
    ),
    figure(
        "/losses/filters",
        "W",
        "Loss in the series resistances of the filters",
        "(1/T) integral of u i dt",
        "Joule's law",
    ),
    figure(
        "/efficiency",
        "1",
        "Efficiency; 0 where no power flows",
        "power of all loads over active power",
        "common practice",
    ),
];
