//! The mean of a function between a fixed end and a moving point, tabled once; and panels on which a function is smooth.
//!
//! `mean(x) = 1/(x - from) int_from^x f`. The integral itself is `(x - from) mean(x)`: exact zero at the fixed end, and no
//! digits lost near it.

use super::chebyshev::{Chebyshev, Piecewise};
use super::quadrature::GaussRule;

/// Chebyshev nodes a piece, and Gauss points of a node.
const NODES: usize = 20;
/// Halvings at most.
const DEPTH: usize = 40;
/// Points a panel in [`panels`], halvings on the way to one, and halvings in all.
const PANEL_NODES: usize = 16;
const PANEL_DEPTH: usize = 50;
const MOST_PANELS: usize = 500;

/// How well a function has to be resolved.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Resolution {
    /// Size of the last coefficients against the largest.
    pub relative: f64,
    /// Size of the last coefficients that is round-off whatever the largest is.
    pub absolute: f64,
}

/// The mean of a function from a fixed end on.
#[derive(Debug, Clone, PartialEq)]
pub struct RunningMean {
    from: f64,
    table: Piecewise,
}

impl RunningMean {
    /// Tables the mean of `f` over `from..x` for every x up to `to`. `None` when `f` is not finite or too steep.
    pub fn fit(
        from: f64,
        to: f64,
        wanted: Resolution,
        mut f: impl FnMut(f64) -> f64,
    ) -> Option<Self> {
        let mut pieces = Vec::new();
        if from != to {
            let mut job = Job {
                from,
                span: to - from,
                wanted,
                f: &mut f,
                pieces: &mut pieces,
            };
            job.halve(from, to, 0.0, DEPTH)?;
        }
        Some(Self {
            from,
            table: Piecewise::new(pieces),
        })
    }

    /// The mean over `from..x`, from the table; beyond it by quadrature of `f`, which must be the function tabled.
    pub fn value(&self, x: f64, f: impl FnMut(f64) -> f64) -> f64 {
        match self.table.value(x) {
            Some(value) => value,
            None => self.beyond(x, f),
        }
    }

    fn beyond(&self, x: f64, mut f: impl FnMut(f64) -> f64) -> f64 {
        if x == self.from {
            return f(x);
        }
        let end = self.table.pieces().last().map(|p| p.interval().1);
        let past = |end: &f64| (x - end) * (end - self.from) > 0.0;
        let (start, known) = match end.filter(past) {
            Some(end) => (
                end,
                (end - self.from) * self.table.value(end).unwrap_or(f64::NAN),
            ),
            None => (self.from, 0.0),
        };
        let span = end.map_or(1.0, |end| (end - self.from).abs());
        let steps = ((x - start).abs() / (0.5 * span)).ceil().clamp(1.0, 100.0);
        let width = (x - start) / steps;
        let rule = GaussRule::of(NODES);
        let mut sum = known;
        for i in 0..steps as usize {
            let left = start + width * i as f64;
            sum += rule.integrate(left, left + width, &mut f);
        }
        sum / (x - self.from)
    }
}

/// A table in the making.
struct Job<'a, F> {
    from: f64,
    span: f64,
    wanted: Resolution,
    f: &'a mut F,
    pieces: &'a mut Vec<Chebyshev>,
}

impl<F: FnMut(f64) -> f64> Job<'_, F> {
    /// Tables `lower..upper`, where the integral up to `lower` is `before`; the integral up to `upper`.
    fn halve(&mut self, lower: f64, upper: f64, before: f64, depth: usize) -> Option<f64> {
        if let Some(piece) = self.piece(lower, upper, before)? {
            self.pieces.push(piece);
            let rule = GaussRule::of(NODES);
            return Some(before + rule.integrate(lower, upper, &mut *self.f));
        }
        let middle = 0.5 * (lower + upper);
        let depth = depth.checked_sub(1)?;
        let at_middle = self.halve(lower, middle, before, depth)?;
        self.halve(middle, upper, at_middle, depth)
    }

    /// The mean over one piece, `None` inside when it is not resolved, outside when it is not finite.
    fn piece(&mut self, lower: f64, upper: f64, before: f64) -> Option<Option<Chebyshev>> {
        // the function itself first: cheap, and its round-off counts by the share of the piece only
        let plain = Chebyshev::fit(lower, upper, NODES, &mut *self.f);
        let share = ((upper - lower) / self.span).abs();
        let rough = Resolution {
            relative: 1e-9,
            absolute: 1e3 * self.wanted.absolute / share,
        };
        if plain.tail().is_nan() {
            return None;
        }
        if !resolved(&plain, rough) {
            return Some(None);
        }
        let rule = GaussRule::of(NODES);
        let from = self.from;
        let mean = Chebyshev::fit(lower, upper, NODES, |x| {
            (before + rule.integrate(lower, x, &mut *self.f)) / (x - from)
        });
        Some(resolved(&mean, self.wanted).then_some(mean))
    }
}

