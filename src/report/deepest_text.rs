//! The deepest depth for people: the figure first, then where it comes from.

use super::number::{grouped, short};
use super::{CAUTION, Report};
use crate::cast::{Leg, Reason, TareBasis};
use crate::log::PressureKind;
use crate::reduction::Reduction;
use crate::uncertainty::BudgetTerm;
use std::collections::{BTreeMap, BTreeSet};
use std::io::{self, Write};

/// The deepest depth with its uncertainty, the budget with bars, the ladder, survey orders, assumptions, warnings.
#[derive(Debug, Default)]
pub struct DeepestText {
    written: bool,
}

/// Width of the longest bar.
const BAR: usize = 20;

impl Report for DeepestText {
    fn extension(&self) -> &'static str {
        "txt"
    }

    fn begin(&mut self, _out: &mut dyn Write) -> io::Result<()> {
        self.written = false;
        Ok(())
    }

    fn cast(&mut self, out: &mut dyn Write, reduction: &Reduction) -> io::Result<()> {
        if self.written {
            writeln!(out, "\n{}\n", "=".repeat(78))?;
        }
        self.written = true;
        statement(out, reduction)?;
        origin(out, reduction)?;
        budget(out, reduction)?;
        ladder(out, reduction)?;
        orders(out, reduction)?;
        remarks(out, reduction)
    }

    fn end(&mut self, out: &mut dyn Write) -> io::Result<()> {
        writeln!(out, "\n{}", wrapped(CAUTION, ""))
    }
}

fn statement(out: &mut dyn Write, r: &Reduction) -> io::Result<()> {
    let b = &r.budget;
    let station = r.log.station.as_ref().map_or(String::new(), |s| format!(", station {s}"));
    writeln!(out, "{}{station}\n", r.log.source)?;
    writeln!(
        out,
        "  Deepest depth   {} m  ± {} m",
        grouped(r.deepest_m, 2),
        grouped(b.expanded_uncertainty_m(), 2)
    )?;
    let freedom = match b.effective_degrees_of_freedom {
        Some(nu) if nu < 1_000.0 => format!(", {nu:.0} effective degrees of freedom"),
        _ => String::new(),
    };
    writeln!(
        out,
        "                  expanded uncertainty, {} % coverage, k = {:.2}{freedom}",
        short(100.0 * b.coverage_probability),
        b.coverage_factor
    )?;
    let point = match r.model.place.reference_below_sensor_m {
        0.0 => "at the pressure sensor".to_string(),
        below => format!("at the reference point, {} m below the pressure sensor", short(below)),
    };
    writeln!(out, "                  below the {}, {point}\n", r.datum)
}

