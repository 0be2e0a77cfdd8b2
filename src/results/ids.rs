//! From identifiers to indices, and from indices back to lines of files.

use crate::input::Place;

/// Where a row was read.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord)]
pub(crate) struct Origin {
    pub part: u32,
    pub line: u32,
}

impl Origin {
    pub fn new(part: usize, line: u64) -> Self {
        Self {
            part: u32::try_from(part).unwrap_or(u32::MAX),
            line: u32::try_from(line).unwrap_or(u32::MAX),
        }
    }

    /// The place, given the names of the parts.
    pub fn place(self, files: &[String]) -> Place {
        let file = files.get(self.part as usize).cloned().unwrap_or_default();
        Place::file(file).line(u64::from(self.line))
    }
}

/// Index of each identifier in a list sorted by identifier: a plain table where identifiers are dense, a binary
/// search where they are not.
#[derive(Debug, Clone, PartialEq)]
pub(crate) enum IdIndex {
    Dense { first: i64, slots: Vec<u32> },
    Sorted(Vec<i64>),
}

impl IdIndex {
    /// `ids` ascending and unique.
    pub fn new(ids: &[i64]) -> Self {
        let (Some(&first), Some(&last)) = (ids.first(), ids.last()) else {
            return Self::Sorted(Vec::new());
        };
        let span = last.abs_diff(first);
        if span >= 8 * ids.len() as u64 {
            return Self::Sorted(ids.to_vec());
        }
        let mut slots = vec![u32::MAX; span as usize + 1];
        for (index, id) in ids.iter().enumerate() {
            slots[id.abs_diff(first) as usize] = index as u32;
        }
        Self::Dense { first, slots }
    }

    pub fn find(&self, id: i64) -> Option<u32> {
        match self {
            Self::Dense { first, slots } => {
                let slot = usize::try_from(id.checked_sub(*first)?).ok()?;
                slots.get(slot).copied().filter(|&index| index != u32::MAX)
            }
            Self::Sorted(ids) => ids.binary_search(&id).ok().map(|index| index as u32),
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    #[test]
    fn sparse_and_extreme_identifiers_are_found() {
        let ids = [i64::MIN, -5, 0, i64::MAX];
        let index = IdIndex::new(&ids);
        assert!(matches!(index, IdIndex::Sorted(_)));
        assert_eq!(index.find(i64::MAX), Some(3));
        assert_eq!(index.find(1), None);
        assert_eq!(IdIndex::new(&[]).find(0), None);
        let dense = IdIndex::new(&[10, 12]);
        assert!(matches!(dense, IdIndex::Dense { .. }));
        for (id, expected) in [
            (9, None),
            (10, Some(0)),
            (11, None),
            (12, Some(1)),
            (13, None),
            (i64::MIN, None),
        ] {
            assert_eq!(dense.find(id), expected);
        }
    }

    proptest! {
        #[test]
        fn every_identifier_is_found_and_no_other(mut ids in proptest::collection::vec(-1000i64..1000, 1..60), scale in 1i64..100) {
            ids.sort_unstable();
            ids.dedup();
            let scaled: Vec<i64> = ids.iter().map(|i| i * scale).collect();
            let index = IdIndex::new(&scaled);
            for id in -1001..1001 {
                let expected = scaled.binary_search(&id).ok().map(|i| i as u32);
                prop_assert_eq!(index.find(id), expected);
            }
        }
    }
}
