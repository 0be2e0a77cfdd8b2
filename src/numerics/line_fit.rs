//! The straight line through points by least squares, with the uncertainty of its slope.
//!
//! ```text
//! b = Sxy/Sxx     a = mean y - b mean x     s^2 = sum (y - a - b x)^2/(n - 2)     se(b) = s/sqrt(Sxx)
//! ```
//! Draper & Smith, Applied Regression Analysis, 3rd ed. (1998), sections 1.2 and 1.4 (from memory). The true slope
//! lies within b +- t(1 - alpha/2; n - 2) se(b) with probability 1 - alpha, for normal independent errors.

use super::sum::CompensatedSum;
use statrs::distribution::{ContinuousCDF, StudentsT};

/// `y = intercept + slope x`.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct LineFit {
    pub intercept: f64,
    pub slope: f64,
    /// `None` with two points: a line through them leaves nothing over to judge by.
    pub slope_standard_error: Option<f64>,
}

/// Why no line can be fitted.
#[derive(Debug, Clone, PartialEq, thiserror::Error)]
pub enum FitError {
    /// Fewer than two points.
    #[error("a line needs at least two points, not {0}")]
    TooFewPoints(usize),
    /// A coordinate is NaN or infinite.
    #[error("point {index} is ({x}, {y})")]
    NotFinite { index: usize, x: f64, y: f64 },
    /// All x are the same.
    #[error("all points have x = {0}")]
    NoSpread(f64),
}

/// The least-squares line through `(x, y)` points.
pub fn fit(points: &[(f64, f64)]) -> Result<LineFit, FitError> {
    if points.len() < 2 {
        return Err(FitError::TooFewPoints(points.len()));
    }
    for (index, &(x, y)) in points.iter().enumerate() {
        if !(x.is_finite() && y.is_finite()) {
            return Err(FitError::NotFinite { index, x, y });
        }
    }
    let n = points.len() as f64;
    let sum = |f: &dyn Fn(f64, f64) -> f64| {
        let terms: CompensatedSum = points.iter().map(|&(x, y)| f(x, y)).collect();
        terms.value()
    };
    let (x_mean, y_mean) = (sum(&|x, _| x) / n, sum(&|_, y| y) / n);
    let sxx = sum(&|x, _| (x - x_mean) * (x - x_mean));
    let spread = points.iter().any(|p| p.0 != points[0].0);
    if !spread || sxx == 0.0 {
        return Err(FitError::NoSpread(points[0].0));
    }
    let slope = sum(&|x, y| (x - x_mean) * (y - y_mean)) / sxx;
    let left = |x: f64, y: f64| (y - y_mean) - slope * (x - x_mean);
    let residual = sum(&|x, y| left(x, y) * left(x, y));
    Ok(LineFit {
        intercept: y_mean - slope * x_mean,
        slope,
        slope_standard_error: (points.len() > 2).then(|| (residual / (n - 2.0) / sxx).sqrt()),
    })
}

/// The number a Student t variable of `degrees_of_freedom` stays below with probability `p`; `None` unless
/// 0 < p < 1 and the degrees of freedom are positive.
pub fn student_t_quantile(p: f64, degrees_of_freedom: f64) -> Option<f64> {
    if !(p > 0.0 && p < 1.0) {
        return None;
    }
    let student = StudentsT::new(0.0, 1.0, degrees_of_freedom).ok()?;
    Some(student.inverse_cdf(p))
}

#[cfg(test)]
mod tests {
    use super::*;

    // By hand: x = 0, 1, 2, 3 and y = 1, 3, 2, 5: Sxx = 5, Sxy = 5.5, residuals -0.1, 0.8, -1.3, 0.6, so
    // s^2 = 2.7/2 and se = sqrt(0.27). Red when n - 2 becomes n or n - 1.
    #[test]
    fn a_fit_done_by_hand() {
        let line = fit(&[(0.0, 1.0), (1.0, 3.0), (2.0, 2.0), (3.0, 5.0)]).unwrap();
        assert!((line.slope - 1.1).abs() < 1e-15);
        assert!((line.intercept - 1.1).abs() < 1e-15);
        assert!((line.slope_standard_error.unwrap() - 0.27_f64.sqrt()).abs() < 1e-15);
    }

    #[test]
    fn two_points_have_a_slope_and_no_uncertainty() {
        let line = fit(&[(1.0, 2.0), (3.0, 6.0)]).unwrap();
        assert_eq!((line.slope, line.slope_standard_error), (2.0, None));
    }

    #[test]
    fn what_is_no_line_is_said() {
        assert_eq!(fit(&[(1.0, 2.0)]), Err(FitError::TooFewPoints(1)));
        assert_eq!(fit(&[(0.1, 2.0); 3]), Err(FitError::NoSpread(0.1)));
        let broken = fit(&[(1.0, 2.0), (2.0, f64::NAN)]);
        assert!(matches!(broken, Err(FitError::NotFinite { index: 1, .. })));
    }

    // Closed forms: one degree of freedom tan(pi (p - 1/2)), two (2p - 1)/sqrt(2 p (1 - p)).
    #[test]
    fn student_t_agrees_with_closed_forms() {
        for p in [0.6, 0.9, 0.975, 0.995] {
            let one = (std::f64::consts::PI * (p - 0.5)).tan();
            let two = (2.0 * p - 1.0) / (2.0 * p * (1.0 - p)).sqrt();
            assert!((student_t_quantile(p, 1.0).unwrap() / one - 1.0).abs() < 1e-11);
            assert!((student_t_quantile(p, 2.0).unwrap() / two - 1.0).abs() < 1e-11);
        }
        assert_eq!(student_t_quantile(1.0, 2.0), None);
        assert_eq!(student_t_quantile(0.9, 0.0), None);
    }
}
