//! A sheet to fill in: every key with its meaning, and what the logs tell already filled in.

use super::keys::{self, Key, Kind};
use crate::cast::{AIR_DBAR, Cast, CastSettings, TareChoice};
use crate::constants::{HPA_PER_DBAR, STANDARD_ATMOSPHERE_DBAR};
use crate::log::{Log, PressureKind, ReadOptions};
use crate::settings::STANDARD_AIR_HPA;
use std::fmt::Write;

/// Characters of a line of comment.
const WIDTH: usize = 100;

const HEAD: &str = "\
Cast sheet of seaplumb: what is known of casts besides their logs. Use it with: seaplumb deepest --sheet FILE

Lines that begin with # are passed over. To use a key, take its # away and fill in its value. An option of the call beats the \
sheet, the sheet beats what the log says. Keys that begin with u_ and all of \
[uncertainty] are standard uncertainties: one standard deviation, 0 or more.";

const CASTS: &str = "\
One [[cast]] for each log, or for several by a pattern (log = \"casts/*.csv\"; '*' stands for any part of a name, '?' for one \
character); files are counted from the folder of this sheet. What a cast says beats the sections above, and a later cast an \
earlier one. The keys of [station] and [log] stand directly in it, the other sections as [cast.surface], [cast.gravity] and so on.";

/// What the pressure sensor read in air, in dbar as it gives it.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct DeckReading {
    /// Before the cast.
    pub before_dbar: Option<f64>,
    /// After it.
    pub after_dbar: Option<f64>,
}

/// What a log tells that a sheet may hold.
#[derive(Debug, Clone, Default, PartialEq)]
pub struct CastFacts {
    /// The log, as the user named it.
    pub source: String,
    /// Number of casts in it; 0 when it could not be read.
    pub casts: usize,
    /// Why it could not be read, on one line.
    pub failure: Option<String>,
    /// Name of the station.
    pub station: Option<String>,
    /// Latitude in degrees, north positive.
    pub latitude_deg: Option<f64>,
    /// Longitude in degrees, east positive, -180 to 360.
    pub longitude_deg: Option<f64>,
    /// From where the pressure counts.
    pub pressure_kind: Option<PressureKind>,
    /// Time of the first sample.
    pub start: Option<jiff::Timestamp>,
    /// What the sensor read on deck.
    pub deck: Option<DeckReading>,
}

impl CastFacts {
    /// What the casts of one log tell. Of several only their number: what a sheet says of a log holds for all of them.
    pub fn of(source: &str, logs: &[Log]) -> Self {
        let several = Self { source: source.to_string(), casts: logs.len(), ..Self::default() };
        let [log] = logs else { return several };
        let longitude = log.position.and_then(|p| p.longitude_deg);
        Self {
            station: log.station.clone(),
            latitude_deg: log.position.map(|p| p.latitude_deg),
            longitude_deg: longitude.map(|v| if v < -180.0 { v + 360.0 } else { v }),
            pressure_kind: log.pressure_kind,
            start: log.start.or(log.time.as_ref().and_then(|time| time.start)),
            deck: deck(log),
            ..several
        }
    }

    /// A log that could not be read.
    pub fn unread(source: &str, failure: &str) -> Self {
        let line = failure.lines().next().unwrap_or("").to_string();
        Self { source: source.to_string(), failure: Some(line), ..Self::default() }
    }
}

/// The readings on deck, by the first origin of the pressure under which there is a deck.
fn deck(log: &Log) -> Option<DeckReading> {
    let kinds = match log.pressure_kind {
        Some(kind) => vec![kind],
        None => vec![PressureKind::Sea, PressureKind::Absolute],
    };
    kinds.into_iter().find_map(|kind| {
        let settings = CastSettings {
            pressure_kind: Some(kind),
            air_pressure_hpa: STANDARD_AIR_HPA,
            // A zero that is given is not judged, so that a reading far from zero is still told.
            tare: TareChoice::Fixed(0.0),
        };
        let cast = Cast::new(log, &settings).ok()?;
        let in_air = match kind {
            PressureKind::Absolute => STANDARD_AIR_HPA / HPA_PER_DBAR,
            PressureKind::Sea => STANDARD_AIR_HPA / HPA_PER_DBAR - STANDARD_ATMOSPHERE_DBAR,
            PressureKind::Gauge => 0.0,
        };
        let reading = DeckReading {
            before_dbar: cast.tare.before_dbar.map(|offset| offset + in_air),
            after_dbar: cast.tare.after_dbar.map(|offset| offset + in_air),
        };
        (reading.before_dbar.is_some() || reading.after_dbar.is_some()).then_some(reading)
    })
}

/// The sheet to fill in; blank without casts. `reading` is how the logs were read.
pub fn template(casts: &[CastFacts], reading: &ReadOptions) -> String {
    let mut sheet = Sheet(String::new());
    sheet.comment(HEAD);
    for section in keys::sections() {
        sheet.blank();
        sheet.comment(section.about);
        sheet.line(&format!("[{}]", section.name));
        for key in section.keys.iter() {
            sheet.comment(&about(key));
            let value = match (section.name, key.name) {
                ("log", "columns") => columns(reading),
                ("log", "missing") => missing(reading),
                _ => None,
            };
            sheet.key(key.name, value.as_deref());
        }
    }
    sheet.blank();
    sheet.comment(CASTS);
    if casts.is_empty() {
        sheet.comment("Such as:");
        for line in ["[[cast]]", "log = \"casts/K07.csv\"", "latitude = -31.60"] {
            sheet.line(&format!("#{line}"));
        }
    }
    for cast in casts {
        sheet.cast(cast);
    }
    sheet.0
}

