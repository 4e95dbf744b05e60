//! What was understood of a log, for people.

use super::InspectReport;
use super::deepest_text::{bullet, clock, wrapped};
use super::inspect_json::{flag_name, kind_name};
use super::number::{grouped, push_trimmed, short};
use super::series_csv::absolute;
use crate::cast::{Cast, TareBasis};
use crate::inspection::{FlagCounts, GAP_INTERVALS, Inspection, Source, Stretch};
use crate::log::{Channel, Log};
use std::io::{self, Write};

/// Columns, sensor, parts of the cast, gaps, ranges, flags, suspect samples, warnings.
#[derive(Debug, Default)]
pub struct InspectText {
    /// Whether every suspect sample is listed.
    pub samples: bool,
    written: bool,
}

impl InspectText {
    /// A report that lists every suspect sample, or not.
    pub fn new(samples: bool) -> Self {
        Self { samples, written: false }
    }
}

/// Stretches and gaps that are shown of each kind, the longest first to be kept.
const SHOWN: usize = 6;

impl InspectReport for InspectText {
    fn begin(&mut self, _out: &mut dyn Write) -> io::Result<()> {
        self.written = false;
        Ok(())
    }

    fn cast(&mut self, out: &mut dyn Write, i: &Inspection) -> io::Result<()> {
        if self.written {
            writeln!(out, "\n{}\n", "=".repeat(78))?;
        }
        self.written = true;
        writeln!(out, "{}\n", i.log.source)?;
        log_lines(out, i)?;
        columns(out, &i.log)?;
        match &i.cast {
            Ok(cast) => {
                sensor(out, i, Some(cast))?;
                parts(out, i)?;
            }
            Err(error) => {
                sensor(out, i, None)?;
                writeln!(out, "\n  This log cannot be read as a cast")?;
                writeln!(out, "{}", bullet(&error.problem))?;
                if let Some(remedy) = &error.remedy {
                    writeln!(out, "{}", wrapped(remedy, "    "))?;
                }
            }
        }
        gaps(out, i)?;
        values(out, i)?;
        flags(out, i)?;
        if let Ok(cast) = &i.cast {
            suspects(out, i)?;
            if self.samples && !cast.suspects.is_empty() {
                suspect_samples(out, i, cast)?;
            }
        }
        let warnings = i.cast.as_ref().map_or(&i.log.warnings, |cast| &cast.warnings);
        if !warnings.is_empty() {
            writeln!(out, "\n  Warnings")?;
            for warning in warnings {
                writeln!(out, "{}", bullet(&warning.to_string()))?;
            }
        }
        Ok(())
    }

    fn end(&mut self, _out: &mut dyn Write) -> io::Result<()> {
        Ok(())
    }
}

/// The channels of a log with the names of their roles.
pub(super) fn channels(log: &Log) -> Vec<(&'static str, &Channel)> {
    [
        ("pressure", Some(&log.pressure)),
        ("temperature", log.temperature.as_ref()),
        ("conductivity", log.conductivity.as_ref()),
        ("salinity", log.salinity.as_ref()),
        ("altitude", log.altitude.as_ref()),
        ("pitch", log.pitch.as_ref()),
        ("roll", log.roll.as_ref()),
    ]
    .into_iter()
    .filter_map(|(role, channel)| Some((role, channel?)))
    .collect()
}

/// A line `name   text`, the text broken where it is long.
fn entry(out: &mut dyn Write, name: &str, text: &str) -> io::Result<()> {
    let indent = " ".repeat(18);
    let text = wrapped(text, &indent);
    writeln!(out, "  {name:<15} {}", text.trim_start())
}

