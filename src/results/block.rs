//! A block of integration points, column by column.

use super::ids::Origin;
use super::stress::Components;
use crate::input::Place;

/// The index of an element where there is no elements.csv.
pub const NO_ELEMENT: u32 = u32::MAX;

/// Integration points as they stream by. Columns that do not exist are `None`, for every block alike.
#[derive(Debug, Clone, Default)]
pub struct PointBlock {
    /// Index of the element, or [`NO_ELEMENT`].
    pub element: Vec<u32>,
    pub element_id: Vec<i64>,
    pub point: Vec<i64>,
    /// Reference position; `[R, 0, Z]` in an axisymmetric model.
    pub position: Vec<[f64; 3]>,
    /// Reference area or volume that the point stands for.
    pub weight: Option<Vec<f64>>,
    /// Cauchy stress, Cartesian; components outside the mask hold NaN.
    pub stress: Option<Vec<[f64; 6]>>,
    pub components: Components,
    /// -tr(sigma)/3, compression positive.
    pub p: Option<Vec<f64>>,
    pub j: Option<Vec<f64>>,
    pub w: Option<Vec<f64>>,
    /// Deformation gradient, row by row.
    pub f: Option<Vec<[f64; 9]>>,
    pub(crate) origins: Vec<Origin>,
    pub(crate) files: Vec<String>,
}

impl PointBlock {
    /// Number of points.
    pub fn len(&self) -> usize {
        self.point.len()
    }

    /// True if there is no point.
    pub fn is_empty(&self) -> bool {
        self.point.is_empty()
    }

    /// The line of a point in its file.
    pub fn line(&self, i: usize) -> u64 {
        u64::from(self.origins[i].line)
    }

    /// Where a point was read.
    pub fn place(&self, i: usize) -> Place {
        self.origins[i].place(&self.files)
    }

    pub(crate) fn clear(&mut self) {
        self.element.clear();
        self.element_id.clear();
        self.point.clear();
        self.position.clear();
        self.origins.clear();
        for column in [&mut self.weight, &mut self.p, &mut self.j, &mut self.w] {
            column.iter_mut().for_each(Vec::clear);
        }
        self.stress.iter_mut().for_each(Vec::clear);
        self.f.iter_mut().for_each(Vec::clear);
    }
}

/// Which point numbers of which element have come by: one bit each, in a width that grows with the largest
/// number seen.
#[derive(Debug)]
pub(crate) struct Seen {
    words: usize,
    bits: Vec<u64>,
    elements: usize,
}

/// Point numbers are 0 to this one.
pub const MAX_POINT_NUMBER: i64 = 1023;

impl Seen {
    pub fn new(elements: usize) -> Self {
        Self {
            words: 1,
            bits: vec![0; elements],
            elements,
        }
    }

    /// Marks a point; false if it was marked before. `point` is in 0..=[`MAX_POINT_NUMBER`].
    pub fn mark(&mut self, element: usize, point: usize) -> bool {
        let word = point / 64;
        if word >= self.words {
            let words = (word + 1).next_power_of_two();
            let mut bits = vec![0; words * self.elements];
            for e in 0..self.elements {
                let old = &self.bits[e * self.words..(e + 1) * self.words];
                bits[e * words..e * words + self.words].copy_from_slice(old);
            }
            (self.words, self.bits) = (words, bits);
        }
        let slot = &mut self.bits[element * self.words + word];
        let bit = 1 << (point % 64);
        let new = *slot & bit == 0;
        *slot |= bit;
        new
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn points_are_told_apart_before_and_after_growing() {
        let mut seen = Seen::new(3);
        assert!(seen.mark(1, 63) && seen.mark(2, 0));
        assert!(!seen.mark(1, 63));
        assert!(seen.mark(1, 64) && seen.mark(2, 1023));
        assert!(!seen.mark(1, 63) && !seen.mark(2, 0) && !seen.mark(2, 1023));
        assert!(seen.mark(0, 0) && seen.mark(0, 64));
    }
}
