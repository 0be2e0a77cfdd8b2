//! Observed orders: between two levels, and by least squares over all of them.
//!
//! ```text
//! pair:  p = ln(e1/e2) / ln(h1/h2)          fit:  ln e = ln C + p ln h,  95 % interval by Student's t
//! ```
//! Source: Oberkampf & Roy, Verification and Validation in Scientific Computing (2010), section 5.

use crate::numerics::line_fit;

/// Errors at or below this size, relative, are round-off: no order can be read from them.
pub const ROUND_OFF: f64 = 1e-13;

/// A least-squares order.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Fit {
    pub order: f64,
    /// Natural logarithm of the fitted error at h = 1.
    pub log_constant: f64,
    /// `None` with two levels, which a line always meets.
    pub standard_error: Option<f64>,
    /// Half width of the 95 % interval.
    pub half_width: Option<f64>,
    pub levels: usize,
}

/// Order between a coarser and a finer level.
///
/// # Errors
/// Why there is none: equal sizes, an error of zero, a size that does not fall.
pub fn pair_order((h1, e1): (f64, f64), (h2, e2): (f64, f64)) -> Result<f64, String> {
    if h1 <= h2 {
        return Err(format!(
            "the mesh size does not fall ({h1:.4e} to {h2:.4e})"
        ));
    }
    if e1 <= 0.0 || e2 <= 0.0 {
        return Err("an error of zero has no order".to_string());
    }
    let order = (e1 / e2).ln() / (h1 / h2).ln();
    if order.is_finite() {
        Ok(order)
    } else {
        Err("the order is not a finite number".to_string())
    }
}

/// Least-squares order through (h, error) of all levels.
///
/// # Errors
/// Fewer than two levels, or an error that is not positive.
pub fn fit_order(points: &[(f64, f64)]) -> Result<Fit, String> {
    if points.len() < 2 {
        return Err("a fit needs at least 2 levels".to_string());
    }
    if points.iter().any(|(h, e)| *h <= 0.0 || *e <= 0.0) {
        return Err("an error of zero has no order".to_string());
    }
    let logs: Vec<(f64, f64)> = points.iter().map(|(h, e)| (h.ln(), e.ln())).collect();
    let line = line_fit::fit(&logs).map_err(|e| e.to_string())?;
    let standard_error = line.slope_standard_error;
    let half_width = standard_error.and_then(|s| {
        line_fit::student_t_quantile(0.975, (points.len() - 2) as f64).map(|t| s * t)
    });
    Ok(Fit {
        order: line.slope,
        log_constant: line.intercept,
        standard_error,
        half_width,
        levels: points.len(),
    })
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_power_law_gives_its_exponent() {
        let points: Vec<(f64, f64)> = [1.0, 0.5, 0.2]
            .iter()
            .map(|h: &f64| (*h, 3.0 * h.powf(2.5)))
            .collect();
        assert!((pair_order(points[0], points[1]).unwrap() - 2.5).abs() < 1e-14);
        let fit = fit_order(&points).unwrap();
        assert!((fit.order - 2.5).abs() < 1e-14 && (fit.log_constant - 3.0_f64.ln()).abs() < 1e-14);
        assert!(fit.half_width.unwrap() < 1e-12);
    }

    #[test]
    fn what_has_no_order_says_why() {
        assert!(
            pair_order((1.0, 1.0), (1.0, 0.5))
                .unwrap_err()
                .contains("does not fall")
        );
        assert!(
            pair_order((1.0, 1.0), (0.5, 0.0))
                .unwrap_err()
                .contains("zero")
        );
        assert!(fit_order(&[(1.0, 1.0)]).is_err());
        assert_eq!(
            fit_order(&[(1.0, 1.0), (0.5, 0.3)]).unwrap().half_width,
            None
        );
    }

    /// Three points, slope and standard error by hand: x = 0, 1, 2; y = 0, 1.1, 1.9; slope 0.95,
    /// residuals -0.05, 0.1, -0.05, s^2 = 0.015, se = sqrt(0.015/2); t(0.975, 1) = 12.7062 (tables).
    #[test]
    fn the_interval_is_student_s() {
        let points: Vec<(f64, f64)> = [(0.0_f64, 0.0_f64), (1.0, 1.1), (2.0, 1.9)]
            .iter()
            .map(|(x, y)| (x.exp(), y.exp()))
            .collect();
        let fit = fit_order(&points).unwrap();
        assert!((fit.order - 0.95).abs() < 1e-14);
        assert!((fit.standard_error.unwrap() - (0.015_f64 / 2.0).sqrt()).abs() < 1e-12);
        assert!((fit.half_width.unwrap() - 12.7062 * (0.015_f64 / 2.0).sqrt()).abs() < 1e-4);
    }
}
