//! The Langevin function `L(b) = coth b - 1/b` of a freely jointed chain, and its inverse, b >= 0.
//!
//! No formula serves every b: the plain one subtracts 1/b from 1/b near zero, and 1 - L, which is what counts near a
//! locking stretch, is lost in L when b is large. So each value comes with `gap = 1 - L` of its own.

/// Levels of the continued fraction: full digits up to b = 3.
const LEVELS: usize = 20;

/// Between the continued fraction and the exponential form.
const SWITCH: f64 = 3.0;

/// (-1)^(n+1) 2 zeta(2n)/pi^(2n), n = 1, 2, ..: L is the sum of these times b^(2n-1), for b < pi.
const SERIES: [f64; 18] = [
    0.3333333333333333,
    -0.022222222222222223,
    0.0021164021164021165,
    -0.00021164021164021165,
    2.1377799155576935e-5,
    -2.1644042808063972e-6,
    2.1925947851873778e-7,
    -2.2214608789979678e-8,
    2.2507846516808994e-9,
    -2.2805151204592183e-10,
    2.3106432599002624e-11,
    -2.3411706819824882e-12,
    2.3721017400233653e-13,
    -2.4034415333307705e-14,
    2.4351954029183367e-15,
    -2.4673688045172075e-16,
    2.499967277122081e-17,
    -2.532996435740635e-18,
];

/// L and its derivatives at one b.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Langevin {
    pub value: f64,
    /// 1 - L, with all its digits.
    pub gap: f64,
    pub slope: f64,
    pub curvature: f64,
}

/// The inverse with its derivatives by L.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct InverseLangevin {
    pub value: f64,
    pub slope: f64,
    pub curvature: f64,
}

impl Langevin {
    /// At b >= 0.
    pub fn at(b: f64) -> Self {
        if b >= SWITCH {
            return Self::large(b);
        }
        let square = b * b;
        let mut tail = (2 * LEVELS + 1) as f64;
        for level in (1..LEVELS).rev() {
            tail = (2 * level + 1) as f64 + square / tail;
        }
        let by_b = 1.0 / tail;
        let value = b * by_b;
        let slope = 1.0 - value * value - 2.0 * by_b;
        let curvature = if b < 1.0 {
            let terms = SERIES.iter().enumerate().skip(1).rev();
            let factor = |n: usize| ((2 * n + 1) * (2 * n)) as f64;
            b * terms.fold(0.0, |sum, (n, c)| factor(n) * c + sum * square)
        } else {
            -2.0 * value * slope - 2.0 * (slope - by_b) / b
        };
        Self {
            value,
            gap: 1.0 - value,
            slope,
            curvature,
        }
    }

    fn large(b: f64) -> Self {
        // sinh b and its powers would overflow where these are long zero
        let (down, drop) = ((-2.0 * b).exp(), -(-2.0 * b).exp_m1());
        let inverse_square = 4.0 * down / (drop * drop);
        let gap = 1.0 / b - 2.0 * down / drop;
        Self {
            value: 1.0 - gap,
            gap,
            slope: 1.0 / (b * b) - inverse_square,
            curvature: 2.0 * inverse_square * (1.0 + down) / drop - 2.0 / (b * b * b),
        }
    }
}

impl InverseLangevin {
    /// The b of `L(b) = y`, from y and `gap = 1 - y`; infinite or NaN unless 0 <= y and 0 < gap.
    pub fn at(y: f64, gap: f64) -> Self {
        let mut b = y * (3.0 - y * y) / (gap * (1.0 + y));
        // two Halley steps reach round-off from this start at every y
        for _ in 0..2 {
            let l = Langevin::at(b);
            let off = if b >= SWITCH {
                gap - l.gap
            } else {
                l.value - y
            };
            b -= 2.0 * off * l.slope / (2.0 * l.slope * l.slope - off * l.curvature);
        }
        let l = Langevin::at(b);
        Self {
            value: b,
            slope: 1.0 / l.slope,
            curvature: -l.curvature / (l.slope * l.slope * l.slope),
        }
    }
}

