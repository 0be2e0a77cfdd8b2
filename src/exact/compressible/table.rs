//! Several smooth functions over one panel as Chebyshev series side by side: one recurrence gives them all.
//!
//! The panel is cut into equal parts until the series give what was sampled back to round-off, or there is no table.

use crate::numerics::{Chebyshev, chebyshev};

/// m, J - 1, srr, stt - srr, szz - srr, W.
pub(super) const LANES: usize = 6;
/// Chebyshev nodes a part.
const NODES: usize = 16;
/// Widest part in X: a pole at a distance of pi/2 leaves 15^-16.
const WIDEST: f64 = 0.4;
/// Most parts of a panel.
const MOST_PARTS: usize = 32;
/// What a series may miss of the largest value in the panel (sampled itself to round-off of it), by the law's own
/// magnification of round-off.
const MISS: f64 = 4.0 * f64::EPSILON;
/// Last coefficients that are left out, against the largest.
const SILENT: f64 = 3e-17;

type Values = [f64; LANES];

/// The functions over one panel.
#[derive(Debug, Clone)]
pub(super) struct Table {
    from: f64,
    to: f64,
    /// Parts per unit of X.
    rate: f64,
    parts: Vec<Part>,
}

#[derive(Debug, Clone)]
struct Part {
    middle: f64,
    /// 2 over the half width.
    double: f64,
    /// The first halved, so that it is added like the others.
    coefficients: Vec<Values>,
}

impl Table {
    /// Of what `sample` gives, with its magnification of round-off. `None` where that is not resolved or not finite.
    pub fn new(ends: (f64, f64), sample: impl Fn(f64) -> (Values, f64)) -> Option<Self> {
        let (from, to) = ends;
        let mut largest = [0.0_f64; LANES];
        for i in 0..=8 {
            let (values, _) = sample(from + (to - from) * f64::from(i) / 8.0);
            for (most, value) in largest.iter_mut().zip(values) {
                *most = most.max(value.abs());
            }
        }
        let mut count = ((to - from) / WIDEST).ceil().max(1.0) as usize;
        while count <= MOST_PARTS {
            let at = |i: usize| from + (to - from) * i as f64 / count as f64;
            let parts = (0..count).map(|i| Part::new((at(i), at(i + 1)), &largest, &sample));
            if let Some(parts) = parts.collect() {
                let rate = count as f64 / (to - from);
                return Some(Self {
                    from,
                    to,
                    rate,
                    parts,
                });
            }
            count *= 2;
        }
        None
    }

    /// All at `x`; `None` beyond the panel.
    pub fn at(&self, x: f64) -> Option<Values> {
        let round_off = 1e-12 * (self.to - self.from);
        if x < self.from - round_off || x > self.to + round_off {
            return None;
        }
        let place = ((x - self.from) * self.rate).max(0.0) as usize;
        let part = self.parts.get(place).or(self.parts.last())?;
        Some(part.at(x))
    }
}

impl Part {
    fn new(
        (from, to): (f64, f64),
        in_panel: &Values,
        sample: impl Fn(f64) -> (Values, f64),
    ) -> Option<Self> {
        let nodes = chebyshev::nodes(from, to, NODES);
        let samples: Vec<Values> = nodes.iter().map(|x| sample(*x).0).collect();
        let series: [Chebyshev; LANES] = std::array::from_fn(|lane| {
            let mut values = samples.iter().map(|s| s[lane]);
            Chebyshev::fit(from, to, NODES, |_| values.next().unwrap_or(f64::NAN))
        });
        let term = |j: usize| {
            let half = if j == 0 { 0.5 } else { 1.0 };
            series.each_ref().map(|s| half * s.coefficients()[j])
        };
        let largest = series.each_ref().map(Chebyshev::largest);
        let mut coefficients: Vec<Values> = (0..NODES).map(term).collect();
        let silent = |c: &Values| (0..LANES).all(|i| c[i].abs() <= SILENT * largest[i]);
        while coefficients.len() > 1 && coefficients.last().is_some_and(silent) {
            coefficients.pop();
        }
        let part = Self {
            middle: 0.5 * (from + to),
            double: 4.0 / (to - from),
            coefficients,
        };
        // away from the nodes, where a series that is too short is furthest off
        let holds = |i: usize| {
            let x = from + (to - from) * i as f64 / 4.0;
            let (wanted, loss) = sample(x);
            let (found, miss) = (part.at(x), MISS * (1.0 + loss));
            (0..LANES).all(|i| (found[i] - wanted[i]).abs() <= miss * in_panel[i])
        };
        (0..=4).all(holds).then_some(part)
    }

    /// Clenshaw's recurrence.
    fn at(&self, x: f64) -> Values {
        let twice = (x - self.middle) * self.double;
        let (mut b1, mut b2) = ([0.0; LANES], [0.0; LANES]);
        for c in self.coefficients.iter().skip(1).rev() {
            let mut next = [0.0; LANES];
            for i in 0..LANES {
                next[i] = twice * b1[i] + (c[i] - b2[i]);
            }
            (b1, b2) = (next, b1);
        }
        let mut values = [0.0; LANES];
        for i in 0..LANES {
            values[i] = self.coefficients[0][i] + (0.5 * twice * b1[i] - b2[i]);
        }
        values
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    // Red when a part, its place or a lane is mixed up.
    #[test]
    fn smooth_functions_come_back_to_round_off() {
        let f = |x: f64| [x.exp(), 1e-9 * x.sin(), 0.0, 3.0, x, (-3.0 * x).exp()];
        let table = Table::new((0.3, 1.5), |x| (f(x), 0.0)).unwrap();
        for i in 0..=300 {
            let x = 0.3 + 0.004 * f64::from(i);
            for (a, (b, largest)) in table
                .at(x)
                .unwrap()
                .iter()
                .zip(f(x).iter().zip([4.5, 1e-9, 0.0, 3.0, 1.5, 0.5]))
            {
                assert!((a - b).abs() <= 1e-15 * largest, "{x} {a} {b}");
            }
        }
        assert_eq!(table.at(1.6), None);
    }

    #[test]
    fn a_kink_or_a_nan_makes_no_table() {
        let kink = |x: f64| ([x.abs(), 0.0, 0.0, 0.0, 0.0, 0.0], 0.0);
        assert!(Table::new((-1.0, 1.1), kink).is_none());
        assert!(Table::new((-1.0, 1.0), |_| ([f64::NAN; LANES], 0.0)).is_none());
    }
}
