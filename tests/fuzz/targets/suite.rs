//! No suite text may panic or hang: it is planned, or refused with findings that all have a place.
#![no_main]

use libfuzzer_sys::fuzz_target;

fuzz_target!(|text: &str| {
    let findings = match truebore::suite::read(text, "suite.yaml") {
        Ok(suite) => match truebore::run::plan::plan(suite, "suite.yaml") {
            Ok(_) => return,
            Err(findings) => findings,
        },
        Err(findings) => findings,
    };
    assert!(!findings.is_empty());
    assert!(findings.iter().all(|finding| !finding.found.is_empty()));
});
