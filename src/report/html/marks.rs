//! The verdict marks: the limit is a round bore, the result a plug. Defined once, used by reference.

use crate::verdict::Verdict;

/// Round plug seated: pass. Square plug that will not go in: fail. Lozenge, half filled: could be either.
/// Dashed empty bore: nothing was tried. Also the gauge background and the hatches.
pub const SYMBOLS: &str = concat!(
    "<svg width=\"0\" height=\"0\" style=\"position:absolute\" aria-hidden=\"true\"><defs>",
    "<symbol id=\"mkp\" viewBox=\"0 0 16 16\" overflow=\"visible\">",
    "<circle cx=\"8\" cy=\"8\" r=\"6.6\" fill=\"none\" stroke=\"currentColor\" stroke-width=\"1.5\"/>",
    "<circle cx=\"8\" cy=\"8\" r=\"4\" fill=\"currentColor\"/></symbol>",
    "<symbol id=\"mkf\" viewBox=\"0 0 16 16\" overflow=\"visible\">",
    "<path d=\"M.6.6H15.4V15.4H.6Z\" fill=\"currentColor\"/>",
    "<circle cx=\"8\" cy=\"8\" r=\"4.6\" fill=\"none\" stroke=\"#fff\" stroke-width=\"1.5\"/></symbol>",
    "<symbol id=\"mki\" viewBox=\"0 0 16 16\" overflow=\"visible\">",
    "<path d=\"M8 .9 15.1 8 8 15.1.9 8Z\" fill=\"#fff\" stroke=\"currentColor\" stroke-width=\"1.5\" ",
    "stroke-linejoin=\"round\"/><path d=\"M8 .9V15.1L.9 8Z\" fill=\"currentColor\"/></symbol>",
    "<symbol id=\"mkn\" viewBox=\"0 0 16 16\" overflow=\"visible\">",
    "<circle cx=\"8\" cy=\"8\" r=\"6.6\" fill=\"none\" stroke=\"currentColor\" stroke-width=\"1.5\" ",
    "stroke-dasharray=\"2.6 2.58\"/></symbol>",
    "<pattern id=\"sec\" width=\"5\" height=\"5\" patternUnits=\"userSpaceOnUse\" patternTransform=\"rotate(45)\">",
    "<rect width=\"5\" height=\"5\" fill=\"#fff\"/>",
    "<line x1=\"0\" y1=\"0\" x2=\"0\" y2=\"5\" stroke=\"#8B93A0\" stroke-width=\"1\"/></pattern>",
    "<pattern id=\"over\" width=\"6\" height=\"6\" patternUnits=\"userSpaceOnUse\" patternTransform=\"rotate(45)\">",
    "<line x1=\"0\" y1=\"0\" x2=\"0\" y2=\"6\" stroke=\"#D3D7DD\" stroke-width=\"1.4\"/></pattern>",
);

/// What closes [`SYMBOLS`] after the gauge symbol.
pub const SYMBOLS_END: &str = "</defs></svg>\n";

/// One letter: class, symbol suffix.
pub fn letter(verdict: Verdict) -> char {
    match verdict {
        Verdict::Fail => 'f',
        Verdict::Inconclusive => 'i',
        Verdict::NotRun => 'n',
        Verdict::Pass => 'p',
    }
}

pub fn colour(verdict: Verdict) -> &'static str {
    match verdict {
        Verdict::Fail => "#A62B12",
        Verdict::Inconclusive => "#5B45A0",
        Verdict::NotRun => "#6B7280",
        Verdict::Pass => "#00614D",
    }
}

/// The lane, counted from the left (or top).
pub fn lane_number(verdict: Verdict) -> usize {
    Verdict::ALL.iter().position(|v| *v == verdict).unwrap_or(0)
}

/// The mark alone; its word stands beside it.
pub fn mark(verdict: Verdict, size: u32) -> String {
    let k = letter(verdict);
    format!(
        "<svg class=\"m {k}\" width=\"{size}\" height=\"{size}\" viewBox=\"0 0 16 16\" aria-hidden=\"true\">\
         <use href=\"#mk{k}\" width=\"16\" height=\"16\"/></svg>"
    )
}

/// The four lanes with the mark in its own, then the word.
pub fn lane_and_word(verdict: Verdict) -> String {
    format!(
        "<span class=\"lane l{}\">{}</span><span class=\"word {}\">{}</span>",
        lane_number(verdict),
        mark(verdict, 16),
        letter(verdict),
        verdict.word()
    )
}
