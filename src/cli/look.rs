//! Colour is decided once, here, for everything that is printed.

use clap::ValueEnum;
use std::io::IsTerminal;

/// The `--color` choice.
#[derive(Debug, Clone, Copy, PartialEq, Eq, ValueEnum)]
pub enum Color {
    /// On a terminal, unless NO_COLOR is set
    Auto,
    Always,
    Never,
}

/// How to print.
#[derive(Debug, Clone, Copy)]
pub struct Look {
    pub colour: bool,
    /// Progress lines on stderr overwrite each other only on a terminal.
    pub live: bool,
}

impl Look {
    pub fn decide(color: Color) -> Self {
        let refused = std::env::var_os("NO_COLOR").is_some_and(|v| !v.is_empty());
        let colour = match color {
            Color::Always => true,
            Color::Never => false,
            Color::Auto => !refused && std::io::stdout().is_terminal(),
        };
        Self {
            colour,
            live: std::io::stderr().is_terminal(),
        }
    }
}
