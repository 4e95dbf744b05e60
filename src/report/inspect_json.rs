//! What was understood of a log, as JSON.

use super::InspectReport;
use super::number::rounded;
use super::series_csv::absolute;
use crate::cast::{Cast, Deck, TareBasis};
use crate::inspection::{FlagCounts, Inspection};
use crate::log::{Channel, Flag, PressureKind};
use serde_json::{Map, Value, json};
use std::io::{self, Write};

/// `{"schema": "seaplumb.inspect/1", "casts": [...]}`. Null where nothing is known; samples count from 0, lines from 1.
#[derive(Debug, Default)]
pub struct InspectJson {
    /// Whether every suspect sample is listed.
    pub samples: bool,
    written: bool,
}

impl InspectJson {
    /// A report that lists every suspect sample, or not.
    pub fn new(samples: bool) -> Self {
        Self { samples, written: false }
    }
}

impl InspectReport for InspectJson {
    fn begin(&mut self, out: &mut dyn Write) -> io::Result<()> {
        self.written = false;
        out.write_all(b"{ \"schema\": \"seaplumb.inspect/1\",\n  \"casts\": [")
    }

    fn cast(&mut self, out: &mut dyn Write, inspection: &Inspection) -> io::Result<()> {
        out.write_all(if self.written { b",\n" } else { b"\n" })?;
        self.written = true;
        serde_json::to_writer_pretty(out, &cast(inspection, self.samples)).map_err(io::Error::from)
    }

    fn end(&mut self, out: &mut dyn Write) -> io::Result<()> {
        out.write_all(b"\n] }\n")
    }
}

/// Name of a flag of the IOC scheme in results.
pub(super) fn flag_name(flag: Flag) -> &'static str {
    match flag {
        Flag::Good => "good",
        Flag::NotEvaluated => "not_evaluated",
        Flag::Questionable => "questionable",
        Flag::Bad => "bad",
        Flag::Missing => "missing",
    }
}

fn cast(i: &Inspection, samples: bool) -> Value {
    let log = &i.log;
    let known = i.cast.as_ref().ok();
    let start = log.time.as_ref().and_then(|t| t.start).or(log.start);
    let end = log
        .time
        .as_ref()
        .and_then(|t| Some(absolute(t.start?, t.elapsed_s.iter().rev().copied().find(|s| s.is_finite())?)));
    let warnings = known.map_or(&log.warnings, |cast| &cast.warnings);
    let mut cast = json!({
        "log": log.source,
        "format": log.format,
        "station": log.station,
        "position": log.position.map(|p| json!({ "latitude": p.latitude_deg, "longitude": p.longitude_deg })),
        "samples": log.len(),
        "lines": lines(i, 0, log.len().saturating_sub(1)),
        "start": start.map(|t| t.to_string()),
        "end": end,
        "columns": columns(i),
        "unused_columns": log.unused,
        "sampling": i.sampling.map(|s| json!({
            "median_interval_s": rounded(s.median_interval_s, 6),
            "irregular_share": rounded(s.irregular_share, 6),
            "span_s": rounded(s.span_s, 4),
            "without_time": s.missing,
        })),
        "gaps": i.gaps.iter().map(|g| json!({
            "after_sample": g.after_sample,
            "before_sample": g.before_sample,
            "lines": lines(i, g.after_sample, g.before_sample),
            "time_s": rounded(g.time_s, 4),
            "duration_s": rounded(g.duration_s, 4),
        })).collect::<Vec<_>>(),
        "pressure": {
            "kind": kind_name(i.pressure_kind),
            "kind_by": i.pressure_kind_by.name(),
            "air_pressure_hpa": i.air_pressure_hpa,
            "air_pressure_by": i.air_pressure_by.name(),
            "noise_dbar": known.and_then(|c| c.noise.deviation_dbar).map(|x| rounded(x, 6)),
            "averaged_step_dbar": known.and_then(|c| c.noise.averaged_step_dbar).map(|x| rounded(x, 6)),
        },
        "deck": known.map(deck),
        "legs": i.parts.iter().map(|p| json!({
            "leg": p.name,
            "first_sample": p.samples.start,
            "last_sample": p.samples.end - 1,
            "lines": lines(i, p.samples.start, p.samples.end - 1),
            "pressure_dbar": pair(p.pressure_dbar, 3),
            "duration_s": p.duration_s.map(|s| rounded(s, 4)),
        })).collect::<Vec<_>>(),
        "values": i.values.iter().map(|v| json!({
            "quantity": v.quantity,
            "unit": if v.unit.is_empty() { "1" } else { v.unit },
            "missing": v.missing,
            "range": pair(v.all, 6),
            "range_good_in_water": pair(v.good, 6),
        })).collect::<Vec<_>>(),
        "flags": {
            "log": i.logged_flags.iter().map(|f| (f.about.to_string(), counts(f))).collect::<Map<_, _>>(),
            "samples": i.sample_flags.as_ref().map(counts),
        },
        "suspects": i.findings.iter().map(|f| json!({
            "quantity": f.quantity,
            "reason": f.reason.name(),
            "count": f.count,
            "stretches": f.stretches.iter().map(|s| json!({
                "first_sample": s.first,
                "last_sample": s.last,
                "lines": lines(i, s.first, s.last),
                "pressure_dbar": pair(s.pressure_dbar, 3),
            })).collect::<Vec<_>>(),
        })).collect::<Vec<_>>(),
        "failure": i.cast.as_ref().err().map(|e| json!({ "problem": e.problem, "remedy": e.remedy })),
        "warnings": warnings,
    });
    if let (true, Some(known), Some(cast)) = (samples, known, cast.as_object_mut()) {
        cast.insert("suspect_samples".to_string(), suspects(i, known));
    }
    cast
}

