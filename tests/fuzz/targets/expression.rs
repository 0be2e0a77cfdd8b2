//! No text may panic, hang or exhaust the stack: it is an expression that can be evaluated, or an error within the text.
#![no_main]

use libfuzzer_sys::fuzz_target;
use truebore::numerics::expression::{Difference, Expression, Names};

fuzz_target!(|text: &str| {
    let constants = [("mu".to_string(), 0.4)];
    let names = Names {
        variables: &["I1", "I2", "x"],
        constants: &constants,
        differences: &[Difference { variable: 0, less: 3.0, value: 3 }],
    };
    match Expression::parse(text, names) {
        Ok(read) => {
            let value: f64 = read.evaluate(&[3.1, 3.2, -0.5, 0.1]);
            let _ = (value, read.evaluate(&[num_dual::Dual64::from(3.1).derivative(); 4]));
            for switch in 0..read.switches() {
                let _ = read.switch(switch, &[3.1, 3.2, -0.5, 0.1]);
            }
        }
        Err(error) => {
            assert!(error.position <= text.len());
            assert!(!error.in_text(text).is_empty());
        }
    }
    // the same text as the energy of a law
    let _ = truebore::materials::build("stated", &[("energy".to_string(), text)]);
});
