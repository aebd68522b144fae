//! Which switches conduct: the complementarity conditions at one instant.
//!
//! Each switch has a slack that must not become negative: its current while it conducts, its threshold less its voltage
//! while it is open. At an instant a slack may be zero; then its first derivative decides, then its second, and so on: the
//! slacks' derivatives must be positive in lexicographic order. Violated conditions are mended one at a time, the lowest
//! first (least-index principal pivoting, Murty 1974), and where that does not end, patterns are tried by their distance
//! from the present one. Networks of ideal diodes as complementarity problems: van Bokhoven 1981; Vandenberghe, De Moor
//! and Vandewalle 1989.

use super::SolverError;
use super::basis::SINUSOID_FLOOR;
use super::regime::Regime;
use crate::network::{Network, Unsolvable};

/// Orders of derivatives that are looked at.
pub const ORDERS: usize = 5;
/// A derivative this far below the sum of its terms' magnitudes is rounding.
pub const NOISE: f64 = 1e-11;
/// Where no pattern holds with slacks judged that finely, rounding was larger than it should have been: they are judged again,
/// more coarsely by these factors.
const LENIENCY: [f64; 3] = [1.0, 1e2, 1e4];
/// What a state component counts for near its zero, of its scale, where rounding is judged.
const STATE_FLOOR: f64 = 0.1;
/// Widest distance, in switches, at which other patterns are tried.
const REACH: u32 = 6;
/// A state component that moves by more than this, relative to its scale, has jumped.
const JUMP: f64 = 1e-7;

/// The patterns of a network made ready so far. Kept while one supply is solved.
#[derive(Debug)]
pub struct Regimes<'a> {
    /// The network.
    pub network: &'a Network,
    known: Vec<(u64, Result<usize, Unsolvable>)>,
    ready: Vec<Regime>,
    /// One bit a switch that is a diode, not part of a load.
    diodes: u64,
    /// How much more coarsely than usual slacks are judged.
    leniency: f64,
}

/// The instant at which a pattern is chosen.
#[derive(Clone, Copy, Debug)]
pub struct Instant<'a> {
    /// Seconds from the zero crossing of the line.
    pub time: f64,
    /// Every capacitor's voltage and every inductor's current.
    pub full: &'a [f64],
    /// The oscillator's time functions.
    pub sources: &'a [f64],
}

/// A pattern chosen, with the minimal state it begins from.
#[derive(Clone, Debug)]
pub struct Choice {
    /// Index of the regime.
    pub regime: usize,
    /// Its minimal state.
    pub state: Vec<f64>,
    /// The extended state and its derivatives.
    pub derivatives: Vec<Derivative>,
}

/// The extended state, or one of its time derivatives.
#[derive(Clone, Debug)]
pub struct Derivative {
    /// Its components.
    pub value: Vec<f64>,
    /// For each component the sum of the magnitudes it was added up from: its rounding is a fraction of that.
    pub size: Vec<f64>,
}

impl Derivative {
    /// A row times this vector, and what of it may be rounding.
    #[must_use]
    pub fn dot(&self, row: &[f64]) -> (f64, f64) {
        let value = row.iter().zip(&self.value).map(|(a, b)| a * b).sum();
        let size: f64 = row.iter().zip(&self.size).map(|(a, b)| (a * b).abs()).sum();
        (value, NOISE * size)
    }
}

struct Trial {
    choice: Choice,
    jumps: bool,
    /// Switches whose condition is violated.
    violated: u64,
    /// Open diodes that stay exactly at their threshold.
    resting: u64,
}

impl<'a> Regimes<'a> {
    /// No pattern yet.
    #[must_use]
    pub fn new(network: &'a Network) -> Self {
        Self {
            network,
            known: Vec::new(),
            ready: Vec::new(),
            diodes: network.diodes(),
            leniency: 1.0,
        }
    }

    /// The regime at an index.
    #[must_use]
    pub fn get(&self, index: usize) -> &Regime {
        &self.ready[index]
    }

    /// How many patterns were assembled.
    #[must_use]
    pub fn assembled(&self) -> usize {
        self.known.len()
    }

    fn find(&mut self, conducting: u64) -> Result<Result<usize, Unsolvable>, SolverError> {
        if let Some((_, found)) = self.known.iter().find(|(pattern, _)| *pattern == conducting) {
            return Ok(*found);
        }
        let found = match Regime::new(self.network, conducting)? {
            Ok(regime) => {
                self.ready.push(regime);
                Ok(self.ready.len() - 1)
            }
            Err(unsolvable) => Err(unsolvable),
        };
        self.known.push((conducting, found));
        Ok(found)
    }

