//! Runs a command.

use super::args::{Cli, Command, DeepestFormat, SeriesFormat};
use super::batch::reduce_all;
use super::request::{self, CallError};
use super::sheet;
use crate::report::{
    DeepestCsv, DeepestJson, DeepestText, Provenance, Report, SeriesCsv, SeriesJson, SeriesNetcdf,
};
use crate::sheet::SheetError;
use std::io::{self, Write};
use std::process::ExitCode;

/// Why a command did not get through.
#[derive(Debug, thiserror::Error)]
pub enum Failure {
    /// The call is wrong.
    #[error(transparent)]
    Call(#[from] CallError),
    /// The sheet is wrong.
    #[error(transparent)]
    Sheet(#[from] SheetError),
    /// Results cannot be written.
    #[error("results cannot be written: {0}")]
    Output(#[from] io::Error),
}

impl Failure {
    /// The exit status for it.
    pub fn exit_code(&self) -> ExitCode {
        match self {
            // Whoever closed the pipe has seen enough.
            Failure::Output(e) if e.kind() == io::ErrorKind::BrokenPipe => ExitCode::SUCCESS,
            Failure::Call(_) | Failure::Sheet(_) => ExitCode::from(2),
            Failure::Output(e) if e.kind() == io::ErrorKind::AlreadyExists => ExitCode::from(2),
            Failure::Output(_) => ExitCode::from(3),
        }
    }

    /// Whether there is nothing to say about it.
    pub fn is_quiet(&self) -> bool {
        matches!(self, Failure::Output(e) if e.kind() == io::ErrorKind::BrokenPipe)
    }
}

/// Runs what was typed: results to `out`, notes and errors about single logs to `notes`. Exit status 0 when every log was
/// reduced, 3 when one was not.
///
/// # Errors
/// [`Failure`] when the call makes no sense or the results cannot be written.
pub fn run(cli: &Cli, out: &mut dyn Write, notes: &mut dyn Write) -> Result<ExitCode, Failure> {
    // Results do not end with the notes: whoever closed standard error still gets them.
    let notes: &mut dyn Write = &mut Notes(notes);
    match &cli.command {
        Command::Reduce(args) => {
            let mut report: Box<dyn Report> = match args.format {
                SeriesFormat::Csv => Box::new(SeriesCsv { with: request::extras(&args.with) }),
                SeriesFormat::Json => Box::new(SeriesJson::with(request::extras(&args.with))),
                SeriesFormat::Netcdf if cli.invocation.to_terminal && args.shared.into.is_none() => {
                    let text = "--format netcdf is not for a terminal: send it to a file (> depth.nc) or a folder, --into DIR";
                    return Err(CallError(text.to_string()).into());
                }
                SeriesFormat::Netcdf => {
                    // To the second: nobody needs to know when to the nanosecond.
                    let time = jiff::Timestamp::from_second(jiff::Timestamp::now().as_second()).ok();
                    Box::new(SeriesNetcdf::new(
                        Provenance { call: cli.invocation.call.clone(), time },
                        request::extras(&args.with),
                    ))
                }
            };
            reduce_all(&args.shared, report.as_mut(), true, out, notes)
        }
        Command::Deepest(args) => {
            let mut report: Box<dyn Report> = match args.format {
                DeepestFormat::Text => Box::<DeepestText>::default(),
                DeepestFormat::Json => Box::<DeepestJson>::default(),
                DeepestFormat::Csv => Box::new(DeepestCsv),
            };
            // The text says everything itself; beside other forms the deepest depth is noted for the eye.
            let say = args.format != DeepestFormat::Text || args.shared.into.is_some();
            reduce_all(&args.shared, report.as_mut(), say, out, notes)
        }
        Command::Sheet(args) => sheet::print(args, out, notes),
        Command::Inspect(args) => super::inspect::inspect(args, out, notes),
    }
}

/// Notes that may get lost.
struct Notes<'a>(&'a mut dyn Write);

impl Write for Notes<'_> {
    fn write(&mut self, text: &[u8]) -> io::Result<usize> {
        let _ = self.0.write_all(text);
        Ok(text.len())
    }

    fn flush(&mut self) -> io::Result<()> {
        let _ = self.0.flush();
        Ok(())
    }
}
