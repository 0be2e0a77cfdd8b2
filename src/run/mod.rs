//! Where the parts meet: suite, cases, outcome.
