//! Runs a command.

use super::args::{Cli, Command, DeepestFormat, SeriesFormat, SharedArgs};
use super::output::{Folder, failure};
use super::request::{self, CallError};
use super::sheet;
use crate::cast::{Cast, CastSettings, TareChoice};
use crate::column::{Salt, Water, WaterNode, bin_means};
use crate::log::{self, LogError, PressureKind, ReadOptions};
use crate::reduction::Reduction;
use crate::report::{DeepestCsv, DeepestJson, DeepestText, Report, SeriesCsv, SeriesJson};
use crate::seawater::Composition;
use crate::settings::{Layer, OtherCast, STANDARD_AIR_HPA, Settings};
use crate::sheet::{Sheet, SheetError};
use std::collections::BTreeMap;
use std::io::{self, BufWriter, Write};
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
    match &cli.command {
        Command::Reduce(args) => {
            let mut report: Box<dyn Report> = match args.format {
                SeriesFormat::Csv => Box::new(SeriesCsv { with: request::extras(&args.with) }),
                SeriesFormat::Json => Box::new(SeriesJson::with(request::extras(&args.with))),
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

/// Reduces one log after the other; a log that fails does not stop the others.
fn reduce_all(
    args: &SharedArgs,
    report: &mut dyn Report,
    say: bool,
    out: &mut dyn Write,
    notes: &mut dyn Write,
) -> Result<ExitCode, Failure> {
    let call = request::layer(args)?;
    let sheet = args.sheet.as_deref().map(Sheet::read).transpose()?;
    let sources = match &sheet {
        Some(sheet) if args.logs.is_empty() => sheet.logs()?,
        _ => args.logs.clone(),
    };
    request::standard_input_once(&sources)?;
    if args.into.is_none() && sources.len() > 1 && !report.holds_many() {
        let text = "several logs make several tables: give a folder for them, --into DIR, or --format json";
        return Err(CallError(text.to_string()).into());
    }
    let mut folder = args.into.as_deref().map(|dir| Folder::open(dir, args.replace)).transpose()?;
    let jobs = jobs(&sources, &call, sheet.as_ref())?;
    if let Some(sheet) = sheet.as_ref().filter(|sheet| sheet.has_casts() && !args.quiet) {
        for source in sources.iter().filter(|source| !sheet.names(source)) {
            writeln!(
                notes,
                "{source}: no [[cast]] of the sheet is about it; what the sheet says of all casts holds"
            )?;
        }
    }

    let mut out = BufWriter::with_capacity(1 << 16, out);
    // Begun with the first result: when no log can be reduced, nothing is printed that looks like one.
    let mut begun = false;
    let mut failed = 0;
    for Job { source, reading, settings } in &jobs {
        let logs = match log::read_each(source, reading) {
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
            match log.and_then(|log| Reduction::new(log, settings)) {
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
    if failed > 0 && jobs.len() > 1 {
        writeln!(notes, "seaplumb: {failed} could not be reduced, of {} logs", jobs.len())?;
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

/// One log, and all that call and sheet say of it.
struct Job {
    source: String,
    reading: ReadOptions,
    settings: Settings,
}

/// An option beats the sheet. Profiles are read here, each once, so that a wrong one is known before the work.
fn jobs(sources: &[String], call: &Layer, sheet: Option<&Sheet>) -> Result<Vec<Job>, CallError> {
    let mut profiles: BTreeMap<String, OtherCast> = BTreeMap::new();
    let who = if call.profile.is_some() { "--profile" } else { "profile of the sheet" };
    let mut jobs = Vec::with_capacity(sources.len());
    for source in sources {
        let said = sheet.map(|sheet| sheet.layer_for(source)).unwrap_or_default();
        let Layer { reading, mut settings, profile } = call.clone().or(said);
        if let Some(file) = profile {
            if !profiles.contains_key(&file) {
                profiles.insert(file.clone(), read_profile(&file, who)?);
            }
            settings.profile = profiles.get(&file).cloned();
        }
        jobs.push(Job { source: source.clone(), reading, settings });
    }
    Ok(jobs)
}

/// The water of another cast, whose composition follows from the position of the dive. `who` asked for it, for messages.
fn read_profile(source: &str, who: &str) -> Result<OtherCast, CallError> {
    let wrong = |e: LogError| CallError(format!("{who}: {e}"));
    let mut logs = log::read(source, &ReadOptions::default()).map_err(wrong)?;
    if logs.len() != 1 {
        let text = format!("{who} {source}: expected one cast, found {}", logs.len());
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
    let water = Water::new(levels, kind, Composition::Reference, 0.0)
        .map_err(|e| wrong(LogError::new(source, e.to_string())))?;
    Ok(OtherCast { water, source: source.to_string() })
}
