//! Mathematics without mechanics: sums that lose nothing, Gauss rules, Chebyshev interpolants, bracketed
//! roots, straight-line fits with their uncertainty. Imports nothing of ours.

pub mod chebyshev;
pub mod line_fit;
pub mod quadrature;
pub mod root;
pub mod running_mean;
pub mod sum;

pub use chebyshev::{Chebyshev, Piecewise};
pub use line_fit::{LineFit, student_t_quantile};
pub use quadrature::GaussRule;
pub use root::find_root;
pub use running_mean::{Resolution, RunningMean};
pub use sum::CompensatedSum;
