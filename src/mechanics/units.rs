//! Units: exact conversion factors, and systems of units a file may be written in.
//!
//! A factor is kept as a ratio of two integers that a double holds exactly, so that `30 kPa` read in a
//! suite of MPa is the double nearest to 0.03 and not a rounded product.
//! Sources: SI brochure (9th ed.) for prefixes; NIST SP 811 (2008) appendix B for inch, pound-force and
//! standard gravity (from memory): 1 in = 25.4 mm, 1 lbf = 4.4482216152605 N, 1 kgf = 9.80665 N.

/// The kind of quantity a number measures.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Dimension {
    Length,
    Stress,
    Angle,
    /// A pure number.
    None,
    /// Stress times area.
    Force,
    /// Strain energy per reference volume: same units as stress.
    EnergyDensity,
    /// Energy of the model: stress times area (per unit length) in two dimensions, stress times volume in three.
    EnergyPerLength,
    /// Stress times volume.
    Energy,
    Area,
    Volume,
    /// Of a twist or a curvature: angle over length.
    PerLength,
    /// Stress times length: a force per unit thickness.
    ForcePerLength,
    /// Stress times area: a moment per unit thickness.
    MomentPerLength,
    /// Stress times volume: a moment.
    Torque,
    /// A body force that grows with the distance.
    StressPerLengthSquared,
}

/// A unit: `value in base unit = value * numerator / denominator`; base units are m, Pa and rad.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Unit {
    pub name: &'static str,
    pub dimension: Dimension,
    numerator: f64,
    denominator: f64,
}

const fn unit(name: &'static str, dimension: Dimension, numerator: f64, denominator: f64) -> Unit {
    Unit {
        name,
        dimension,
        numerator,
        denominator,
    }
}

/// Every unit that can be written in a suite.
pub const UNITS: &[Unit] = &[
    unit("m", Dimension::Length, 1.0, 1.0),
    unit("cm", Dimension::Length, 1.0, 100.0),
    unit("mm", Dimension::Length, 1.0, 1e3),
    unit("um", Dimension::Length, 1.0, 1e6),
    unit("in", Dimension::Length, 254.0, 1e4),
    unit("ft", Dimension::Length, 3048.0, 1e4),
    unit("Pa", Dimension::Stress, 1.0, 1.0),
    unit("hPa", Dimension::Stress, 1e2, 1.0),
    unit("kPa", Dimension::Stress, 1e3, 1.0),
    unit("MPa", Dimension::Stress, 1e6, 1.0),
    unit("GPa", Dimension::Stress, 1e9, 1.0),
    unit("bar", Dimension::Stress, 1e5, 1.0),
    unit("mbar", Dimension::Stress, 1e2, 1.0),
    unit("N/mm2", Dimension::Stress, 1e6, 1.0),
    unit("N/m2", Dimension::Stress, 1.0, 1.0),
    // lbf/in2 = 4.4482216152605 / 0.0254^2 Pa
    unit("psi", Dimension::Stress, 44482216152605.0, 6451600000.0),
    unit("ksi", Dimension::Stress, 44482216152605.0, 6451600.0),
    unit("kgf/cm2", Dimension::Stress, 980665.0, 10.0),
    unit("kgf/mm2", Dimension::Stress, 9806650.0, 1.0),
    // conventional millimetre of mercury, NIST SP 811: 133.3224 Pa
    unit("mmHg", Dimension::Stress, 1333224.0, 1e4),
    unit("N", Dimension::Force, 1.0, 1.0),
    unit("mN", Dimension::Force, 1.0, 1e3),
    unit("kN", Dimension::Force, 1e3, 1.0),
    unit("lbf", Dimension::Force, 44482216152605.0, 1e13),
    unit("J", Dimension::Energy, 1.0, 1.0),
    unit("mJ", Dimension::Energy, 1.0, 1e3),
    unit("rad", Dimension::Angle, 1.0, 1.0),
    unit("1", Dimension::None, 1.0, 1.0),
    unit("%", Dimension::None, 1.0, 100.0),
    // not an exact ratio: pi/180 is rounded
    unit("deg", Dimension::Angle, std::f64::consts::PI, 180.0),
];

