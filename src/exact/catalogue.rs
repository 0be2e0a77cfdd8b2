//! Every exact solution a suite can name: parameters, materials, range, sources, checks.

use super::given::{Form, Given, ParameterEntry, refuse};
use super::small_strain::{
    bar_torsion, elastic_plastic_tube, heated_tube, lame_sphere, plate_with_hole, rotating,
    shrink_fit_tube, strip,
};
use super::solution::{ExactSolution, Kinematics, Refusal};
use super::{
    bending, homogeneous, pressurised_sphere, published, stated_field, tabulated,
    torsion_extension, tube_entries, tube_shear,
};
use crate::materials::{MaterialKind, catalogue as materials};

/// All solutions, in the order they are listed. To add one, add its `ENTRY`.
const ENTRIES: &[Entry] = &[
    tube_entries::PRESSURISED_TUBE,
    tube_entries::LAYERED_TUBE,
    tube_entries::GRADED_TUBE,
    pressurised_sphere::ENTRY,
    torsion_extension::ENTRY,
    tube_shear::AZIMUTHAL_SHEAR,
    tube_shear::AXIAL_SHEAR,
    bending::BENT_BLOCK,
    bending::STRAIGHTENED_SECTOR,
    homogeneous::ENTRY,
    tube_entries::LAME_TUBE,
    lame_sphere::ENTRY,
    shrink_fit_tube::ENTRY,
    heated_tube::ENTRY,
    rotating::DISK,
    rotating::CYLINDER,
    plate_with_hole::ENTRY,
    strip::CANTILEVER,
    strip::PURE_BENDING,
    bar_torsion::ENTRY,
    elastic_plastic_tube::ENTRY,
    stated_field::ENTRY,
    published::ENTRY,
    tabulated::ENTRY,
];

/// One solution as a reader of the catalogue sees it.
#[derive(Debug, Clone, Copy)]
pub struct Entry {
    /// As a suite writes it.
    pub name: &'static str,
    pub title: &'static str,
    pub parameters: &'static [ParameterEntry],
    pub kinematics: Kinematics,
    /// Laws it can be made of.
    pub material_kinds: &'static [MaterialKind],
    /// Where it holds.
    pub range: &'static str,
    pub sources: &'static [&'static str],
    /// How its numbers were checked.
    pub checks: &'static [&'static str],
    pub(super) build: fn(&Given) -> Result<Box<dyn ExactSolution>, Refusal>,
}

impl Entry {
    /// Names of the laws it can be made of.
    pub fn materials(&self) -> Vec<&'static str> {
        let kinds = self.material_kinds.iter();
        kinds.flat_map(|kind| materials::names_of(*kind)).collect()
    }

    /// Ends it can have, as a suite writes them; none where it has no ends.
    pub fn ends(&self) -> &'static [&'static str] {
        let ends = self.parameters.iter().find_map(|p| match p.form {
            Form::Ends(names) => Some(names),
            _ => None,
        });
        ends.unwrap_or(&[])
    }

    /// Keys whose lists stay lists.
    pub fn list_names(&self) -> Vec<&'static str> {
        let all = self.parameters.iter();
        all.flat_map(ParameterEntry::list_names).collect()
    }
}

/// All solutions.
pub fn entries() -> &'static [Entry] {
    ENTRIES
}

/// The solution of this name.
pub fn find(name: &str) -> Option<&'static Entry> {
    ENTRIES.iter().find(|e| e.name == name)
}

/// A solution from its name and what is given.
///
/// # Errors
/// An unknown name, a law it cannot be made of, or what the solution itself refuses.
pub fn build(name: &str, given: impl Into<Given>) -> Result<Box<dyn ExactSolution>, Refusal> {
    let entry = find(name).ok_or_else(|| {
        let known: Vec<_> = ENTRIES.iter().map(|e| e.name).collect();
        let hint = format!("known solutions: {}", known.join(", "));
        refuse("", format!("unknown exact solution `{name}`"), hint)
    })?;
    let given = given.into();
    let fits = |kind: MaterialKind| entry.material_kinds.contains(&kind);
    if let Some(other) = given.materials().iter().find(|m| !fits(m.kind())) {
        let message = format!("a {name} cannot be made of {}", other.in_words());
        let hint = format!("laws it can be made of: {}", entry.materials().join(", "));
        return Err(refuse("material", message, hint));
    }
    (entry.build)(&given)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::exact::{Ends, Parameters};

    // Red when an entry promises ends or materials that its solution refuses, or the other way round.
    #[test]
    fn tubes_have_the_ends_they_promise() {
        for (name, law) in [
            ("pressurised-tube", "neo-Hookean"),
            ("lame-tube", "linear-elastic"),
        ] {
            let entry = find(name).unwrap();
            let constants: Vec<_> = materials::find(law)
                .unwrap()
                .parameters
                .iter()
                .map(|p| (p.name.to_string(), 0.4))
                .collect();
            let material = materials::build(law, &constants).unwrap();
            for ends in [
                Ends::PlaneStrain,
                Ends::GeneralizedPlaneStrain { axial_force: 0.1 },
                Ends::Closed,
                Ends::FixedStretch {
                    axial_stretch: 1.01,
                },
                Ends::PlaneStress,
            ] {
                let given = Parameters {
                    inner_radius: 1.0,
                    outer_radius: 2.0,
                    ends,
                    material: material.clone(),
                    inner_pressure: 0.01,
                    outer_pressure: 0.0,
                };
                let built = build(name, &given);
                let promised = entry.ends().contains(&ends.name());
                assert_eq!(built.is_ok(), promised, "{name} {ends:?}");
                let Ok(built) = built else { continue };
                assert_eq!(built.kinematics(), entry.kinematics);
                let names: Vec<_> = built.totals().iter().map(|t| t.name).collect();
                assert_eq!(names[..2], ["inner_radius", "outer_radius"]);
                assert_eq!(names.len(), 7);
            }
        }
    }

    #[test]
    fn every_entry_is_complete() {
        for entry in entries() {
            assert_eq!(find(entry.name).map(|e| e.title), Some(entry.title));
            assert!(!entry.sources.is_empty() && !entry.checks.is_empty());
            assert!(!entry.materials().is_empty() && !entry.range.is_empty());
            let page = format!("references/{}.md", entry.name);
            assert!(std::path::Path::new(&page).exists(), "{page} is missing");
        }
    }

    #[test]
    fn unknown_names_and_wrong_materials_are_refused() {
        let given = |name: &str, value: &[(&str, f64)]| Parameters {
            inner_radius: 1.0,
            outer_radius: 2.0,
            ends: Ends::Closed,
            material: materials::build(
                name,
                &value
                    .iter()
                    .map(|(n, v)| (n.to_string(), *v))
                    .collect::<Vec<_>>(),
            )
            .unwrap(),
            inner_pressure: 0.0,
            outer_pressure: 0.0,
        };
        let soft = given("neo-Hookean", &[("mu", 1.0)]);
        let refusal = build("pressurized-tube", &soft).unwrap_err();
        assert!(refusal.hint.contains("pressurised-tube"));
        let refusal = build("lame-tube", &soft).unwrap_err();
        assert_eq!(refusal.parameter, "material");
        assert_eq!(refusal.hint, "laws it can be made of: linear-elastic");
    }
}