fn origin(out: &mut dyn Write, r: &Reduction) -> io::Result<()> {
    let d = &r.deepest;
    let mut line = |name: &str, text: String| writeln!(out, "  {name:<15} {text}");
    line("Sea pressure", format!("{} dbar, {}", grouped(d.pressure_dbar, 2), estimator(r)))?;
    line(
        "Raw maximum",
        format!(
            "{} m, the largest single pressure that is not suspect",
            grouped(r.depth_m(d.raw_pressure_dbar), 2)
        ),
    )?;
    if let Some(time) = &r.log.time {
        let elapsed = time.elapsed_s[d.sample];
        let mut text = format!("{} after the first sample", clock(elapsed));
        if let Some(start) = time.start {
            text = format!("{}, {text}", super::series_csv::absolute(start, elapsed));
        }
        if let Some(stay) = r.time_within_a_metre_s() {
            text = format!("{text}; within 1 m of it for {}", clock(stay));
        }
        line("Reached", text)?;
    }
    let longitude = r.longitude_deg.map_or(String::new(), |l| format!(", longitude {l}"));
    line("Position", format!("latitude {}{longitude}", r.latitude_deg))?;
    line("Water", r.water_words.clone())?;
    let kind = match r.cast.pressure_kind {
        PressureKind::Absolute => "absolute pressure",
        PressureKind::Sea => "sea pressure",
        PressureKind::Gauge => "gauge pressure",
    };
    let tare = &r.cast.tare;
    let zero = match tare.basis {
        TareBasis::Deck => {
            let end = |name: &str, x: Option<f64>| x.map(|x| format!("{name} {}", grouped(x, 3)));
            let ends: Vec<String> = [end("before", tare.before_dbar), end("after", tare.after_dbar)]
                .into_iter()
                .flatten()
                .collect();
            format!("zero offset {} dbar from the deck ({})", grouped(tare.value_dbar, 3), ends.join(", "))
        }
        TareBasis::Given => format!("zero offset {:.3} dbar as given", tare.value_dbar),
        TareBasis::Assumed => "zero offset 0 dbar, assumed".to_string(),
    };
    line("Sensor", format!("{kind}; {zero}"))?;
    let count = |leg| r.cast.legs.range(leg).len();
    let water = r.cast.legs.water().len();
    let missing = r.cast.pressure_dbar.iter().filter(|p| !p.is_finite()).count();
    let without = if missing > 0 { format!("; {missing} without a pressure") } else { String::new() };
    line(
        "Samples",
        format!(
            "{}: deck {}, down {}, bottom {}, up {}{without}",
            r.len(),
            r.len() - water,
            count(Leg::Down),
            count(Leg::Bottom),
            count(Leg::Up)
        ),
    )?;
    let mut reasons: BTreeMap<&str, BTreeSet<usize>> = BTreeMap::new();
    for suspect in &r.cast.suspects {
        reasons.entry(suspect.reason.name()).or_default().insert(suspect.sample);
    }
    let mut named: Vec<String> =
        reasons.iter().map(|(name, samples)| format!("{name} {}", samples.len())).collect();
    if named.is_empty() {
        named.push("none".to_string());
    }
    line("Suspect", named.join(", "))?;
    // A spike that is left out is deeper than the deepest: people will ask.
    let spike = r
        .cast
        .suspects
        .iter()
        .filter(|s| s.reason == Reason::Spike && !r.cast.pressure_flag[s.sample].usable())
        .map(|s| r.cast.pressure_dbar[s.sample])
        .fold(f64::NEG_INFINITY, f64::max);
    if spike > d.raw_pressure_dbar {
        line("", format!("a pressure spike at {} m is left out", grouped(r.depth_m(spike), 2)))?;
    }
    writeln!(out)
}

fn estimator(r: &Reduction) -> String {
    if r.deepest.window > 1 {
        format!("the largest running median of {} samples", r.deepest.window)
    } else if let Some(step) = r.cast.noise.averaged_step_dbar {
        format!("the deepest step of a log averaged by {} dbar", short(step))
    } else {
        "one sample: the plateau is too short for a running median".to_string()
    }
}

fn budget(out: &mut dyn Write, r: &Reduction) -> io::Result<()> {
    let b = &r.budget;
    writeln!(out, "  Uncertainty budget, standard uncertainty {} m\n", grouped(b.standard_uncertainty_m, 3))?;
    writeln!(
        out,
        "  {:<25}{:>10}  {:<7}{:>10}{:>9}  {:<8}  of the variance",
        "term", "u", "", "m", "share", "basis"
    )?;
    let mut terms: Vec<&BudgetTerm> = b.terms.iter().collect();
    terms.sort_by(|a, b| b.contribution_m.total_cmp(&a.contribution_m));
    for t in terms {
        let bar = "\u{25a0}".repeat((t.share * BAR as f64).round() as usize);
        let unit = if t.unit == "1" { "" } else { t.unit };
        let row = format!(
            "  {:<25}{:>10}  {unit:<7}{:>10.4}{:>7.1} %  {:<8}  {bar}",
            t.term,
            short(t.standard_uncertainty),
            t.contribution_m,
            100.0 * t.share,
            t.basis.name()
        );
        writeln!(out, "{}", row.trim_end())?;
    }
    writeln!(out)
}