impl Unit {
    /// The unit with this name, if there is one.
    pub fn find(name: &str) -> Option<Unit> {
        UNITS.iter().copied().find(|u| u.name == name)
    }

    /// Names of all units of a dimension, for messages.
    pub fn names_of(dimension: Dimension) -> Vec<&'static str> {
        let of_it = UNITS.iter().filter(|u| u.dimension == dimension);
        of_it.map(|u| u.name).collect()
    }

    /// `value` of this unit, in `target` units: one multiplication and one division of exact integers.
    pub fn convert(&self, value: f64, target: &Unit) -> f64 {
        if self.name == target.name {
            return value;
        }
        let (up, down) = reduced(
            self.numerator * target.denominator,
            self.denominator * target.numerator,
        );
        value * up / down
    }

    /// How many `target` units one of this unit is.
    pub fn factor_to(&self, target: &Unit) -> f64 {
        self.convert(1.0, target)
    }
}

/// The same ratio in lowest terms where both parts are whole numbers a double holds exactly.
fn reduced(up: f64, down: f64) -> (f64, f64) {
    const EXACT: f64 = 9_007_199_254_740_992.0;
    let whole = |v: f64| v.fract() == 0.0 && v.abs() < EXACT;
    if !(whole(up) && whole(down)) {
        return (up, down);
    }
    let (mut a, mut b) = (up as u64, down as u64);
    while b != 0 {
        (a, b) = (b, a % b);
    }
    (up / a as f64, down / a as f64)
}

/// The units a file is written in: one for length, one for stress; the others follow.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct UnitSystem {
    pub length: Unit,
    pub stress: Unit,
}

impl UnitSystem {
    /// Metre and pascal.
    pub fn si() -> Self {
        Self {
            length: UNITS[0],
            stress: UNITS[6],
        }
    }

    /// By name, or `None` when a name is unknown or of another dimension.
    pub fn of(length: &str, stress: &str) -> Option<Self> {
        let length = Unit::find(length).filter(|u| u.dimension == Dimension::Length)?;
        let stress = Unit::find(stress).filter(|u| u.dimension == Dimension::Stress)?;
        Some(Self { length, stress })
    }

    /// Factor that turns a number of `dimension` written in `self` into `target`'s units.
    pub fn factor_to(&self, target: &UnitSystem, dimension: Dimension) -> f64 {
        let length = self.length.factor_to(&target.length);
        let stress = self.stress.factor_to(&target.stress);
        match dimension {
            Dimension::Length => length,
            Dimension::Stress | Dimension::EnergyDensity => stress,
            Dimension::Angle | Dimension::None => 1.0,
            Dimension::Area => length * length,
            Dimension::Volume => length * length * length,
            Dimension::Force | Dimension::EnergyPerLength | Dimension::MomentPerLength => {
                stress * length * length
            }
            Dimension::Energy | Dimension::Torque => stress * length * length * length,
            Dimension::PerLength => 1.0 / length,
            Dimension::ForcePerLength => stress * length,
            Dimension::StressPerLengthSquared => stress / (length * length),
        }
    }

    /// `N`, `mN` or `kN` (and `J`, `mJ`, `kJ`) where this system's unit is that, else the product written out.
    fn product(&self, dimension: Dimension, base: &str, power: u32) -> String {
        let in_si = self.factor_to(&UnitSystem::si(), dimension);
        let near = |factor: f64| (in_si / factor - 1.0).abs() < 1e-12;
        let prefix = [("", 1.0), ("m", 1e-3), ("k", 1e3)]
            .into_iter()
            .find(|(_, factor)| near(*factor));
        match prefix {
            Some((prefix, _)) => format!("{prefix}{base}"),
            None => format!("{} {}^{power}", self.stress.name, self.length.name),
        }
    }

