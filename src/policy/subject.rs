//! What rules are about: the stresses and ratings of a supply's components.

use crate::supply::{Capacitor, Supply};
use crate::worst_case::{Attained, Extremes};

/// A quantity of a kind of component that has a rating.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Hash)]
pub enum Quantity {
    /// A diode's largest reverse voltage against V_RRM.
    DiodeReverseVoltage,
    /// A diode's mean current against I_F(AV).
    DiodeCurrentMean,
    /// A diode's rms current against I_F(RMS).
    DiodeCurrentRms,
    /// A diode's largest current at switch-on against I_FSM.
    DiodeCurrentSurge,
    /// A capacitor's largest voltage against its rated voltage.
    CapacitorVoltage,
    /// One capacitor's ripple current against its rated ripple current.
    CapacitorRippleCurrent,
    /// Apparent power from the line against the transformer's rating.
    TransformerApparentPower,
}

impl Quantity {
    /// Every quantity.
    pub const ALL: [Self; 7] = [
        Self::DiodeReverseVoltage,
        Self::DiodeCurrentMean,
        Self::DiodeCurrentRms,
        Self::DiodeCurrentSurge,
        Self::CapacitorVoltage,
        Self::CapacitorRippleCurrent,
        Self::TransformerApparentPower,
    ];

    /// The kind of component, in descriptions.
    #[must_use]
    pub fn component(self) -> &'static str {
        match self {
            Self::DiodeReverseVoltage | Self::DiodeCurrentMean | Self::DiodeCurrentRms | Self::DiodeCurrentSurge => {
                "diode"
            }
            Self::CapacitorVoltage | Self::CapacitorRippleCurrent => "capacitor",
            Self::TransformerApparentPower => "transformer",
        }
    }

    /// The name in descriptions: of the rating, and of the quantity in a check.
    #[must_use]
    pub fn name(self) -> &'static str {
        match self {
            Self::DiodeReverseVoltage => "reverse_voltage",
            Self::DiodeCurrentMean => "current_mean",
            Self::DiodeCurrentRms => "current_rms",
            Self::DiodeCurrentSurge => "current_surge",
            Self::CapacitorVoltage => "voltage",
            Self::CapacitorRippleCurrent => "ripple_current",
            Self::TransformerApparentPower => "apparent_power",
        }
    }

    /// Unit of stress and rating.
    #[must_use]
    pub fn unit(self) -> &'static str {
        match self {
            Self::DiodeReverseVoltage | Self::CapacitorVoltage => "V",
            Self::TransformerApparentPower => "VA",
            _ => "A",
        }
    }
}

/// One component's quantity: where its stress is read, and its rating.
#[derive(Clone, Debug, PartialEq)]
pub struct Subject {
    /// JSON Pointer of the component inside the supply.
    pub component: String,
    /// Which of its quantities.
    pub quantity: Quantity,
    /// Figures whose largest is the stress, as JSON Pointers inside the figures. The surge current has none: it is no figure
    /// of the steady state.
    pub figures: Vec<String>,
    /// What the figure is divided by: the number of capacitors that share a bank's current.
    pub shared_by: f64,
    /// The rating at its lowest, where it is known.
    pub rating: Option<f64>,
    /// Index of the output.
    pub output: usize,
}

/// A stress and the ends that attain it.
pub type Worst = (f64, Vec<Attained>);

impl Subject {
    /// The worst stress over the corners, and where. `place` finds a figure among the extremes by its pointer; `surges` are the
    /// largest diode currents at switch-on, one an output, which no figure of the steady state tells.
    #[must_use]
    pub fn worst(&self, extremes: &Extremes, place: impl Fn(&str) -> Option<usize>, surges: &[Worst]) -> Option<Worst> {
        if self.figures.is_empty() {
            return surges.get(self.output).cloned();
        }
        let ranges = self
            .figures
            .iter()
            .filter_map(|figure| extremes.ranges.get(place(figure)?));
        ranges
            .max_by(|a, b| a.maximum.total_cmp(&b.maximum))
            .map(|range| (range.maximum / self.shared_by, range.at_maximum.clone()))
    }
}

/// Everything a policy may rule on in a supply.
#[must_use]
pub fn subjects(supply: &Supply) -> Vec<Subject> {
    let mut subjects = Vec::new();
    for (index, output) in supply.outputs().iter().enumerate() {
        let at = format!("/outputs/{index}");
        diodes(supply, index, &at, &mut subjects);
        let rectifier = &output.rectifier;
        let mut capacitors: Vec<(String, &Capacitor)> = Vec::new();
        if let Some(coupling) = &rectifier.coupling {
            capacitors.push((format!("{at}/rectifier/coupling"), coupling));
        }
        if let Some(stack) = &rectifier.stack {
            let columns = if rectifier.coupling.is_some() { 1 } else { 2 };
            for _ in 0..columns {
                capacitors.push((format!("{at}/rectifier/stack"), stack));
            }
        }
        for (r, rail) in output.rails.iter().enumerate() {
            for (s, section) in rail.filter.iter().enumerate() {
                if let Some(capacitor) = &section.capacitor {
                    capacitors.push((format!("{at}/rails/{r}/filter/{s}/capacitor"), capacitor));
                }
            }
        }
        for (number, (component, capacitor)) in capacitors.into_iter().enumerate() {
            bank(index, number, component, capacitor, &mut subjects);
        }
    }
    if let Some(transformer) = supply.transformer() {
        subjects.push(Subject {
            component: "/transformer".to_owned(),
            quantity: Quantity::TransformerApparentPower,
            figures: vec!["/line/apparent_power".to_owned()],
            shared_by: 1.0,
            rating: transformer.rating.map(|r| r.low()),
            output: 0,
        });
    }
    subjects
}

fn diodes(supply: &Supply, index: usize, at: &str, subjects: &mut Vec<Subject>) {
    let rectifier = &supply.outputs()[index].rectifier;
    let ratings = &rectifier.diode.ratings;
    let figures = |field: &str| -> Vec<String> {
        (0..rectifier.circuit.diodes())
            .map(|d| format!("{at}/diodes/{d}/{field}"))
            .collect()
    };
    let rows = [
        (
            Quantity::DiodeReverseVoltage,
            figures("reverse_voltage_peak"),
            ratings.reverse_voltage,
        ),
        (
            Quantity::DiodeCurrentMean,
            figures("current_mean"),
            ratings.current_mean,
        ),
        (Quantity::DiodeCurrentRms, figures("current_rms"), ratings.current_rms),
        (Quantity::DiodeCurrentSurge, Vec::new(), ratings.current_surge),
    ];
    for (quantity, figures, rating) in rows {
        subjects.push(Subject {
            component: format!("{at}/rectifier/diode"),
            quantity,
            figures,
            shared_by: 1.0,
            rating: rating.map(|r| r.low()),
            output: index,
        });
    }
}

fn bank(output: usize, number: usize, component: String, capacitor: &Capacitor, subjects: &mut Vec<Subject>) {
    let at = format!("/outputs/{output}/capacitors/{number}");
    let rows = [
        (
            Quantity::CapacitorVoltage,
            "voltage_peak",
            1.0,
            capacitor.ratings.voltage,
        ),
        (
            Quantity::CapacitorRippleCurrent,
            "ripple_current_rms",
            f64::from(capacitor.count),
            capacitor.ratings.ripple_current,
        ),
    ];
    for (quantity, figure, shared_by, rating) in rows {
        subjects.push(Subject {
            component: component.clone(),
            quantity,
            figures: vec![format!("{at}/{figure}")],
            shared_by,
            rating: rating.map(|r| r.low()),
            output,
        });
    }
}
