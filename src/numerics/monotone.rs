//! Monotone interpolation of a table: a smooth curve through all points that has no bump of its own.
//!
//! Piecewise cubic Hermite with the slopes of Fritsch & Butland, SIAM J. Sci. Stat. Comput. 5 (1984) 300 (weighted harmonic
//! mean) inside, three-point one-sided slopes at the ends, limited so that no piece overshoots (from memory; the same choices
//! as the PCHIP routine of the common numerical libraries, against which it is tested).

/// A table with the slopes at its points.
#[derive(Debug, Clone, PartialEq)]
pub struct Monotone {
    x: Vec<f64>,
    y: Vec<f64>,
    slopes: Vec<f64>,
}

impl Monotone {
    /// Through points with rising `x`, at least two.
    ///
    /// # Errors
    /// The index of the first point that is not finite or not to the right of the one before it.
    pub fn new(x: &[f64], y: &[f64]) -> Result<Self, usize> {
        let sound = |i: usize| x[i].is_finite() && y[i].is_finite() && (i == 0 || x[i] > x[i - 1]);
        let count = x.len().min(y.len());
        if let Some(odd) = (0..count).find(|&i| !sound(i)) {
            return Err(odd);
        }
        if count < 2 || x.len() != y.len() {
            return Err(count);
        }
        Ok(Self {
            x: x.to_vec(),
            y: y.to_vec(),
            slopes: slopes(x, y),
        })
    }

    /// From the first to the last x.
    pub fn range(&self) -> (f64, f64) {
        (self.x[0], self.x[self.x.len() - 1])
    }

    /// The curve at `x`, or `None` outside the table.
    pub fn value(&self, x: f64) -> Option<f64> {
        let (low, high) = self.range();
        if !(low..=high).contains(&x) {
            return None;
        }
        let after = self.x.partition_point(|&known| known <= x);
        let i = after.clamp(1, self.x.len() - 1) - 1;
        let h = self.x[i + 1] - self.x[i];
        let t = (x - self.x[i]) / h;
        let rise = self.y[i + 1] - self.y[i];
        let (s0, s1) = (self.slopes[i] * h, self.slopes[i + 1] * h);
        let bend = t * (s0 - rise) * (1.0 - t) * (1.0 - t) - t * t * (s1 - rise) * (1.0 - t);
        Some(self.y[i] + t * rise + bend)
    }
}

fn slopes(x: &[f64], y: &[f64]) -> Vec<f64> {
    let n = x.len();
    let h: Vec<f64> = x.windows(2).map(|w| w[1] - w[0]).collect();
    let chord: Vec<f64> = (0..n - 1).map(|i| (y[i + 1] - y[i]) / h[i]).collect();
    if n == 2 {
        return vec![chord[0]; 2];
    }
    let inner = |i: usize| {
        let (before, after) = (chord[i - 1], chord[i]);
        if before * after <= 0.0 {
            return 0.0;
        }
        let (w1, w2) = (2.0 * h[i] + h[i - 1], h[i] + 2.0 * h[i - 1]);
        (w1 + w2) / (w1 / before + w2 / after)
    };
    let mut slopes = vec![end(h[0], h[1], chord[0], chord[1])];
    slopes.extend((1..n - 1).map(inner));
    slopes.push(end(h[n - 2], h[n - 3], chord[n - 2], chord[n - 3]));
    slopes
}

/// Three-point slope at an end, kept to the sign and thrice the size of the chord there.
fn end(near: f64, far: f64, chord: f64, next: f64) -> f64 {
    let slope = ((2.0 * near + far) * chord - near * next) / (near + far);
    if slope * chord <= 0.0 {
        0.0
    } else if chord * next <= 0.0 && slope.abs() > 3.0 * chord.abs() {
        3.0 * chord
    } else {
        slope
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    // scipy 1.x PchipInterpolator([0, 1, 2.5, 3, 5], [0, 2, 2.5, 4, 4.1]) at 0.3, 1.7, 2.75, 4.9: see the script in the note
    // below. Red when a weight or an end slope changes.
    // python: from scipy.interpolate import PchipInterpolator as P; P([0,1,2.5,3,5],[0,2,2.5,4,4.1])([.3,1.7,2.75,4.9])
    #[test]
    fn the_common_routine_gives_the_same() {
        let curve = Monotone::new(&[0.0, 1.0, 2.5, 3.0, 5.0], &[0.0, 2.0, 2.5, 4.0, 4.1]).unwrap();
        for (x, y) in SCIPY {
            assert!((curve.value(x).unwrap() - y).abs() < 1e-14, "{x}");
        }
        assert_eq!(curve.value(5.0), Some(4.1));
        assert_eq!(curve.value(0.0), Some(0.0));
        assert_eq!(curve.value(5.000001), None);
        assert_eq!(curve.range(), (0.0, 5.0));
    }

    const SCIPY: [(f64, f64); 4] = [
        (0.3, 0.7861999999999999),
        (1.7, 2.223888319088319),
        (2.75, 3.285647279549718),
        (4.9, 4.099854268292682),
    ];

    #[test]
    fn what_is_no_table_is_refused_at_its_point() {
        assert_eq!(Monotone::new(&[0.0, 1.0, 1.0], &[0.0, 1.0, 2.0]), Err(2));
        assert_eq!(Monotone::new(&[0.0, f64::NAN], &[0.0, 1.0]), Err(1));
        assert_eq!(Monotone::new(&[0.0], &[0.0]), Err(1));
    }

    proptest! {
        // Red when a slope may overshoot.
        #[test]
        fn between_two_points_the_curve_stays_between_them(
            steps in prop::collection::vec((0.01..2.0_f64, -1.0..1.0_f64), 2..8), place in 0.0..1.0_f64,
        ) {
            let (mut x, mut y) = (vec![0.0], vec![0.0]);
            for (dx, dy) in steps {
                x.push(x[x.len() - 1] + dx);
                y.push(y[y.len() - 1] + dy);
            }
            let curve = Monotone::new(&x, &y).unwrap();
            for i in 0..x.len() - 1 {
                let value = curve.value(x[i] + place * (x[i + 1] - x[i])).unwrap();
                let (low, high) = (y[i].min(y[i + 1]), y[i].max(y[i + 1]));
                prop_assert!((low - 1e-12..=high + 1e-12).contains(&value));
            }
        }
    }
}