fn ladder(out: &mut dyn Write, r: &Reduction) -> io::Result<()> {
    writeln!(out, "  From shortcut to answer, each line with one correction more\n")?;
    let mut before: Option<f64> = None;
    for rung in &r.ladder {
        let change = before.map_or(String::new(), |b| format!("{:>+11.2}", rung.depth_m - b));
        let row = format!("  {:<25}{:>12} m{change}", rung.step, grouped(rung.depth_m, 2));
        writeln!(out, "{}", row.replace("-0.00", "+0.00"))?;
        before = Some(rung.depth_m);
    }
    writeln!(out)
}

fn orders(out: &mut dyn Write, r: &Reduction) -> io::Result<()> {
    writeln!(
        out,
        "  Total vertical uncertainty {} m at 95 %, against the maximum allowable of IHO S-44",
        grouped(r.budget.expanded_for_m(0.95), 2)
    )?;
    let verdicts: Vec<String> = r
        .survey_orders
        .iter()
        .map(|o| {
            let verdict = if o.met { "met" } else { "not met" };
            let name = match o.order {
                "exclusive" => "Exclusive Order".to_string(),
                "special" => "Special Order".to_string(),
                number => format!("Order {number}"),
            };
            format!("{name} {verdict} ({} m)", grouped(o.limit_m, 2))
        })
        .collect();
    writeln!(out, "{}", wrapped(&verdicts.join("; "), "  "))
}

fn remarks(out: &mut dyn Write, r: &Reduction) -> io::Result<()> {
    writeln!(out, "\n  Assumed, for want of better knowledge (with the option that settles it)")?;
    for sentence in &r.assumptions {
        writeln!(out, "{}", bullet(sentence))?;
    }
    if !r.warnings.is_empty() {
        writeln!(out, "\n  Warnings")?;
        for warning in &r.warnings {
            writeln!(out, "{}", bullet(&warning.to_string()))?;
        }
    }
    Ok(())
}

/// Seconds as hours, minutes, seconds.
pub(super) fn clock(seconds: f64) -> String {
    if !seconds.is_finite() {
        return "unknown time".to_string();
    }
    let whole = seconds.round().max(0.0) as u64;
    let (h, m, s) = (whole / 3600, whole / 60 % 60, whole % 60);
    match (h, m) {
        (0, 0) => format!("{s} s"),
        (0, _) => format!("{m} min {s:02} s"),
        _ => format!("{h} h {m:02} min {s:02} s"),
    }
}

pub(super) fn bullet(text: &str) -> String {
    wrapped(text, "    ").replacen("    ", "  - ", 1)
}

/// Text broken at blanks to lines of 78 characters, each behind `indent`.
pub(super) fn wrapped(text: &str, indent: &str) -> String {
    let mut lines = vec![indent.to_string()];
    for word in text.split_whitespace() {
        let last = lines.len() - 1;
        let line = &mut lines[last];
        if line.chars().count() + 1 + word.chars().count() > 78 && line.len() > indent.len() {
            lines.push(format!("{indent}{word}"));
        } else {
            if line.len() > indent.len() {
                line.push(' ');
            }
            line.push_str(word);
        }
    }
    lines.join("\n")
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn times_for_people() {
        assert_eq!(clock(12.4), "12 s");
        assert_eq!(clock(754.0), "12 min 34 s");
        assert_eq!(clock(13_860.0), "3 h 51 min 00 s");
        assert_eq!(clock(f64::NAN), "unknown time");
    }

    #[test]
    fn lines_keep_their_width() {
        let text = wrapped(&"word ".repeat(60), "    ");
        assert!(text.lines().all(|l| l.chars().count() <= 78 && l.starts_with("    word")));
        assert!(bullet("a b").starts_with("  - a b"));
    }
}
