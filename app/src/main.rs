//! The program `assize`; everything is in the library, so that tests reach it.

use std::process::ExitCode;

fn main() -> ExitCode {
    assize::main()
}