    /// The unit's name as reports print it: `N` for a force in MPa and mm, `psi in^2` in psi and inch.
    pub fn name_of(&self, dimension: Dimension) -> String {
        let (l, s) = (self.length.name, self.stress.name);
        match dimension {
            Dimension::Length => l.to_string(),
            Dimension::Stress | Dimension::EnergyDensity => s.to_string(),
            Dimension::Angle => "rad".to_string(),
            Dimension::None => "1".to_string(),
            Dimension::Area => format!("{l}^2"),
            Dimension::Volume => format!("{l}^3"),
            Dimension::Force => self.product(dimension, "N", 2),
            // joule per metre of length, which is a newton
            Dimension::EnergyPerLength => self.product(dimension, "J/m", 2),
            Dimension::Energy => self.product(dimension, "J", 3),
            Dimension::PerLength => format!("rad/{l}"),
            Dimension::ForcePerLength => format!("{}/{l}", self.name_of(Dimension::Force)),
            Dimension::MomentPerLength => format!("{} {l}/{l}", self.name_of(Dimension::Force)),
            Dimension::Torque => format!("{} {l}", self.name_of(Dimension::Force)),
            Dimension::StressPerLengthSquared => format!("{s}/{l}^2"),
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn convert(value: f64, from: &str, to: &str) -> f64 {
        Unit::find(from)
            .unwrap()
            .convert(value, &Unit::find(to).unwrap())
    }

    #[test]
    fn a_converted_decimal_is_the_nearest_double() {
        assert_eq!(convert(30.0, "kPa", "MPa"), 0.03);
        assert_eq!(convert(0.03, "MPa", "Pa"), 30000.0);
        assert_eq!(convert(1.0, "in", "mm"), 25.4);
        assert_eq!(convert(25.4, "mm", "in"), 1.0);
        assert_eq!(convert(1.0, "kgf/cm2", "MPa"), 0.0980665);
        assert_eq!(convert(0.1, "%", "1"), 0.001);
    }

    #[test]
    fn psi_is_the_handbook_number() {
        // NIST SP 811 (2008), appendix B.8: 1 psi = 6.894757 E+03 Pa (from memory)
        assert!((convert(1.0, "psi", "Pa") - 6894.757293168361).abs() < 1e-9);
    }

    #[test]
    fn every_unit_has_one_name_and_round_trips() {
        for (i, u) in UNITS.iter().enumerate() {
            assert!(
                UNITS[i + 1..].iter().all(|v| v.name != u.name),
                "{}",
                u.name
            );
            for v in UNITS.iter().filter(|v| v.dimension == u.dimension) {
                let there_and_back = v.convert(u.convert(0.7, v), u);
                assert!(
                    (there_and_back - 0.7).abs() < 3e-16,
                    "{} {}",
                    u.name,
                    v.name
                );
            }
        }
    }

    #[test]
    fn force_and_energy_follow_length_and_stress() {
        let suite = UnitSystem::of("mm", "MPa").unwrap();
        let si = UnitSystem::si();
        assert!((suite.factor_to(&si, Dimension::Force) - 1.0).abs() < 1e-15);
        assert!((suite.factor_to(&si, Dimension::Energy) - 1e-3).abs() < 1e-18);
        assert_eq!(suite.name_of(Dimension::Force), "N");
        assert_eq!(suite.name_of(Dimension::EnergyPerLength), "J/m");
        assert_eq!(suite.name_of(Dimension::Energy), "mJ");
        assert!((suite.factor_to(&si, Dimension::Torque) - 1e-3).abs() < 1e-18);
        assert!((suite.factor_to(&si, Dimension::PerLength) - 1e3).abs() < 1e-12);
        assert!((suite.factor_to(&si, Dimension::ForcePerLength) / 1e3 - 1.0).abs() < 1e-15);
        assert!(
            (suite.factor_to(&si, Dimension::StressPerLengthSquared) / 1e12 - 1.0).abs() < 1e-15
        );
        assert_eq!(suite.name_of(Dimension::Torque), "N mm");
        assert_eq!(suite.name_of(Dimension::ForcePerLength), "N/mm");
        assert_eq!(suite.name_of(Dimension::MomentPerLength), "N mm/mm");
        assert_eq!(suite.name_of(Dimension::PerLength), "rad/mm");
        assert_eq!(suite.name_of(Dimension::StressPerLengthSquared), "MPa/mm^2");
        let inches = UnitSystem::of("in", "psi").unwrap();
        assert_eq!(inches.name_of(Dimension::Force), "psi in^2");
        assert!(UnitSystem::of("MPa", "mm").is_none());
    }
}
