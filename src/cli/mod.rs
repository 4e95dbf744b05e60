//! The command line: what was typed becomes a request, the request becomes results.

mod args;
mod batch;
mod in_order;
mod inspect;
mod output;
mod profile;
mod request;
mod run;
mod sheet;
mod sources;

pub use args::Cli;
pub use run::{Failure, run};