/// What a key is, what it may hold, what holds without it.
fn about(key: &Key) -> String {
    let expected = match key.kind {
        // The head of the sheet says what they all hold.
        Kind::Uncertainty(term) if key.name == term.key() && term.unit() == "1" => String::new(),
        Kind::Uncertainty(term) if key.name == term.key() => format!(" in {}", term.unit()),
        Kind::Uncertainty(_) => String::new(),
        _ => format!("; {}", key.expected()),
    };
    let mut letters = key.meaning.chars();
    let first = letters.next().map(|c| c.to_uppercase().to_string()).unwrap_or_default();
    let meaning = first + letters.as_str();
    format!("{meaning}{expected}. Without it: {}. Example: {}", key.otherwise, key.example)
}

struct Sheet(String);

impl Sheet {
    fn line(&mut self, line: &str) {
        self.0.push_str(line);
        self.0.push('\n');
    }

    fn blank(&mut self) {
        self.line("");
    }

    /// A key with its value, or silent and without one: a made-up value might be taken for a known one.
    fn key(&mut self, name: &str, value: Option<&str>) {
        match value {
            Some(value) => self.line(&format!("{name} = {value}")),
            None => self.line(&format!("#{name} =")),
        }
    }

    /// Text as lines of comment.
    fn comment(&mut self, text: &str) {
        for paragraph in text.lines() {
            let mut line = String::from("#");
            for word in paragraph.split_whitespace() {
                if line.len() > 1 && line.chars().count() + 1 + word.chars().count() > WIDTH {
                    self.line(&line);
                    line = String::from("#");
                }
                let _ = write!(line, " {word}");
            }
            self.line(&line);
        }
    }

    fn cast(&mut self, cast: &CastFacts) {
        self.blank();
        self.line("[[cast]]");
        self.key(keys::CAST_LOG, Some(&quoted(&cast.source)));
        if let Some(failure) = &cast.failure {
            self.comment(&format!("It could not be read yet: {}", clean(failure)));
        }
        if cast.casts > 1 {
            self.comment(&format!(
                "It holds {} casts; what is said here holds for all of them, what is not is left to the log.",
                cast.casts
            ));
        }
        if let Some(deck) = cast.deck {
            self.comment(&deck_words(deck, cast.pressure_kind));
        }
        let number = |value: Option<f64>| value.map(float);
        let kind = cast.pressure_kind.map(|kind| match kind {
            PressureKind::Absolute => "\"absolute\"",
            PressureKind::Sea => "\"sea\"",
            PressureKind::Gauge => "\"gauge\"",
        });
        self.key("name", cast.station.as_deref().map(quoted).as_deref());
        self.key("latitude", number(cast.latitude_deg).as_deref());
        self.key("longitude", number(cast.longitude_deg).as_deref());
        self.key("pressure", kind);
        self.key("start_time", cast.start.map(|start| start.to_string()).as_deref());
    }
}

fn deck_words(deck: DeckReading, kind: Option<PressureKind>) -> String {
    let told = |value: Option<f64>, when: &str| value.map(|v| format!("{v:.3} dbar {when}"));
    let parts: Vec<String> =
        [told(deck.before_dbar, "before"), told(deck.after_dbar, "after")].into_iter().flatten().collect();
    let mut text = format!("On deck the pressure reads {} the cast", parts.join(" and "));
    let reading = deck.before_dbar.or(deck.after_dbar).unwrap_or(0.0);
    if kind.is_none() && AIR_DBAR.contains(&reading) {
        text.push_str(": that is the air, so it seems to count from vacuum (\"absolute\")");
    }
    text + "."
}

fn columns(reading: &ReadOptions) -> Option<String> {
    let choices: Vec<String> = reading
        .columns
        .iter()
        .map(|choice| {
            let unit = choice.unit.as_ref().map_or(String::new(), |unit| format!(":{unit}"));
            format!("{} = {}", choice.role.name(), quoted(&format!("{}{unit}", choice.name)))
        })
        .collect();
    (!choices.is_empty()).then(|| format!("{{ {} }}", choices.join(", ")))
}

fn missing(reading: &ReadOptions) -> Option<String> {
    let marks: Vec<String> = reading.missing.iter().map(|mark| quoted(mark)).collect();
    (!marks.is_empty()).then(|| format!("[{}]", marks.join(", ")))
}

/// A number as TOML writes it: shortest form that reads back the same, with a decimal point.
fn float(value: f64) -> String {
    format!("{value:?}")
}

/// A text as TOML quotes it.
fn quoted(text: &str) -> String {
    let mut quoted = String::from("\"");
    for c in text.chars() {
        match c {
            '"' | '\\' => quoted.extend(['\\', c]),
            c if c.is_control() => {
                let _ = write!(quoted, "\\u{:04X}", u32::from(c));
            }
            c => quoted.push(c),
        }
    }
    quoted.push('"');
    quoted
}

/// Without control characters, which a comment must not hold.
fn clean(text: &str) -> String {
    text.chars().map(|c| if c.is_control() { ' ' } else { c }).collect()
}
