//! The studio as the checks start it: the same entry point as the program itself.

fn main() -> std::process::ExitCode {
    assize::main()
}
