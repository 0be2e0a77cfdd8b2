//! Where the parts meet: suite, cases, outcome.

pub mod brief;
pub mod catalogue;
pub mod check;
pub mod expand;
pub mod facts;
pub mod inspect;
pub mod level;
pub mod plan;
pub mod point_table;
pub mod rules;
pub mod stability;
pub mod tables;

mod checks;
mod criteria;
mod declared;
mod exports;
mod folders;
mod format_pages;
mod known;
mod materials;
mod pairing;
mod parameters;
mod refusals;
mod series;
mod table_file;
mod template;
