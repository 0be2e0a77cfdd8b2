//! The YAML file exactly as written: typed, with places, every problem reported at once.

mod block;
mod criteria;
mod export;
mod materials;
pub mod model;
pub mod quantity;
pub mod read;
pub mod tree;

pub use block::{Block, Reader, nearest};
pub use model::{CaseEntry, Placed, Suite};
pub use quantity::Quantity;
pub use read::{read, read_all};
