//! The command line of seaplumb: parse, run, exit status.

use clap::Parser;
use seaplumb::cli::{Cli, Invocation, run};
use std::io::{Write, stderr, stdout};
use std::process::ExitCode;

fn main() -> ExitCode {
    let mut cli = Cli::parse();
    cli.invocation = Invocation::of_this_process();
    match run(&cli, &mut stdout().lock(), &mut stderr().lock()) {
        Ok(code) => code,
        Err(failure) => {
            if !failure.is_quiet() {
                // When standard error is gone there is nobody left to tell.
                let _ = writeln!(stderr().lock(), "seaplumb: {failure}");
            }
            failure.exit_code()
        }
    }
}
