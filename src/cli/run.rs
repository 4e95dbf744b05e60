//! Runs a command.

use super::args::{Cli, Command, DeepestFormat, SeriesFormat, SharedArgs};
use super::output::{Folder, failure};
use super::request::{self, CallError};
use crate::cast::{Cast, CastSettings, TareChoice};
use crate::column::{Salt, Water, WaterNode, bin_means};
use crate::log::{self, LogError, PressureKind, ReadOptions};
use crate::reduction::Reduction;
use crate::report::{
    DeepestCsv, DeepestJson, DeepestText, Provenance, Report, SeriesCsv, SeriesJson, SeriesNetcdf,
};
use crate::settings::{OtherCast, STANDARD_AIR_HPA, Settings};
use std::io::{self, BufWriter, Write};
use std::process::ExitCode;

/// Why a command did not get through.
#[derive(Debug, thiserror::Error)]
pub enum Failure {
    /// The call is wrong.
    #[error(transparent)]
    Call(#[from] CallError),
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
            Failure::Call(_) => ExitCode::from(2),
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
    match &cli.command {
        Command::Reduce(args) => {
            let mut report: Box<dyn Report> = match args.format {
                SeriesFormat::Csv => Box::new(SeriesCsv),
                SeriesFormat::Json => Box::<SeriesJson>::default(),
                SeriesFormat::Netcdf if cli.invocation.to_terminal && args.shared.into.is_none() => {
                    let text = "--format netcdf is not for a terminal: send it to a file (> depth.nc) or a folder, --into DIR";
                    return Err(CallError(text.to_string()).into());
                }
                SeriesFormat::Netcdf => {
                    // To the second: nobody needs to know when to the nanosecond.
                    let time = jiff::Timestamp::from_second(jiff::Timestamp::now().as_second()).ok();
                    Box::new(SeriesNetcdf::new(Provenance { call: cli.invocation.call.clone(), time }))
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
    }
}

/// Reduces one log after the other; a log that fails does not stop the others.
fn reduce_all(
    args: &SharedArgs,
    report: &mut dyn Report,
    say: bool,
    out: &mut dyn Write,
    notes: &mut dyn Write,
) -> Result<ExitCode, Failure> {
    let options = request::read_options(args)?;
    let mut settings = request::settings(args)?;
    if args.logs.iter().filter(|log| *log == "-").count() > 1 {
        return Err(CallError("standard input ('-') can be read once only".to_string()).into());
    }
    if args.into.is_none() && args.logs.len() > 1 && !report.holds_many() {
        let text = "several logs make several tables: give a folder for them, --into DIR, or --format json";
        return Err(CallError(text.to_string()).into());
    }
    let mut folder = args.into.as_deref().map(|dir| Folder::open(dir, args.replace)).transpose()?;
    settings.profile = args.profile.as_deref().map(|file| read_profile(file, &settings)).transpose()?;

    let mut out = BufWriter::with_capacity(1 << 16, out);
    // Begun with the first result: when no log can be reduced, nothing is printed that looks like one.
    let mut begun = false;
    let mut failed = 0;
    for source in &args.logs {
        let logs = match log::read(source, &options) {
            Ok(logs) => logs,
            Err(error) => {
                failed += 1;
                writeln!(notes, "{}", failure(&error))?;
                continue;
            }
        };
        if logs.len() > 1 && folder.is_none() && !report.holds_many() {
            let text = format!(
                "{source} holds {} casts: give a folder for them, --into DIR, or --format json",
                logs.len()
            );
            return Err(CallError(text).into());
        }
        for log in logs {
            match Reduction::new(log, &settings) {
                Ok(reduction) => {
                    match &mut folder {
                        Some(folder) => folder.cast(report, &reduction)?,
                        None => {
                            if !begun {
                                report.begin(&mut out)?;
                                begun = true;
                            }
                            report.cast(&mut out, &reduction)?;
                        }
                    }
                    if say && !args.quiet {
                        note(notes, &reduction)?;
                    }
                }
                Err(error) => {
                    failed += 1;
                    writeln!(notes, "{}", failure(&error))?;
                }
            }
        }
    }
    match folder {
        Some(folder) => folder.close()?,
        None if begun => report.end(&mut out)?,
        None => {}
    }
    out.flush()?;
    if failed > 0 && args.logs.len() > 1 {
        writeln!(notes, "seaplumb: {failed} could not be reduced, of {} logs", args.logs.len())?;
    }
    Ok(if failed > 0 { ExitCode::from(3) } else { ExitCode::SUCCESS })
}

/// One line about a cast, and its warnings.
fn note(notes: &mut dyn Write, reduction: &Reduction) -> io::Result<()> {
    writeln!(
        notes,
        "{}: {} samples, deepest {:.2} m ± {:.2} m ({} %)",
        reduction.log.source,
        reduction.len(),
        reduction.deepest_m,
        reduction.budget.expanded_uncertainty_m(),
        100.0 * reduction.budget.coverage_probability
    )?;
    for warning in &reduction.warnings {
        writeln!(notes, "  {warning}")?;
    }
    Ok(())
}

/// The water of another cast.
fn read_profile(source: &str, settings: &Settings) -> Result<OtherCast, CallError> {
    let wrong = |e: LogError| CallError(format!("--profile: {e}"));
    let mut logs = log::read(source, &ReadOptions::default()).map_err(wrong)?;
    if logs.len() != 1 {
        let text = format!("--profile {source}: expected one cast, found {}", logs.len());
        return Err(CallError(text));
    }
    let log = logs.remove(0);
    let Some((salt, kind)) = log
        .conductivity
        .as_ref()
        .map(|c| (c, Salt::Conductivity))
        .or(log.salinity.as_ref().map(|s| (s, Salt::Practical)))
    else {
        return Err(wrong(LogError::new(source, "a profile needs salinity or conductivity")));
    };
    let Some(temperature) = &log.temperature else {
        return Err(wrong(LogError::new(source, "a profile needs temperature")));
    };
    let cast_settings = CastSettings {
        pressure_kind: log.pressure_kind.or(Some(PressureKind::Sea)),
        air_pressure_hpa: STANDARD_AIR_HPA,
        tare: TareChoice::Auto,
    };
    let cast = Cast::new(&log, &cast_settings).map_err(wrong)?;
    let levels = bin_means((0..cast.len()).filter(|&i| cast.water_usable(i)).map(|i| WaterNode {
        pressure_dbar: cast.pressure_dbar[i],
        temperature_degc: temperature.values[i],
        salt: salt.values[i],
    }));
    let water = Water::new(levels, kind, settings.composition, 0.0)
        .map_err(|e| wrong(LogError::new(source, e.to_string())))?;
    Ok(OtherCast { water, source: source.to_string() })
}
