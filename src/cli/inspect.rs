//! `seaplumb inspect`: what was understood of each log.

use super::args::{InspectArgs, InspectFormat};
use super::output::failure;
use super::request;
use super::run::Failure;
use crate::inspection::Inspection;
use crate::log;
use crate::report::{InspectJson, InspectReport, InspectText};
use std::io::{self, BufWriter, Write};
use std::process::ExitCode;

/// Looks at one log after the other; a log that fails does not stop the others. Exit status 3 when one could not be read, or
/// not be read as a cast (what its reader understood is shown all the same).
pub(super) fn inspect(
    args: &InspectArgs,
    out: &mut dyn Write,
    notes: &mut dyn Write,
) -> Result<ExitCode, Failure> {
    let options = request::read_options(&args.reading)?;
    let settings = request::sensor_settings(&args.sensor)?;
    let sources = super::sources::expand(&args.logs)?;
    request::standard_input_once(&sources)?;
    let mut report: Box<dyn InspectReport> = match args.format {
        InspectFormat::Text => Box::new(InspectText::new(args.samples)),
        InspectFormat::Json => Box::new(InspectJson::new(args.samples)),
    };
    let mut out = BufWriter::with_capacity(1 << 16, out);
    let (mut begun, mut failed) = (false, 0);
    for source in &sources {
        let logs = match log::read_each(source, &options) {
            Ok(logs) => logs,
            Err(error) => vec![Err(error)],
        };
        for log in logs {
            let inspection = match log {
                Ok(log) => Inspection::new(log, &settings),
                Err(error) => {
                    failed += 1;
                    writeln!(notes, "{}", failure(&error))?;
                    continue;
                }
            };
            if !begun {
                report.begin(&mut out)?;
                begun = true;
            }
            report.cast(&mut out, &inspection)?;
            if let Err(error) = &inspection.cast {
                failed += 1;
                writeln!(notes, "{}", failure(error))?;
            }
            // The text says everything itself.
            if args.format == InspectFormat::Json && !args.quiet {
                note(notes, &inspection)?;
            }
        }
    }
    if begun {
        report.end(&mut out)?;
    }
    out.flush()?;
    Ok(if failed > 0 { ExitCode::from(3) } else { ExitCode::SUCCESS })
}

/// One line about a log.
fn note(notes: &mut dyn Write, inspection: &Inspection) -> io::Result<()> {
    let suspect: usize = inspection.findings.iter().map(|finding| finding.count).sum();
    let log = &inspection.log;
    writeln!(notes, "{}: {}, {} samples, {suspect} suspicions", log.source, log.format, log.len())
}
