//! `catalogue`: everything a suite can name.

use super::args;
use super::exact::print;
use super::{Exit, check};
use crate::run::catalogue;

/// `truebore catalogue [NAME]`.
pub fn run(options: &args::Catalogue) -> Exit {
    match catalogue::text(options.name.as_deref()) {
        Ok(text) => print(&text, Exit::AllPass),
        Err(message) => check::complain(&message),
    }
}