    /// A full state as a pattern holds it: a current that has no path there is zero. The state as it is where the pattern contradicts
    /// itself, or where more than rounding would be lost.
    ///
    /// # Errors
    /// A [`SolverError`] where the pattern's numbers fail.
    pub fn settled(&mut self, conducting: u64, full: &[f64], sources: &[f64]) -> Result<Vec<f64>, SolverError> {
        let Ok(index) = self.find(conducting)? else {
            return Ok(full.to_vec());
        };
        let regime = &self.ready[index];
        let extended = extend(&contract(regime, full, sources), sources);
        let held = multiply(&regime.pattern.expand, &extended);
        let jumps = self.jumps(&held, full);
        Ok(if jumps { full.to_vec() } else { held })
    }

    /// Whether a full state differs from another by more than rounding.
    fn jumps(&self, new: &[f64], old: &[f64]) -> bool {
        let (network, capacitors) = (self.network, self.network.capacitors.len());
        new.iter().zip(old).enumerate().any(|(i, (new, old))| {
            let scale = if i < capacitors {
                network.voltage_scale
            } else {
                network.current_scale
            };
            (new - old).abs() > JUMP * scale.max(old.abs())
        })
    }

    /// The pattern in which every switch's condition holds from `instant` on, looked for from `hint` outwards.
    ///
    /// # Errors
    /// [`SolverError::NoConduction`] where none is found.
    pub fn choose(&mut self, instant: Instant<'_>, hint: u64) -> Result<Choice, SolverError> {
        let mut found = Err(SolverError::Modes);
        for leniency in LENIENCY {
            self.leniency = leniency;
            found = self.search(instant, hint);
            if !matches!(found, Err(SolverError::NoConduction { .. })) {
                break;
            }
        }
        found
    }

    fn search(&mut self, instant: Instant<'_>, hint: u64) -> Result<Choice, SolverError> {
        let mut tried = Vec::new();
        let mut reason = Unsolvable::ShortedSource;
        let mut pattern = hint;
        let mut fallback: Option<Choice> = None;
        let switches = self.network.switches.len() as u32;
        for _ in 0..4 * switches + 4 {
            if tried.contains(&pattern) {
                break;
            }
            tried.push(pattern);
            match self.trial(instant, pattern)? {
                Err(unsolvable) => {
                    reason = unsolvable;
                    break;
                }
                Ok(trial) if trial.violated == 0 && !trial.jumps => return self.shared(instant, trial),
                Ok(trial) if trial.violated == 0 => {
                    fallback.get_or_insert(trial.choice);
                    break;
                }
                Ok(trial) => pattern ^= 1 << trial.violated.trailing_zeros(),
            }
        }
        for distance in 1..=REACH.min(switches) {
            for flips in combinations(switches, distance) {
                let pattern = hint ^ flips;
                if tried.contains(&pattern) {
                    continue;
                }
                match self.trial(instant, pattern)? {
                    Err(unsolvable) => reason = unsolvable,
                    Ok(trial) if trial.violated == 0 && !trial.jumps => return self.shared(instant, trial),
                    Ok(trial) if trial.violated == 0 => {
                        fallback.get_or_insert(trial.choice);
                    }
                    Ok(_) => {}
                }
            }
        }
        fallback.ok_or(SolverError::NoConduction {
            time: instant.time,
            reason,
        })
    }

    /// Where diodes rest exactly at their threshold without being needed, they share the current with those that conduct,
    /// as equal ones do.
    fn shared(&mut self, instant: Instant<'_>, trial: Trial) -> Result<Choice, SolverError> {
        if trial.resting == 0 {
            return Ok(trial.choice);
        }
        let pattern = self.ready[trial.choice.regime].pattern.conducting | trial.resting;
        match self.trial(instant, pattern)? {
            Ok(shared) if shared.violated == 0 && !shared.jumps => Ok(shared.choice),
            _ => Ok(trial.choice),
        }
    }

