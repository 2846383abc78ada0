//! The binary: hand the arguments to the library and leave with its exit status.

fn main() -> std::process::ExitCode {
    winterledger::cli::run()
}
