//! Reduces all logs of a call.

use super::args::SharedArgs;
use super::in_order::in_order;
use super::output::{Folder, failure};
use super::profile::read_profile;
use super::request::{self, CallError};
use super::run::Failure;
use super::sources;
use crate::log::{self, LogError, ReadOptions};
use crate::reduction::Reduction;
use crate::report::Report;
use crate::settings::{Layer, OtherCast, Settings};
use crate::sheet::Sheet;
use indicatif::{ProgressBar, ProgressStyle};
use std::collections::BTreeMap;
use std::io::{self, BufWriter, IsTerminal, Write};
use std::process::ExitCode;

/// Reduces logs on all cores, results in the order of the call; a log that fails does not stop the others.
pub(super) fn reduce_all(
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
        _ => sources::expand(&args.logs)?,
    };
    request::standard_input_once(&sources)?;
    if args.into.is_none() && sources.len() > 1 && !report.holds_many() {
        let text = "several logs make several tables: give a folder for them, --into DIR, or --format json";
        return Err(CallError(text.to_string()).into());
    }
    let mut folder = args.into.as_deref().map(|dir| Folder::open(dir, args.replace, &sources)).transpose()?;
    if let Some(folder) = &folder {
        folder.refuse_known(&sources, report.extension())?;
    }
    let jobs = jobs(&sources, &call, sheet.as_ref())?;
    if let Some(sheet) = sheet.as_ref().filter(|sheet| sheet.has_casts() && !args.quiet) {
        for source in sources.iter().filter(|source| !sheet.names(source)) {
            writeln!(
                notes,
                "{source}: no [[cast]] of the sheet is about it; what the sheet says of all casts holds"
            )?;
        }
    }

    let threads = match args.jobs {
        Some(0) => return Err(CallError("--jobs 0: expected 1 or more".to_string()).into()),
        Some(threads) => threads,
        None => std::thread::available_parallelism().map_or(1, usize::from),
    };
    let bar = progress(jobs.len(), !args.quiet && (folder.is_some() || !io::stdout().is_terminal()));
    let mut out = BufWriter::with_capacity(1 << 16, out);
    // Begun with the first result: when no log can be reduced, nothing is printed that looks like one.
    let mut begun = false;
    let mut failed = Vec::new();
    let reduce = |job: &Job| -> Result<Vec<Result<Reduction, LogError>>, LogError> {
        let logs = log::read_each(&job.source, &job.reading)?;
        Ok(logs.into_iter().map(|log| Reduction::new(log?, &job.settings)).collect())
    };
    in_order(&jobs, threads, reduce, |job, results| -> Result<(), Failure> {
        let results = results.unwrap_or_else(|error| vec![Err(error)]);
        if results.len() > 1 && folder.is_none() && !report.holds_many() {
            let (source, n) = (&job.source, results.len());
            let text =
                format!("{source} holds {n} casts: give a folder for them, --into DIR, or --format json");
            return Err(CallError(text).into());
        }
        for result in results {
            match result {
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
                        bar.suspend(|| note(notes, &reduction))?;
                    }
                }
                Err(error) => {
                    bar.suspend(|| writeln!(notes, "{}", failure(&error)))?;
                    failed.push(error.file);
                }
            }
        }
        bar.inc(1);
        Ok(())
    })?;
    bar.finish_and_clear();
    match folder {
        Some(folder) => folder.close()?,
        None if begun => report.end(&mut out)?,
        None => {}
    }
    out.flush()?;
    if !failed.is_empty() && jobs.len() > 1 {
        writeln!(notes, "seaplumb: {} could not be reduced, of {} logs:", failed.len(), jobs.len())?;
        for file in &failed {
            writeln!(notes, "  {file}")?;
        }
    }
    Ok(if failed.is_empty() { ExitCode::SUCCESS } else { ExitCode::from(3) })
}

/// A bar on a terminal, for more logs than one sees pass.
fn progress(logs: usize, wanted: bool) -> ProgressBar {
    if !wanted || logs < 4 {
        return ProgressBar::hidden();
    }
    // The template is ours and right; a bar without it would still do.
    let style = ProgressStyle::with_template("{wide_bar} {pos} of {len} logs, {per_sec}, {eta} left")
        .unwrap_or_else(|_| ProgressStyle::default_bar());
    ProgressBar::new(logs as u64).with_style(style)
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