    fn trial(&mut self, instant: Instant<'_>, pattern: u64) -> Result<Result<Trial, Unsolvable>, SolverError> {
        let index = match self.find(pattern)? {
            Ok(index) => index,
            Err(unsolvable) => return Ok(Err(unsolvable)),
        };
        let regime = &self.ready[index];
        let state = contract(regime, instant.full, instant.sources);
        let extended = extend(&state, instant.sources);
        let expanded = multiply(&regime.pattern.expand, &extended);
        let jumps = self.jumps(&expanded, instant.full);
        let derivatives = derivatives(self.network, regime, extended);
        let (mut violated, mut resting) = (0, 0);
        for (switch, row) in regime.slack.iter().enumerate() {
            match sign(row, &derivatives, self.leniency) {
                Some(false) => violated |= 1 << switch,
                None => resting |= 1 << switch,
                Some(true) => {}
            }
        }
        resting &= !pattern & self.diodes;
        Ok(Ok(Trial {
            choice: Choice {
                regime: index,
                state,
                derivatives,
            },
            jumps,
            violated,
            resting,
        }))
    }
}

/// Whether a row's first derivative that is not zero is positive; `None` where all are zero.
fn sign(row: &[f64], derivatives: &[Derivative], leniency: f64) -> Option<bool> {
    derivatives
        .iter()
        .map(|derivative| derivative.dot(row))
        .find(|(value, noise)| value.abs() > leniency * noise)
        .map(|(value, _)| value > 0.0)
}

/// The minimal state of a regime from the full state.
#[must_use]
pub fn contract(regime: &Regime, full: &[f64], sources: &[f64]) -> Vec<f64> {
    let matrix = &regime.pattern.contract;
    (0..matrix.nrows())
        .map(|r| {
            let mut sum = 0.0;
            for (c, value) in full.iter().chain(sources).chain(std::iter::once(&1.0)).enumerate() {
                sum += matrix[(r, c)] * value;
            }
            sum
        })
        .collect()
}

/// `[state, sources, 1]`.
#[must_use]
pub fn extend(state: &[f64], sources: &[f64]) -> Vec<f64> {
    let mut extended = Vec::with_capacity(state.len() + sources.len() + 1);
    extended.extend_from_slice(state);
    extended.extend_from_slice(sources);
    extended.push(1.0);
    extended
}

/// A matrix of rows times an extended state.
#[must_use]
pub fn multiply(rows: &nalgebra::DMatrix<f64>, extended: &[f64]) -> Vec<f64> {
    (0..rows.nrows())
        .map(|r| extended.iter().enumerate().map(|(c, v)| rows[(r, c)] * v).sum())
        .collect()
}

/// The magnitudes that rounding is a fraction of: a component near its zero counts for a part of its scale.
fn rounding_sizes(network: &Network, regime: &Regime, extended: &[f64]) -> Vec<f64> {
    let n = regime.pattern.states;
    let floor = |index: usize| match index {
        _ if index < regime.pattern.voltages => STATE_FLOOR * network.voltage_scale,
        _ if index < n => STATE_FLOOR * network.current_scale,
        _ => SINUSOID_FLOOR,
    };
    extended
        .iter()
        .enumerate()
        .map(|(index, v)| v.abs().max(floor(index)))
        .collect()
}

/// The extended state and its time derivatives.
fn derivatives(network: &Network, regime: &Regime, extended: Vec<f64>) -> Vec<Derivative> {
    let size = rounding_sizes(network, regime, &extended);
    let mut all = vec![Derivative { value: extended, size }];
    let sizes = regime.pattern.rate.abs();
    for order in 1..ORDERS {
        let last = &all[order - 1];
        let mut value = multiply(&regime.pattern.rate, &last.value);
        let mut size = multiply(&sizes, &last.size);
        let n = value.len();
        for index in 0..network.oscillator.orders.len() {
            let angular = network.oscillator.angular(index);
            let (sine, cosine) = (n + 2 * index, n + 2 * index + 1);
            value.push(angular * last.value[cosine]);
            value.push(-angular * last.value[sine]);
            size.push(angular * last.size[cosine]);
            size.push(angular * last.size[sine]);
        }
        value.push(0.0);
        size.push(0.0);
        all.push(Derivative { value, size });
    }
    all
}

/// All choices of `count` of the lowest `of` bits.
fn combinations(of: u32, count: u32) -> impl Iterator<Item = u64> {
    let last: u64 = if of >= 64 { u64::MAX } else { (1 << of) - 1 };
    let mut next = if count == 0 || count > of {
        None
    } else {
        Some((1_u64 << count) - 1)
    };
    std::iter::from_fn(move || {
        let now = next?;
        // The next larger number with as many bits (Gosper).
        let low = now & now.wrapping_neg();
        let ripple = now.checked_add(low);
        next = ripple.map(|r| r | (((now ^ r) >> 2) / low)).filter(|&n| n <= last);
        Some(now)
    })
}
