//! Natural modes of one conduction pattern: eigenvalues, and the change to real modal coordinates.
//!
//! The state is first weighted by the square root of its energy, `sqrt(C) v` and `sqrt(L) i`. The matrix of an RC network
//! is then symmetric and that of an LC network skew, so that the eigenvectors are as well conditioned as the circuit allows.

use super::SolverError;
use nalgebra::{Complex, DMatrix, Schur};

/// Where two modes fall together the matrix may have no basis of eigenvectors. It is then replaced by a neighbour this far
/// away, relative to its size: the two errors, of the change and of the ill-conditioned basis, balance near `eps^(2/3)`.
const NEIGHBOUR: f64 = 4e-11;
/// A basis worse than this is taken for defective.
const CONDITION_MAXIMUM: f64 = 1e6;

/// Eigenvalues and their eigenvectors.
type Eigen = (Vec<Complex<f64>>, Vec<Vec<Complex<f64>>>);

/// One natural mode: a real one, or a complex pair counted once.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Mode {
    /// Eigenvalue in 1/s, its imaginary part zero or positive.
    pub rate: Complex<f64>,
    /// Whether it stands for a pair.
    pub pair: bool,
    /// First of its one or two modal coordinates.
    pub at: usize,
}

/// The modes of a pattern. Modal coordinates `y` are real: one a real mode, real and imaginary part of a pair's.
#[derive(Clone, Debug)]
pub struct Modes {
    /// The modes.
    pub modes: Vec<Mode>,
    /// The state from modal coordinates: `x = right y`.
    pub right: DMatrix<f64>,
    /// Modal coordinates from the state: `y = left x`.
    pub left: DMatrix<f64>,
}

impl Modes {
    /// The modes of `dx/dt = matrix x`, with `weight` the square root of each state's energy weight.
    ///
    /// # Errors
    /// [`SolverError::Modes`] where even the neighbouring matrix has no usable basis.
    pub fn new(matrix: &DMatrix<f64>, weight: &[f64]) -> Result<Self, SolverError> {
        let n = matrix.nrows();
        let scaled = DMatrix::from_fn(n, n, |r, c| weight[r] * matrix[(r, c)] / weight[c]);
        let found = match n {
            0 => Some(Self {
                modes: Vec::new(),
                right: DMatrix::zeros(0, 0),
                left: DMatrix::zeros(0, 0),
            }),
            1 => Some(Self {
                modes: vec![Mode {
                    rate: Complex::new(scaled[(0, 0)], 0.0),
                    pair: false,
                    at: 0,
                }],
                right: DMatrix::identity(1, 1),
                left: DMatrix::identity(1, 1),
            }),
            _ => decompose(&scaled).or_else(|| decompose(&neighbour(&scaled))),
        };
        let mut modes = found.ok_or(SolverError::Modes)?;
        for (index, &w) in weight.iter().enumerate() {
            modes.right.row_mut(index).scale_mut(1.0 / w);
            modes.left.column_mut(index).scale_mut(w);
        }
        Ok(modes)
    }
}

/// The same matrix with its diagonal spread a little, so that no two eigenvalues coincide.
fn neighbour(matrix: &DMatrix<f64>) -> DMatrix<f64> {
    let size = matrix.norm() * NEIGHBOUR;
    let n = matrix.nrows();
    let mut near = matrix.clone();
    for r in 0..n {
        for c in 0..n {
            // Fixed numbers without a pattern: golden-ratio fractions.
            let fraction = ((r * n + c + 1) as f64 * 0.618_033_988_749_894_9).fract() - 0.5;
            near[(r, c)] += size * fraction;
        }
    }
    near
}

fn decompose(matrix: &DMatrix<f64>) -> Option<Modes> {
    let (rates, vectors) = if matrix.nrows() == 2 {
        two(matrix)
    } else {
        several(matrix)?
    };
    let n = matrix.nrows();
    let mut modes = Vec::with_capacity(n);
    let mut right = DMatrix::zeros(n, n);
    let mut at = 0;
    for (rate, vector) in rates.iter().zip(&vectors) {
        if rate.im < 0.0 {
            continue;
        }
        let pair = rate.im > 0.0;
        if at + usize::from(pair) >= n {
            return None;
        }
        for (row, component) in vector.iter().enumerate() {
            right[(row, at)] = component.re;
            if pair {
                right[(row, at)] = 2.0 * component.re;
                right[(row, at + 1)] = -2.0 * component.im;
            }
        }
        modes.push(Mode { rate: *rate, pair, at });
        at += 1 + usize::from(pair);
    }
    if at != n {
        return None;
    }
    let left = right.clone().try_inverse()?;
    let condition = left.norm() * right.norm();
    (condition.is_finite() && condition < CONDITION_MAXIMUM).then_some(Modes { modes, right, left })
}

