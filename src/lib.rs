//! truebore judges finite-element results of pressurised, large-strain parts against exact solutions.
//!
//! The story in reading order: `input` says what is wrong with a file
//! and where, `mechanics` holds the words, `numerics` the mathematics, `materials` the
//! laws, `exact` the solutions. `elements` and `results` read what a solver exported. `suite` is the YAML
//! file as written. `norms` measures the distance between computed and exact, `convergence` how it falls,
//! `verdict` judges it and keeps the outcome, `report` writes it down. `run` is where the parts meet and
//! `cli` the only place that prints.

pub mod input;
pub mod mechanics;
pub mod numerics;

pub mod materials;

pub mod exact;

pub mod elements;
pub mod results;

pub mod suite;

pub mod norms;

pub mod convergence;

pub mod verdict;

pub mod report;

pub mod run;

pub mod cli;