fn columns(i: &Inspection) -> Value {
    let log = &i.log;
    let time = log.time.as_ref().map(|t| {
        json!({ "role": "time", "name": t.name, "unit": t.unit, "recognised_by": t.recognised_by, "flags": false })
    });
    let channels = super::inspect_text::channels(log);
    let of = |(role, c): (&str, &Channel)| {
        json!({
            "role": role, "name": c.name, "unit": c.unit, "recognised_by": c.recognised_by, "flags": c.flags.is_some(),
        })
    };
    Value::Array(time.into_iter().chain(channels.into_iter().map(of)).collect())
}

fn deck(cast: &Cast) -> Value {
    let Deck { before, after } = cast.deck.clone().unwrap_or(Deck { before: 0..0, after: 0..0 });
    let tare = &cast.tare;
    json!({
        "samples_before": before.len(),
        "samples_after": after.len(),
        "offset_before_dbar": tare.before_dbar.map(|x| rounded(x, 5)),
        "offset_after_dbar": tare.after_dbar.map(|x| rounded(x, 5)),
        "tare_dbar": rounded(tare.value_dbar, 5),
        "tare_standard_uncertainty_dbar": rounded(tare.standard_uncertainty_dbar, 6),
        "tare_by": match tare.basis {
            TareBasis::Deck => "deck",
            TareBasis::Given => "option",
            TareBasis::Assumed => "assumed",
        },
    })
}

fn suspects(i: &Inspection, cast: &Cast) -> Value {
    let elapsed_s = i.log.time.as_ref().map(|t| &t.elapsed_s);
    let one = |s: &crate::cast::Suspect| {
        json!({
            "sample": s.sample,
            "line": i.log.line_of(s.sample),
            "time_s": elapsed_s.map(|t| rounded(t[s.sample], 4)).filter(|t| t.is_finite()),
            "pressure_dbar": Some(rounded(cast.pressure_dbar[s.sample], 3)).filter(|p| p.is_finite()),
            "quantity": i.name_of(s.quantity),
            "value": i.value(s.quantity, s.sample).map(|v| rounded(v, 6)),
            "reason": s.reason.name(),
        })
    };
    Value::Array(cast.suspects.iter().map(one).collect())
}

pub(super) fn kind_name(kind: PressureKind) -> &'static str {
    match kind {
        PressureKind::Absolute => "absolute",
        PressureKind::Sea => "sea",
        PressureKind::Gauge => "gauge",
    }
}

/// First and last line; null where the format has none.
fn lines(i: &Inspection, first: usize, last: usize) -> Option<[u64; 2]> {
    Some([i.log.line_of(first)?, i.log.line_of(last)?])
}

fn pair(range: Option<(f64, f64)>, decimals: i32) -> Option<[f64; 2]> {
    range.map(|(low, high)| [rounded(low, decimals), rounded(high, decimals)])
}

fn counts(flags: &FlagCounts) -> Value {
    Value::Object(flags.counts.iter().map(|(f, n)| (flag_name(*f).to_string(), json!(n))).collect())
}