/// ln(sinh b / b), b > 0.
pub fn ln_sinh_ratio(b: f64) -> f64 {
    if b < 1.0 {
        // the integral of L from zero, term by term
        let terms = SERIES.iter().enumerate().rev();
        let square = b * b;
        return square * terms.fold(0.0, |sum, (n, c)| c / (2 * n + 2) as f64 + sum * square);
    }
    b - std::f64::consts::LN_2 + (-(-2.0 * b).exp()).ln_1p() - b.ln()
}

#[cfg(test)]
mod tests {
    use super::*;

    // b, L, 1 - L, L', L'' at 40 digits. Red when a level, a coefficient or a branch is wrong.
    #[test]
    fn values_are_those_of_many_digits() {
        for (b, value, gap, slope, curvature) in [
            (
                1e-6,
                3.333333333333111e-7,
                0.9999996666666666,
                0.33333333333326665,
                -1.33333333333291e-7,
            ),
            (
                0.3,
                0.09940509698840826,
                0.9005949030115917,
                0.3274179801033368,
                -0.038878410860125744,
            ),
            (
                0.99,
                0.3102709809859201,
                0.6897290190140799,
                0.2769218557602164,
                -0.09813824675967536,
            ),
            (
                1.01,
                0.3157897338203868,
                0.6842102661796132,
                0.274950638428725,
                -0.09897503059137998,
            ),
            (
                2.99,
                0.6706223143996707,
                0.3293776856003293,
                0.10168891249968372,
                -0.054383361902600805,
            ),
            (
                3.01,
                0.6726452609134458,
                0.32735473908655427,
                0.1006079802707185,
                -0.053710944949930214,
            ),
            (
                10.0,
                0.9000000041223073,
                0.09999999587769275,
                0.009999991755385476,
                -0.0019999835107708847,
            ),
            (80.0, 0.9875, 0.0125, 0.00015625, -3.90625e-6),
        ] {
            let l = Langevin::at(b);
            for (got, exact, eps) in [
                (l.value, value, 3e-16),
                (l.gap, gap, 3e-16),
                (l.slope, slope, 3e-15),
                (l.curvature, curvature, 2e-14),
            ] {
                assert!((got / exact - 1.0_f64).abs() < eps, "{b}: {got} {exact}");
            }
            let back = InverseLangevin::at(value, gap);
            assert!((back.value / b - 1.0).abs() < 4e-15, "{b}: {back:?}");
            assert!((back.slope * slope - 1.0).abs() < 8e-15, "{b}: {back:?}");
            let bend = -curvature / slope.powi(3);
            assert!(
                (back.curvature / bend - 1.0).abs() < 4e-14,
                "{b}: {back:?} {bend}"
            );
        }
        assert_eq!(InverseLangevin::at(0.0, 1.0).value, 0.0);
    }

    #[test]
    fn close_to_the_end_the_gap_decides() {
        for gap in [1e-3, 1e-9, 1e-16] {
            let back = InverseLangevin::at(1.0 - gap, gap);
            assert!((back.value * gap - 1.0).abs() < 4e-16, "{back:?}");
        }
        assert!(!InverseLangevin::at(1.0, 0.0).value.is_finite());
    }

    #[test]
    fn logarithm_of_sinh_on_both_branches() {
        for (b, eps) in [(0.01_f64, 1e-11), (0.7, 1e-14), (1.3, 1e-14), (20.0, 1e-15)] {
            let plain = (b.sinh() / b).ln();
            assert!((ln_sinh_ratio(b) / plain - 1.0).abs() < eps);
        }
        assert!((ln_sinh_ratio(1.0) - ln_sinh_ratio(1.0 - 1e-12) - 0.31304e-12).abs() < 4e-16);
    }
}
