//! Mathematics without mechanics: sums that lose nothing, Gauss rules, collocation, Chebyshev interpolants, bracketed
//! roots, straight-line fits with their uncertainty, monotone tables, the inverse Langevin function, the sign of sums of
//! exponentials, expressions typed by users. Imports nothing of ours.

pub mod chebyshev;
pub mod collocation;
pub mod exponential_sum;
pub mod expression;
pub mod langevin;
pub mod line_fit;
pub mod monotone;
pub mod quadrature;
pub mod root;
pub mod running_mean;
pub mod sum;

pub use chebyshev::{Chebyshev, Piecewise};
pub use collocation::Collocation;
pub use expression::{Expression, ExpressionError};
pub use line_fit::{LineFit, student_t_quantile};
pub use monotone::Monotone;
pub use quadrature::GaussRule;
pub use root::find_root;
pub use running_mean::{Resolution, RunningMean};
pub use sum::CompensatedSum;
