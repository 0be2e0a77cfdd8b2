//! The only folder that prints, opens output files, or ends the process.
