//! The command line: what was typed becomes a request, the request becomes results.

mod args;
mod batch;
mod in_order;
mod inspect;
mod invocation;
mod output;
mod profile;
mod request;
mod run;
mod sheet;
mod sources;

pub use args::Cli;
pub use invocation::Invocation;
pub use run::{Failure, run};