/// Eigenvalues and eigenvectors of a two by two matrix.
fn two(m: &DMatrix<f64>) -> Eigen {
    let (a, b, c, d) = (m[(0, 0)], m[(0, 1)], m[(1, 0)], m[(1, 1)]);
    let half = 0.5 * (a - d);
    let discriminant = half * half + b * c;
    let mean = 0.5 * (a + d);
    let rates = if discriminant >= 0.0 {
        let root = discriminant.sqrt();
        // The larger by addition, the smaller by the product: no cancellation.
        let large = mean + root.copysign(mean);
        let determinant = a * d - b * c;
        let small = if large == 0.0 { 0.0 } else { determinant / large };
        vec![Complex::new(large, 0.0), Complex::new(small, 0.0)]
    } else {
        let root = (-discriminant).sqrt();
        vec![Complex::new(mean, root), Complex::new(mean, -root)]
    };
    let vectors = rates
        .iter()
        .map(|rate| {
            let (one, other) = (vec![Complex::from(b), rate - a], vec![rate - d, Complex::from(c)]);
            let size = |v: &[Complex<f64>]| v.iter().map(Complex::norm_sqr).sum::<f64>();
            let (mut best, norm) = if size(&one) >= size(&other) {
                let norm = size(&one);
                (one, norm)
            } else {
                let norm = size(&other);
                (other, norm)
            };
            if norm > 0.0 {
                let scale = norm.sqrt();
                best.iter_mut().for_each(|v| *v /= scale);
            }
            best
        })
        .collect();
    if b == 0.0 && c == 0.0 {
        let unit = |i: usize| (0..2).map(|j| Complex::from(f64::from(u8::from(i == j)))).collect();
        return (vec![Complex::from(a), Complex::from(d)], vec![unit(0), unit(1)]);
    }
    (rates, vectors)
}

/// Eigenvalues and eigenvectors by the complex Schur form.
fn several(matrix: &DMatrix<f64>) -> Option<Eigen> {
    let n = matrix.nrows();
    let complex = matrix.map(Complex::from);
    let (q, t) = Schur::try_new(complex, f64::EPSILON, 100 * n)?.unpack();
    let size = matrix.norm();
    let mut rates = Vec::with_capacity(n);
    let mut vectors = Vec::with_capacity(n);
    for k in 0..n {
        let mut rate = t[(k, k)];
        let mut inner = vec![Complex::from(0.0); n];
        inner[k] = Complex::from(1.0);
        for row in (0..k).rev() {
            let mut sum = Complex::from(0.0);
            for column in row + 1..=k {
                sum += t[(row, column)] * inner[column];
            }
            let mut gap = rate - t[(row, row)];
            if gap.norm() < f64::EPSILON * size {
                gap = Complex::from(f64::EPSILON * size);
            }
            inner[row] = sum / gap;
        }
        let mut vector: Vec<Complex<f64>> = (0..n).map(|row| (0..n).map(|c| q[(row, c)] * inner[c]).sum()).collect();
        if rate.im.abs() <= 64.0 * f64::EPSILON * size {
            rate.im = 0.0;
        }
        normalise(&mut vector);
        rates.push(rate);
        vectors.push(vector);
    }
    Some((rates, vectors))
}

/// Unit length, the largest component real.
fn normalise(vector: &mut [Complex<f64>]) {
    let norm = vector.iter().map(Complex::norm_sqr).sum::<f64>().sqrt();
    let largest = vector.iter().copied().fold(
        Complex::from(0.0),
        |m: Complex<f64>, v| if v.norm() > m.norm() { v } else { m },
    );
    if norm > 0.0 && largest.norm() > 0.0 {
        let turn = largest.conj() / (largest.norm() * norm);
        vector.iter_mut().for_each(|v| *v *= turn);
    }
}
