//! Axes: from values to pixels, and where the ticks go.

/// A straight map from values to pixels.
#[derive(Debug, Clone, Copy)]
pub struct Linear {
    low: f64,
    high: f64,
    start: f64,
    end: f64,
}

impl Linear {
    /// `low` is drawn at pixel `start`, `high` at `end`. Equal or unusable ends are moved apart.
    pub fn new((low, high): (f64, f64), (start, end): (f64, f64)) -> Self {
        // far from the ends of the doubles, so that no difference overflows or vanishes
        let tame = |v: f64| {
            if v.is_finite() {
                v.clamp(-1e300, 1e300)
            } else {
                0.0
            }
        };
        let (low, high) = (tame(low), tame(high));
        let least = (1e-12 * low.abs().max(high.abs())).max(1e-290);
        let (low, high) = match high - low > least {
            true => (low, high),
            false if low.abs() < 1e-280 => (low - 1.0, low + 1.0),
            false => (low - 0.5 * low.abs(), low + 0.5 * low.abs()),
        };
        Self {
            low,
            high,
            start,
            end,
        }
    }

    pub fn px(&self, value: f64) -> f64 {
        self.start + (value - self.low) / (self.high - self.low) * (self.end - self.start)
    }

    /// Round values, about `wanted` of them.
    pub fn ticks(&self, wanted: usize) -> Ticks {
        let raw = (self.high - self.low) / wanted.max(1) as f64;
        let power = 10f64.powf(raw.log10().floor());
        let step = [1.0, 2.0, 5.0, 10.0]
            .into_iter()
            .find(|m| m * power >= raw * 0.999)
            .unwrap_or(10.0)
            * power;
        let power = (step * 1.0001).log10().floor() as i32;
        Ticks {
            major: multiples(self.low, self.high, step),
            minor: multiples(self.low, self.high, step / 5.0),
            power,
        }
    }
}

/// Tick values of a linear axis.
#[derive(Debug, Clone, PartialEq)]
pub struct Ticks {
    pub major: Vec<f64>,
    /// Fifths, the major ones included.
    pub minor: Vec<f64>,
    /// Power of ten of the step.
    power: i32,
}

impl Ticks {
    /// Decimals that tell the major ticks apart when they are written in units of `10^unit`.
    pub fn decimals(&self, unit: i32) -> usize {
        (unit - self.power).clamp(0, 12) as usize
    }
}

fn multiples(low: f64, high: f64, step: f64) -> Vec<f64> {
    let slack = 1e-9 * (high - low);
    let (first, last) = (
        ((low - slack) / step).ceil(),
        ((high + slack) / step).floor(),
    );
    let count = (last - first + 1.0).clamp(0.0, 200.0) as usize;
    (0..count).map(|k| (first + k as f64) * step).collect()
}

/// A map of base-10 logarithms to pixels.
#[derive(Debug, Clone, Copy)]
pub struct Log {
    linear: Linear,
}

impl Log {
    /// Logarithm `low` is drawn at pixel `start`, `high` at `end`.
    pub fn new(ends: (f64, f64), pixels: (f64, f64)) -> Self {
        Self {
            linear: Linear::new(ends, pixels),
        }
    }

    /// The pixel of a positive value.
    pub fn px(&self, value: f64) -> f64 {
        self.linear.px(value.log10())
    }

    /// The pixel of a base-10 logarithm.
    pub fn px_log(&self, logarithm: f64) -> f64 {
        self.linear.px(logarithm)
    }

    /// Whole decades inside.
    pub fn decades(&self) -> Vec<i32> {
        let (low, high) = (self.linear.low, self.linear.high);
        ((low - 1e-9).ceil() as i32..=(high + 1e-9).floor() as i32).collect()
    }

    /// Pixels of 2 to 9 in every decade.
    pub fn minor(&self) -> Vec<f64> {
        let (low, high) = (self.linear.low, self.linear.high);
        let decades = low.floor() as i32..=high.ceil() as i32;
        let values =
            decades.flat_map(|d| (2..=9).map(move |m| f64::from(d) + f64::from(m).log10()));
        values
            .filter(|v| (low..=high).contains(v))
            .map(|v| self.px_log(v))
            .collect()
    }
}

/// Heights for labels that want to sit at `wanted` but need `gap` between them, inside `(top, bottom)`: the
/// nearest in the least-squares sense (pooling of adjacent violators on `wanted - k gap`), in the order given.
pub fn spread(wanted: &[f64], gap: f64, (top, bottom): (f64, f64)) -> Vec<f64> {
    let mut order: Vec<usize> = (0..wanted.len()).collect();
    order.sort_by(|a, b| wanted[*a].total_cmp(&wanted[*b]));
    // blocks of neighbours that move together: (sum, count)
    let mut blocks: Vec<(f64, usize)> = Vec::new();
    for (k, &index) in order.iter().enumerate() {
        blocks.push((wanted[index] - k as f64 * gap, 1));
        while let [.., (s1, n1), (s2, n2)] = blocks[..] {
            if s1 / n1 as f64 <= s2 / n2 as f64 {
                break;
            }
            blocks.pop();
            blocks.pop();
            blocks.push((s1 + s2, n1 + n2));
        }
    }
    let last = wanted.len().saturating_sub(1) as f64 * gap;
    let means = blocks
        .iter()
        .flat_map(|&(sum, n)| std::iter::repeat_n(sum / n as f64, n));
    let mut heights = vec![0.0; wanted.len()];
    for (k, (index, mean)) in order.into_iter().zip(means).enumerate() {
        heights[index] = mean.min(bottom - last).max(top) + k as f64 * gap;
    }
    heights
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn ticks_are_round_and_inside() {
        let ticks = Linear::new((-0.06, 0.15), (0.0, 100.0)).ticks(5);
        let texts: Vec<_> = ticks
            .major
            .iter()
            .map(|t| format!("{t:.*}", ticks.decimals(0)))
            .collect();
        assert_eq!(texts, ["-0.05", "0.00", "0.05", "0.10", "0.15"]);
    }

    #[test]
    fn an_axis_without_length_is_still_an_axis() {
        let flat = Linear::new((3.0, 3.0), (0.0, 100.0));
        assert!(flat.px(3.0).is_finite());
        assert!(!flat.ticks(4).major.is_empty());
    }

    #[test]
    fn labels_keep_their_gap_and_their_place() {
        let heights = spread(&[50.0, 52.0, 150.0], 20.0, (0.0, 200.0));
        assert_eq!(heights, [41.0, 61.0, 150.0]);
        assert_eq!(spread(&[195.0, 199.0], 20.0, (0.0, 200.0)), [180.0, 200.0]);
        assert_eq!(spread(&[], 20.0, (0.0, 200.0)), Vec::<f64>::new());
    }
}
