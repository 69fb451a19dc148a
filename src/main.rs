//! The command line: arguments in, exit code out; nothing else.

fn main() -> std::process::ExitCode {
    witnessline::cli::run(std::env::args_os())
}