fn log_lines(out: &mut dyn Write, i: &Inspection) -> io::Result<()> {
    let log = &i.log;
    entry(out, "Format", &log.format)?;
    if let Some(station) = &log.station {
        entry(out, "Station", station)?;
    }
    let position = match log.position {
        Some(p) => {
            let longitude = p.longitude_deg.map_or(String::new(), |l| format!(", longitude {}", degrees(l)));
            format!("latitude {}{longitude}", degrees(p.latitude_deg))
        }
        None => "not told by the log; a reduction needs --lat DEGREES".to_string(),
    };
    entry(out, "Position", &position)?;
    let lines = match (log.line_of(0), log.line_of(log.len().saturating_sub(1))) {
        (Some(first), Some(last)) => format!(", lines {} to {}", counted(first), counted(last)),
        _ => String::new(),
    };
    entry(out, "Samples", &format!("{}{lines}; counted from 0 below", counted(log.len() as u64)))?;
    if let Some(start) = log.start {
        entry(out, "Start", &start.to_string())?;
    }
    match &i.sampling {
        None => entry(out, "Time", "no time for each sample"),
        Some(s) => {
            let irregular = match s.irregular_share {
                0.0 => "regular".to_string(),
                share => format!("{} % of the intervals irregular", short(100.0 * share)),
            };
            let missing = match s.missing {
                0 => String::new(),
                n => format!("; {} samples without a time", counted(n as u64)),
            };
            entry(
                out,
                "Time",
                &format!(
                    "{}, a sample every {} s (median), {irregular}{missing}",
                    clock(s.span_s),
                    short(s.median_interval_s)
                ),
            )
        }
    }
}

fn columns(out: &mut dyn Write, log: &Log) -> io::Result<()> {
    writeln!(out, "\n  Columns")?;
    // Role, name, unit, how it was recognised.
    let mut rows: Vec<[&str; 4]> = Vec::new();
    rows.extend(log.time.as_ref().map(|t| ["time", &t.name, &t.unit, &t.recognised_by]));
    rows.extend(channels(log).into_iter().map(|(role, c)| [role, &c.name, &c.unit, &c.recognised_by]));
    let width = |cell: usize, most: usize| {
        rows.iter().map(|row| row[cell].chars().count()).max().unwrap_or(0).min(most)
    };
    let (name_width, unit_width) = (width(1, 28), width(2, 16));
    for [role, name, unit, how] in &rows {
        let unit = if *unit == "1" { "" } else { unit };
        writeln!(out, "    {role:<13} {name:<name_width$}  {unit:<unit_width$}  {how}")?;
    }
    if log.flags.is_some() {
        writeln!(out, "    flag          of the whole sample")?;
    }
    if !log.unused.is_empty() {
        let names: Vec<String> = log.unused.iter().map(|name| format!("'{name}'")).collect();
        let indent = " ".repeat(18);
        let text = wrapped(&names.join(", "), &indent);
        writeln!(out, "    left aside    {}", text.trim_start())?;
    }
    Ok(())
}

fn sensor(out: &mut dyn Write, i: &Inspection, cast: Option<&Cast>) -> io::Result<()> {
    writeln!(out)?;
    let said = match i.pressure_kind_by {
        Source::Option => "as --pressure says",
        Source::Log => "as the log tells",
        Source::Assumed => "assumed, for nobody said (--pressure absolute, sea or gauge)",
    };
    let kind = match kind_name(i.pressure_kind) {
        "sea" => "sea pressure (absolute less 101 325 Pa)",
        "gauge" => "gauge pressure (zeroed in the air of the day)",
        _ => "absolute pressure",
    };
    entry(out, "Pressure", &format!("{kind}, {said}"))?;
    let said = if i.air_pressure_by == Source::Assumed { ", assumed (--air-pressure)" } else { ", as given" };
    entry(out, "Air", &format!("{} hPa{said}", i.air_pressure_hpa))?;
    let Some(cast) = cast else { return Ok(()) };
    let deck = match &cast.deck {
        None => "no samples on deck were found".to_string(),
        Some(deck) => format!(
            "{} samples before the cast, {} after it",
            counted(deck.before.len() as u64),
            counted(deck.after.len() as u64)
        ),
    };
    entry(out, "Deck", &deck)?;
    let tare = &cast.tare;
    let ends: Vec<String> = [("before", tare.before_dbar), ("after", tare.after_dbar)]
        .into_iter()
        .filter_map(|(name, x)| Some(format!("{name} {} dbar", grouped(x?, 4))))
        .collect();
    let ends = if ends.is_empty() { String::new() } else { format!("; on deck: {}", ends.join(", ")) };
    let basis = match tare.basis {
        TareBasis::Deck => "from the deck",
        TareBasis::Given => "as --tare says",
        TareBasis::Assumed => "assumed",
    };
    entry(
        out,
        "Zero offset",
        &format!(
            "{} dbar, standard uncertainty {} dbar, {basis}{ends}",
            grouped(tare.value_dbar, 4),
            short(tare.standard_uncertainty_dbar)
        ),
    )?;
    let noise = match (cast.noise.deviation_dbar, cast.noise.averaged_step_dbar) {
        (Some(deviation), _) => format!("{} dbar, standard deviation of one reading", short(deviation)),
        (None, Some(step)) => format!("cannot be told: the log is averaged in steps of {} dbar", short(step)),
        (None, None) => "cannot be told: too few samples in the water".to_string(),
    };
    entry(out, "Noise", &noise)
}

