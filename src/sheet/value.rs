//! The value of one key: its type, its range, where it goes.

use super::keys::{Key, Kind};
use super::scope::Scope;
use crate::cast::TareChoice;
use crate::log::{ColumnChoice, Role};
use crate::settings::range::{self, Range};
use crate::words::nearest;
use std::path::Path;
use toml::Spanned;
use toml::de::DeValue;

/// A value that a key cannot hold.
pub(super) struct Wrong {
    pub at: std::ops::Range<usize>,
    pub problem: String,
    pub remedy: Option<String>,
}

type Value<'a> = Spanned<DeValue<'a>>;

/// Puts a value where its key belongs.
pub(super) fn put(key: &Key, value: &Value<'_>, folder: &Path, scope: &mut Scope) -> Result<(), Wrong> {
    match key.kind {
        Kind::Number(range, put) => put(scope, number(key, value, range)?),
        Kind::Uncertainty(term) => scope.supply(term, number(key, value, Range::uncertainty(term.unit()))?),
        Kind::Text(put) => put(scope, text(key, value)?.to_string()),
        Kind::Words(words) => {
            let word = text(key, value)?;
            match words.iter().find(|(known, _)| *known == word) {
                Some((_, put)) => put(scope),
                None => {
                    let known: Vec<&str> = words.iter().map(|(known, _)| *known).collect();
                    let remedy = format!("the nearest is \"{}\"", nearest(word, &known));
                    return Err(Wrong { remedy: Some(remedy), ..unexpected(key, value) });
                }
            }
        }
        Kind::Tare => {
            scope.layer.settings.tare = Some(match value.get_ref() {
                DeValue::String(word) if word == "auto" => TareChoice::Auto,
                DeValue::String(word) if word == "none" => TareChoice::None,
                _ => TareChoice::Fixed(number(key, value, range::TARE)?),
            });
        }
        Kind::WaterLevel => {
            scope.layer.settings.water_level_m = Some(match value.get_ref() {
                DeValue::String(word) if word.parse::<f64>().is_err() => {
                    return Err(Wrong {
                        at: value.span(),
                        problem: format!("'{}': series of water level are not read yet", key.name),
                        remedy: Some("give one number in m for the time of the deepest depth".to_string()),
                    });
                }
                _ => number(key, value, range::WATER_LEVEL)?,
            });
        }
        Kind::Profile => {
            let path = folder.join(text(key, value)?);
            if !path.is_file() {
                return Err(Wrong {
                    at: value.span(),
                    problem: format!("'{}': there is no file {}", key.name, path.display()),
                    remedy: Some("the name is counted from the folder of the sheet".to_string()),
                });
            }
            scope.layer.profile = Some(path.display().to_string());
        }
        Kind::Columns => scope.layer.reading.columns = columns(key, value)?,
        Kind::Missing => {
            let DeValue::Array(marks) = value.get_ref() else { return Err(unexpected(key, value)) };
            let marks = marks.iter().map(|mark| text(key, mark).map(str::to_string));
            scope.layer.reading.missing = marks.collect::<Result<_, _>>()?;
        }
        Kind::Start => {
            let stamp = match value.get_ref() {
                DeValue::Datetime(stamp) => stamp.to_string(),
                _ => text(key, value)?.to_string(),
            };
            let start = stamp.parse::<jiff::Timestamp>().map_err(|_| unexpected(key, value))?;
            scope.layer.settings.start = Some(start);
        }
    }
    Ok(())
}

fn number(key: &Key, value: &Value<'_>, range: Range) -> Result<f64, Wrong> {
    let number = match value.get_ref() {
        DeValue::Float(float) => float.as_str().parse::<f64>().ok(),
        DeValue::Integer(integer) => {
            i64::from_str_radix(integer.as_str(), integer.radix()).ok().map(|i| i as f64)
        }
        DeValue::String(text) if text.trim().parse::<f64>().is_ok_and(|v| range.holds(v)) => {
            let remedy = Some("numbers stand without quotes".to_string());
            return Err(Wrong { remedy, ..unexpected(key, value) });
        }
        _ => None,
    };
    number.filter(|&v| range.holds(v)).ok_or_else(|| unexpected(key, value))
}

fn text<'a>(key: &Key, value: &'a Value<'_>) -> Result<&'a str, Wrong> {
    match value.get_ref() {
        DeValue::String(text) if !text.trim().is_empty() => Ok(text),
        _ => Err(unexpected(key, value)),
    }
}

/// `{ pressure = "prs:MPa" }`: what `--column pressure=prs:MPa` says.
fn columns(key: &Key, value: &Value<'_>) -> Result<Vec<ColumnChoice>, Wrong> {
    let DeValue::Table(table) = value.get_ref() else { return Err(unexpected(key, value)) };
    let mut choices = Vec::new();
    for (name, column) in table {
        let word = name.get_ref().as_ref();
        if !Role::ALL.iter().any(|role| role.name() == word) {
            let names = Role::ALL.map(Role::name);
            return Err(Wrong {
                at: name.span(),
                problem: format!("'{}': no role of a column is called '{word}'", key.name),
                remedy: Some(format!(
                    "the nearest is '{}'; known are {}",
                    nearest(word, &names),
                    names.join(", ")
                )),
            });
        }
        let choice = match column.get_ref() {
            DeValue::String(text) => format!("{word}={text}").parse().ok(),
            _ => None,
        };
        choices.push(choice.ok_or_else(|| Wrong {
            at: column.span(),
            problem: format!(
                "'{}': expected the name or number of the column in quotes, with its unit after a colon or without, found {}",
                key.name,
                words(column.get_ref())
            ),
            remedy: None,
        })?);
    }
    Ok(choices)
}

fn unexpected(key: &Key, value: &Value<'_>) -> Wrong {
    Wrong {
        at: value.span(),
        problem: format!("'{}': expected {}, found {}", key.name, key.expected(), words(value.get_ref())),
        remedy: None,
    }
}

/// What stands there, for messages.
pub(super) fn words(value: &DeValue<'_>) -> String {
    match value {
        DeValue::String(text) if text.trim().is_empty() => "an empty text".to_string(),
        DeValue::String(text) => format!("the text \"{}\"", text.escape_debug()),
        DeValue::Integer(integer) => integer.to_string(),
        DeValue::Float(float) => float.to_string(),
        DeValue::Boolean(yes) => yes.to_string(),
        DeValue::Datetime(stamp) => format!("the time {stamp}"),
        DeValue::Array(_) => "a list".to_string(),
        DeValue::Table(_) => "a table".to_string(),
    }
}
