//! Norms as accumulators: `add` a weighted pair, `merge` blocks in file order, `finish` to a number or a reason.
//!
//! ```text
//! absolute = sqrt( sum w |computed - exact|^2 )      relative = absolute / sqrt( sum w |exact|^2 )
//! ```
//! Sums are compensated, so that the number does not depend on how the points were cut into blocks beyond the
//! last bit, and blocks are always merged in file order, so that not even the last bit depends on threads.

use crate::numerics::sum::CompensatedSum;

/// Why a norm has no number.
#[derive(Debug, Clone, Copy, PartialEq, Eq, thiserror::Error)]
pub enum NoNorm {
    #[error("there are no points to sum over")]
    NoPoints,
    #[error("a value is not a finite number")]
    NotFinite,
    #[error("a weight is not positive")]
    NotPositiveWeight,
    #[error(
        "the exact field is zero, so that a relative error has no meaning; give the limit with a unit"
    )]
    ExactIsZero,
}

/// A finished norm.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Norm {
    /// Root of the weighted sum of squared errors.
    pub absolute: f64,
    /// The same of the exact field.
    pub exact: f64,
    /// Sum of the weights.
    pub weight: f64,
}

impl Norm {
    /// Roots of the weighted means: of the error, and of the exact field.
    pub fn root_mean_squares(&self) -> (f64, f64) {
        let root = self.weight.sqrt();
        (self.absolute / root, self.exact / root)
    }

    /// A pure number.
    ///
    /// # Errors
    /// [`NoNorm::ExactIsZero`].
    pub fn relative(&self) -> Result<f64, NoNorm> {
        if self.exact == 0.0 {
            Err(NoNorm::ExactIsZero)
        } else {
            Ok(self.absolute / self.exact)
        }
    }
}

/// A weighted sum of squares in the making.
#[derive(Debug, Clone, Default)]
pub struct SquaredError {
    error: CompensatedSum,
    exact: CompensatedSum,
    weight: CompensatedSum,
    points: u64,
    fault: Option<NoNorm>,
}

impl SquaredError {
    /// Adds one point: its weight, the squared distance and the squared size of the exact value.
    pub fn add(&mut self, weight: f64, distance_squared: f64, exact_squared: f64) {
        let (e, s) = (weight * distance_squared, weight * exact_squared);
        if weight <= 0.0 {
            self.fault.get_or_insert(NoNorm::NotPositiveWeight);
        } else if !(e.is_finite() && s.is_finite()) {
            self.fault.get_or_insert(NoNorm::NotFinite);
        }
        self.error.add(e);
        self.exact.add(s);
        self.weight.add(weight);
        self.points += 1;
    }

    /// Adds a later block.
    pub fn merge(&mut self, later: &Self) {
        self.error.merge(&later.error);
        self.exact.merge(&later.exact);
        self.weight.merge(&later.weight);
        self.points += later.points;
        if self.fault.is_none() {
            self.fault = later.fault;
        }
    }

    /// How many points were added.
    pub fn points(&self) -> u64 {
        self.points
    }

    /// # Errors
    /// The first fault met, or that nothing was added.
    pub fn finish(&self) -> Result<Norm, NoNorm> {
        if let Some(fault) = self.fault {
            return Err(fault);
        }
        if self.points == 0 {
            return Err(NoNorm::NoPoints);
        }
        let (error, exact) = (self.error.value(), self.exact.value());
        if !(error.is_finite() && exact.is_finite()) {
            return Err(NoNorm::NotFinite);
        }
        Ok(Norm {
            absolute: error.max(0.0).sqrt(),
            exact: exact.max(0.0).sqrt(),
            weight: self.weight.value(),
        })
    }
}

/// The largest of many, with where it was; ties go to the first, NaN poisons it.
#[derive(Debug, Clone, PartialEq)]
pub struct Largest<P> {
    pub value: f64,
    pub place: Option<P>,
}

impl<P> Default for Largest<P> {
    fn default() -> Self {
        Self {
            value: f64::NEG_INFINITY,
            place: None,
        }
    }
}

impl<P> Largest<P> {
    /// Keeps `value` if it is larger than what is kept, or not a number.
    pub fn offer(&mut self, value: f64, place: impl FnOnce() -> P) {
        if self.value.is_nan() {
            return;
        }
        if self.place.is_none() || value.is_nan() || value > self.value {
            self.value = value;
            self.place = Some(place());
        }
    }

    /// Adds a later block.
    pub fn merge(&mut self, later: Self) {
        if let Some(place) = later.place {
            self.offer(later.value, || place);
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_norm_by_hand() {
        let mut norm = SquaredError::default();
        norm.add(0.5, 4.0, 8.0);
        norm.add(2.0, 1.0, 6.0);
        let done = norm.finish().unwrap();
        assert_eq!((done.absolute, done.exact, done.weight), (2.0, 4.0, 2.5));
        assert_eq!(
            done.root_mean_squares(),
            (2.0 / 2.5_f64.sqrt(), 4.0 / 2.5_f64.sqrt())
        );
        assert_eq!(done.relative(), Ok(0.5));
    }

    #[test]
    fn merged_blocks_are_the_whole() {
        let mut whole = SquaredError::default();
        let mut parts = [SquaredError::default(), SquaredError::default()];
        for i in 0..1000 {
            let x = f64::from(i) * 0.1;
            whole.add(0.1 + x, x * x, 1.0 + x);
            parts[usize::from(i >= 300)].add(0.1 + x, x * x, 1.0 + x);
        }
        let [mut first, second] = parts;
        first.merge(&second);
        assert_eq!(first.finish(), whole.finish());
        assert_eq!(first.points(), 1000);
    }

    #[test]
    fn nothing_bad_passes_silently() {
        assert_eq!(SquaredError::default().finish(), Err(NoNorm::NoPoints));
        for (weight, error, fault) in [
            (1.0, f64::NAN, NoNorm::NotFinite),
            (1.0, f64::INFINITY, NoNorm::NotFinite),
            (0.0, 1.0, NoNorm::NotPositiveWeight),
            (-1.0, 1.0, NoNorm::NotPositiveWeight),
        ] {
            let mut norm = SquaredError::default();
            norm.add(weight, error, 1.0);
            let mut whole = SquaredError::default();
            whole.add(1.0, 1.0, 1.0);
            whole.merge(&norm);
            assert_eq!(whole.finish(), Err(fault));
        }
        let mut zero = SquaredError::default();
        zero.add(1.0, 1.0, 0.0);
        assert_eq!(zero.finish().unwrap().relative(), Err(NoNorm::ExactIsZero));
        let mut nan_weight = SquaredError::default();
        nan_weight.add(f64::NAN, 1.0, 1.0);
        assert_eq!(nan_weight.finish(), Err(NoNorm::NotFinite));
    }

    #[test]
    fn the_largest_keeps_the_first_of_equals_and_is_poisoned_by_nan() {
        let mut largest = Largest::default();
        for (i, v) in [1.0, 3.0, 3.0, 2.0].iter().enumerate() {
            largest.offer(*v, || i);
        }
        assert_eq!((largest.value, largest.place), (3.0, Some(1)));
        largest.offer(f64::NAN, || 7);
        largest.offer(9.0, || 8);
        assert!(largest.value.is_nan());
        assert_eq!(largest.place, Some(7));
    }
}