fn parts(out: &mut dyn Write, i: &Inspection) -> io::Result<()> {
    writeln!(out, "\n  {:<16}{:>22}{:>26}{:>20}", "Parts", "samples", "sea pressure, dbar", "duration")?;
    for part in &i.parts {
        let pressure = part.pressure_dbar.map_or("-".to_string(), |range| span(range, 2));
        let duration = part.duration_s.map_or("-".to_string(), clock);
        let samples = format!("{} to {}", part.samples.start, part.samples.end - 1);
        writeln!(out, "    {:<14}{samples:>22}{pressure:>26}{duration:>20}", part.name)?;
    }
    Ok(())
}

fn gaps(out: &mut dyn Write, i: &Inspection) -> io::Result<()> {
    if i.sampling.is_none() {
        return Ok(());
    }
    if i.gaps.is_empty() {
        writeln!(out)?;
        return entry(out, "Gaps in time", &format!("none longer than {GAP_INTERVALS} intervals"));
    }
    writeln!(out, "\n  Gaps in time, longer than {GAP_INTERVALS} intervals")?;
    let mut longest: Vec<_> = i.gaps.iter().collect();
    longest.sort_by(|a, b| b.duration_s.total_cmp(&a.duration_s));
    let start = i.log.time.as_ref().and_then(|t| t.start);
    let (kept, more) = kept_in_order(longest, |gap| gap.after_sample);
    for gap in kept {
        let at = start.map_or_else(|| clock(gap.time_s), |start| absolute(start, gap.time_s));
        writeln!(
            out,
            "    {}: {} at {at}",
            place(&i.log, gap.after_sample, gap.before_sample),
            clock(gap.duration_s)
        )?;
    }
    and_more(out, more, "--format json lists all")
}

fn values(out: &mut dyn Write, i: &Inspection) -> io::Result<()> {
    let head = if i.cast.is_ok() { "good, in the water" } else { "" };
    let head = format!("  {:<28}{:>8}{:>23}{head:>23}", "Values", "missing", "in the log");
    writeln!(out, "\n{}", head.trim_end())?;
    for v in &i.values {
        let name =
            if v.unit.is_empty() { v.quantity.to_string() } else { format!("{}, {}", v.quantity, v.unit) };
        let all = v.all.map_or("-".to_string(), |range| span(range, 3));
        let good = match (&i.cast, v.good) {
            (Ok(_), good) => good.map_or("-".to_string(), |range| span(range, 3)),
            (Err(_), _) => String::new(),
        };
        let row = format!("    {name:<26}{:>8}{all:>23}{good:>23}", counted(v.missing as u64));
        writeln!(out, "{}", row.trim_end())?;
    }
    Ok(())
}

fn flags(out: &mut dyn Write, i: &Inspection) -> io::Result<()> {
    let words = |flags: &FlagCounts| -> String {
        let each =
            |(f, n): &(_, usize)| format!("{} {}", flag_name(*f).replace('_', " "), counted(*n as u64));
        flags.counts.iter().map(each).collect::<Vec<_>>().join(", ")
    };
    writeln!(out)?;
    for flags in &i.logged_flags {
        entry(out, "Logged flags", &format!("{}: {}", flags.about, words(flags)))?;
    }
    match &i.sample_flags {
        Some(flags) => entry(out, "Verdict", &format!("samples: {}", words(flags))),
        None => Ok(()),
    }
}

