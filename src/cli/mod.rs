//! The command line: what was typed becomes a request, the request becomes results.

mod args;
mod invocation;
mod output;
mod request;
mod run;

pub use args::Cli;
pub use invocation::Invocation;
pub use run::{Failure, run};
