//! The command line: what was typed becomes a request, the request becomes results.

mod args;
mod inspect;
mod output;
mod request;
mod run;
mod sheet;

pub use args::Cli;
pub use run::{Failure, run};