fn suspects(out: &mut dyn Write, i: &Inspection) -> io::Result<()> {
    if i.findings.is_empty() {
        return entry(out, "Suspect", "no sample");
    }
    writeln!(out, "\n  Suspect samples")?;
    for finding in &i.findings {
        let samples = if finding.count == 1 { "sample" } else { "samples" };
        writeln!(
            out,
            "    {}, {}: {} {samples}",
            finding.quantity,
            finding.reason.name(),
            counted(finding.count as u64)
        )?;
        let mut longest: Vec<&Stretch> = finding.stretches.iter().collect();
        longest.sort_by_key(|s| std::cmp::Reverse(s.last - s.first));
        let (kept, more) = kept_in_order(longest, |stretch| stretch.first);
        for stretch in kept {
            let pressure =
                stretch.pressure_dbar.map_or(String::new(), |range| format!(", {} dbar", span(range, 1)));
            writeln!(out, "      {}{pressure}", place(&i.log, stretch.first, stretch.last))?;
        }
        and_more(out, more, "--samples lists all")?;
    }
    Ok(())
}

fn suspect_samples(out: &mut dyn Write, i: &Inspection, cast: &Cast) -> io::Result<()> {
    writeln!(
        out,
        "\n  {:>9}{:>9}{:>13}{:>12}  {:<13}{:>12}  reason",
        "sample", "line", "time, s", "dbar", "quantity", "value"
    )?;
    for s in &cast.suspects {
        let line = i.log.line_of(s.sample).map_or("-".to_string(), |line| line.to_string());
        let time = i.log.time.as_ref().map_or(f64::NAN, |t| t.elapsed_s[s.sample]);
        let value = i.value(s.quantity, s.sample).unwrap_or(f64::NAN);
        writeln!(
            out,
            "  {:>9}{line:>9}{:>13}{:>12}  {:<13}{:>12}  {}",
            s.sample,
            grouped(time, 2),
            grouped(cast.pressure_dbar[s.sample], 3),
            i.name_of(s.quantity),
            grouped(value, 4),
            s.reason.name()
        )?;
    }
    Ok(())
}

/// The longest few in the order of the log, and how many are left out.
fn kept_in_order<T>(mut longest: Vec<T>, key: impl Fn(&T) -> usize) -> (Vec<T>, usize) {
    let more = longest.len().saturating_sub(SHOWN);
    longest.truncate(SHOWN);
    longest.sort_by_key(key);
    (longest, more)
}

fn and_more(out: &mut dyn Write, more: usize, how: &str) -> io::Result<()> {
    if more == 0 {
        return Ok(());
    }
    writeln!(out, "      and {} shorter or as short ({how})", counted(more as u64))
}

/// Samples with their lines: `samples 3 to 7 (lines 5 to 9)`.
fn place(log: &Log, first: usize, last: usize) -> String {
    let lines = log.line_of(first).zip(log.line_of(last));
    if first == last {
        let line = lines.map_or(String::new(), |(line, _)| format!(" (line {line})"));
        return format!("sample {first}{line}");
    }
    let lines = lines.map_or(String::new(), |(a, b)| format!(" (lines {a} to {b})"));
    format!("samples {first} to {last}{lines}")
}

fn span((low, high): (f64, f64), decimals: u32) -> String {
    let (low, high) = (grouped(low, decimals), grouped(high, decimals));
    if low == high { low } else { format!("{low} to {high}") }
}

/// Degrees to a metre or so: single precision in a file leaves digits that mean nothing.
fn degrees(value: f64) -> String {
    let mut text = Vec::new();
    push_trimmed(&mut text, value, 5);
    String::from_utf8_lossy(&text).into_owned()
}

fn counted(n: u64) -> String {
    grouped(n as f64, 0)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_longest_are_kept_in_the_order_of_the_log() {
        let all: Vec<usize> = (0..10).rev().collect();
        assert_eq!(kept_in_order(all, |n| *n), (vec![4, 5, 6, 7, 8, 9], 4));
        assert_eq!(kept_in_order(vec![2, 1], |n| *n), (vec![1, 2], 0));
    }

    #[test]
    fn ranges_for_people() {
        assert_eq!(span((-0.25, 11_204.5), 1), "-0.2 to 11 204.5");
        assert_eq!(span((2.0, 2.0), 2), "2.00");
        assert_eq!((degrees(42.973_499_298).as_str(), degrees(-31.5).as_str()), ("42.9735", "-31.5"));
    }
}
