//! A quantity is there, or there is a reason why not.

/// Whether a result set holds a quantity.
#[derive(Debug, Clone, PartialEq, Eq)]
pub enum Channel {
    /// Read from its columns.
    Given,
    /// Computed from other columns; says how.
    Computed(String),
    /// Not there; says why.
    Missing(String),
}

impl Channel {
    /// True unless it is missing.
    pub fn is_available(&self) -> bool {
        !matches!(self, Self::Missing(_))
    }

    /// Why it is missing; empty when it is not.
    pub fn reason(&self) -> &str {
        match self {
            Self::Missing(why) => why,
            Self::Given | Self::Computed(_) => "",
        }
    }

    pub(crate) fn of(found: Result<(), String>) -> Self {
        match found {
            Ok(()) => Self::Given,
            Err(why) => Self::Missing(why),
        }
    }
}
