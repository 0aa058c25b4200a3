//! The `zij` program.

fn main() -> std::process::ExitCode {
    zij_lang::cli::main()
}
