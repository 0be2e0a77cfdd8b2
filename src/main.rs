//! Hands the process to the command line.

fn main() -> std::process::ExitCode {
    truebore::cli::main()
}