fn resolved(fit: &Chebyshev, wanted: Resolution) -> bool {
    fit.tail() * fit.largest() <= wanted.relative * fit.largest() + wanted.absolute
}

/// Ends of panels of `lower..upper` on each of which 16 Gauss points integrate `f` to round-off: interpolation at
/// as many points misses less than 1e-9, and Gauss's rule squares that. Where `f` is not finite or its halvings run out
/// the panels stay as they are: the caller's integrals show it.
pub fn panels(ends: (f64, f64), f: &mut impl FnMut(f64) -> f64) -> Vec<f64> {
    panels_in_noise(ends, &mut |x| (f(x), 0.0))
}

/// The same for a function with the size of its round-off beside it, which no halving resolves.
pub fn panels_in_noise(
    (lower, upper): (f64, f64),
    f: &mut impl FnMut(f64) -> (f64, f64),
) -> Vec<f64> {
    let mut ends = vec![lower];
    let mut left = MOST_PANELS;
    halve((lower, upper), PANEL_DEPTH, &mut left, f, &mut ends);
    ends
}

/// Appends the right ends of the panels of one interval.
fn halve(
    (lower, upper): (f64, f64),
    depth: usize,
    left: &mut usize,
    f: &mut impl FnMut(f64) -> (f64, f64),
    ends: &mut Vec<f64>,
) {
    let mut noise = 0.0_f64;
    let fit = Chebyshev::fit(lower, upper, PANEL_NODES, |x| {
        let (value, size) = f(x);
        noise = noise.max(size);
        value
    });
    let tail = fit.tail();
    let smooth = tail.is_nan() || tail * fit.largest() <= 1e-9 * fit.largest() + noise;
    let middle = 0.5 * (lower + upper);
    if smooth || depth == 0 || *left == 0 || middle == lower || middle == upper {
        ends.push(upper);
        return;
    }
    *left -= 1;
    halve((lower, middle), depth - 1, left, f, ends);
    halve((middle, upper), depth - 1, left, f, ends);
}

#[cfg(test)]
mod tests {
    use super::*;

    const FINE: Resolution = Resolution {
        relative: 2e-15,
        absolute: 0.0,
    };

    // Red when the integral up to a piece is forgotten or the division by x - from is.
    #[test]
    fn the_mean_of_a_steep_function_is_held_to_round_off() {
        let f = |x: f64| 1.0 / (x + 0.01);
        let mean = RunningMean::fit(1.0, 0.0, FINE, f).unwrap();
        for i in 0..100 {
            let x = 0.01 * i as f64;
            let exact = ((x - 1.0) / 1.01).ln_1p() / (x - 1.0);
            assert!((mean.value(x, f) / exact - 1.0).abs() < 4e-15, "{x}");
        }
        assert!((mean.value(1.0, f) - 1.0 / 1.01).abs() < 1e-15);
        // beyond both ends
        for x in [1.2, -0.004] {
            let exact = ((x - 1.0) / 1.01_f64).ln_1p() / (x - 1.0);
            assert!((mean.value(x, f) / exact - 1.0).abs() < 1e-9, "{x}");
        }
        assert_eq!(RunningMean::fit(0.0, 1.0, FINE, f64::ln), None);
        assert_eq!(
            RunningMean::fit(-0.3, 1.0, FINE, |x: f64| if x > 0.0 { 1.0 } else { 0.0 }),
            None
        );
        let empty = RunningMean::fit(2.0, 2.0, FINE, f64::exp).unwrap();
        assert_eq!(empty.value(2.0, f64::exp), 2.0_f64.exp());
    }

    #[test]
    fn panels_crowd_where_a_function_is_steep() {
        let mut f = |x: f64| 1.0 / (x + 1e-4);
        let ends = panels((0.0, 1.0), &mut f);
        assert!(ends.len() > 8 && ends[1] < 1e-3);
        let rule = GaussRule::of(16);
        let sum: f64 = ends.windows(2).map(|w| rule.integrate(w[0], w[1], f)).sum();
        assert!((sum / 10001.0_f64.ln() - 1.0).abs() < 2e-15);
    }
}
