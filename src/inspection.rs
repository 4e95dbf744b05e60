//! What was understood of a log, before any depth: sampling, gaps, parts, ranges, flags, suspect samples.

use crate::cast::{Cast, Leg, Quantity, Reason, median};
use crate::log::{Channel, Flag, Log, LogError, PressureKind};
use crate::settings::{STANDARD_AIR_HPA, Settings};
use std::ops::Range;

/// An interval longer than this many median intervals is a gap.
pub const GAP_INTERVALS: f64 = 5.0;
/// An interval further than this share of the median from it is irregular.
pub const IRREGULAR_SHARE: f64 = 0.1;

/// Who said something.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Source {
    /// The user, by an option.
    Option,
    /// The log.
    Log,
    /// Nobody: it is assumed.
    Assumed,
}

impl Source {
    /// Its name in results.
    pub fn name(self) -> &'static str {
        match self {
            Source::Option => "option",
            Source::Log => "log",
            Source::Assumed => "assumed",
        }
    }
}

/// Times of the samples.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Sampling {
    /// Median interval in s between neighbouring samples that have a time.
    pub median_interval_s: f64,
    /// Share of the intervals that are irregular (see [`IRREGULAR_SHARE`]).
    pub irregular_share: f64,
    /// Seconds from the first to the last time.
    pub span_s: f64,
    /// Samples without a time.
    pub missing: usize,
}

/// A gap in time.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Gap {
    /// The last sample before it, from 0.
    pub after_sample: usize,
    /// The first sample behind it.
    pub before_sample: usize,
    /// Seconds since the first sample at which it begins.
    pub time_s: f64,
    /// Its length in s.
    pub duration_s: f64,
}

/// A part of the cast.
#[derive(Debug, Clone, PartialEq)]
pub struct Part {
    /// Its name: `deck before`, `down`, `bottom`, `up`, `deck after`.
    pub name: &'static str,
    /// Its samples.
    pub samples: Range<usize>,
    /// Lowest and highest sea pressure in dbar of its samples that are not suspect.
    pub pressure_dbar: Option<(f64, f64)>,
    /// Seconds from its first to its last sample.
    pub duration_s: Option<f64>,
}

/// The values of one quantity, in the unit of the [`Log`].
#[derive(Debug, Clone, PartialEq)]
pub struct Values {
    /// The quantity.
    pub quantity: &'static str,
    /// Its unit.
    pub unit: &'static str,
    /// Samples without a value.
    pub missing: usize,
    /// Lowest and highest value of all samples.
    pub all: Option<(f64, f64)>,
    /// The same of the samples in the water whose flags allow their use.
    pub good: Option<(f64, f64)>,
}

/// How many samples carry which flag of the IOC scheme.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct FlagCounts {
    /// What the flags are about.
    pub about: &'static str,
    /// Each flag that occurs, with its number of samples.
    pub counts: Vec<(Flag, usize)>,
}

/// Suspect samples in a row.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Stretch {
    /// Its first sample, from 0.
    pub first: usize,
    /// Its last sample.
    pub last: usize,
    /// Lowest and highest sea pressure in dbar, where there is one.
    pub pressure_dbar: Option<(f64, f64)>,
}

/// All samples of one quantity that are suspect for one reason.
#[derive(Debug, Clone, PartialEq)]
pub struct Finding {
    /// The quantity.
    pub quantity: &'static str,
    /// The reason.
    pub reason: Reason,
    /// Number of samples.
    pub count: usize,
    /// Where they are.
    pub stretches: Vec<Stretch>,
}

/// What was understood of a log.
#[derive(Debug)]
pub struct Inspection {
    /// The log as it was read.
    pub log: Log,
    /// The cast, or why the log cannot be one.
    pub cast: Result<Cast, LogError>,
    /// From where the pressure counts.
    pub pressure_kind: PressureKind,
    /// Who said so.
    pub pressure_kind_by: Source,
    /// Air pressure in hPa.
    pub air_pressure_hpa: f64,
    /// Who gave it.
    pub air_pressure_by: Source,
    /// Times; none when the log has none, or a single one.
    pub sampling: Option<Sampling>,
    /// Gaps in time.
    pub gaps: Vec<Gap>,
    /// Parts of the cast that have samples; empty without a cast.
    pub parts: Vec<Part>,
    /// Ranges of the quantities.
    pub values: Vec<Values>,
    /// Flags that the log carries.
    pub logged_flags: Vec<FlagCounts>,
    /// Flags of the samples as a whole, as a reduction would give them; without a cast none.
    pub sample_flags: Option<FlagCounts>,
    /// Suspect samples; empty without a cast.
    pub findings: Vec<Finding>,
}

impl Inspection {
    /// Looks at a log as a reduction would, and keeps what can be told of it where that fails.
    pub fn new(log: Log, settings: &Settings) -> Self {
        let cast = Cast::new(&log, &settings.cast());
        let pressure_kind_by = match (settings.pressure_kind, log.pressure_kind) {
            (Some(_), _) => Source::Option,
            (None, Some(_)) => Source::Log,
            (None, None) => Source::Assumed,
        };
        let known = cast.as_ref().ok();
        let elapsed_s = log.time.as_ref().map(|time| time.elapsed_s.as_slice());
        let (sampling, gaps) =
            elapsed_s.and_then(sampling_of).map_or((None, Vec::new()), |(s, g)| (Some(s), g));
        Self {
            pressure_kind: settings.pressure_kind.or(log.pressure_kind).unwrap_or(PressureKind::Sea),
            pressure_kind_by,
            air_pressure_hpa: settings.air_pressure_hpa.unwrap_or(STANDARD_AIR_HPA),
            air_pressure_by: settings.air_pressure_hpa.map_or(Source::Assumed, |_| Source::Option),
            sampling,
            gaps,
            parts: known.map_or_else(Vec::new, |cast| parts_of(cast, elapsed_s)),
            values: values_of(&log, known),
            logged_flags: logged_flags(&log),
            sample_flags: known.map(|cast| counts("samples", (0..cast.len()).map(|i| cast.flag(i)))),
            findings: known.map_or_else(Vec::new, |cast| findings(&log, cast)),
            cast,
            log,
        }
    }

    /// Name of a quantity in this log: salt is conductivity or salinity.
    pub fn name_of(&self, quantity: Quantity) -> &'static str {
        name_of(&self.log, quantity)
    }

    /// The value of a quantity at a sample, in the unit of the [`Log`].
    pub fn value(&self, quantity: Quantity, sample: usize) -> Option<f64> {
        let channel = match quantity {
            Quantity::Pressure => Some(&self.log.pressure),
            Quantity::Temperature => self.log.temperature.as_ref(),
            Quantity::Salt => self.log.conductivity.as_ref().or(self.log.salinity.as_ref()),
        };
        channel?.values.get(sample).copied().filter(|value| value.is_finite())
    }
}

fn name_of(log: &Log, quantity: Quantity) -> &'static str {
    match quantity {
        Quantity::Pressure => "pressure",
        Quantity::Temperature => "temperature",
        Quantity::Salt if log.conductivity.is_some() => "conductivity",
        Quantity::Salt => "salinity",
    }
}

/// Intervals between neighbouring samples that have a time, and those of them that are gaps.
fn sampling_of(elapsed_s: &[f64]) -> Option<(Sampling, Vec<Gap>)> {
    let timed: Vec<usize> = (0..elapsed_s.len()).filter(|&i| elapsed_s[i].is_finite()).collect();
    let (first, last) = (*timed.first()?, *timed.last()?);
    let interval = |pair: &[usize]| elapsed_s[pair[1]] - elapsed_s[pair[0]];
    let mut intervals: Vec<f64> = timed.windows(2).map(interval).collect();
    let count = intervals.len() as f64;
    let median_s = median(&mut intervals)?;
    let odd = intervals.iter().filter(|s| (*s - median_s).abs() > IRREGULAR_SHARE * median_s.abs()).count();
    let sampling = Sampling {
        median_interval_s: median_s,
        irregular_share: odd as f64 / count,
        span_s: elapsed_s[last] - elapsed_s[first],
        missing: elapsed_s.len() - timed.len(),
    };
    let gaps = timed
        .windows(2)
        .filter(|pair| median_s > 0.0 && interval(pair) > GAP_INTERVALS * median_s)
        .map(|pair| Gap {
            after_sample: pair[0],
            before_sample: pair[1],
            time_s: elapsed_s[pair[0]],
            duration_s: interval(pair),
        })
        .collect();
    Some((sampling, gaps))
}

/// Lowest and highest of the finite values.
fn range(values: impl Iterator<Item = f64>) -> Option<(f64, f64)> {
    values.filter(|v| v.is_finite()).fold(None, |range, v| {
        let (low, high) = range.unwrap_or((v, v));
        Some((v.min(low), v.max(high)))
    })
}

fn parts_of(cast: &Cast, elapsed_s: Option<&[f64]>) -> Vec<Part> {
    let legs = &cast.legs;
    [
        ("deck before", legs.range(Leg::Deck)),
        ("down", legs.range(Leg::Down)),
        ("bottom", legs.range(Leg::Bottom)),
        ("up", legs.range(Leg::Up)),
        ("deck after", legs.water().end..cast.len()),
    ]
    .into_iter()
    .filter(|(_, samples)| !samples.is_empty())
    .map(|(name, samples)| {
        let good = samples.clone().filter(|&i| cast.pressure_flag[i].usable());
        let duration_s = elapsed_s.map(|t| t[samples.end - 1] - t[samples.start]).filter(|s| s.is_finite());
        Part { name, pressure_dbar: range(good.map(|i| cast.pressure_dbar[i])), duration_s, samples }
    })
    .collect()
}

fn values_of(log: &Log, cast: Option<&Cast>) -> Vec<Values> {
    let of = |quantity, unit, values: &[f64], usable: &dyn Fn(&Cast, usize) -> bool| Values {
        quantity,
        unit,
        missing: values.iter().filter(|v| !v.is_finite()).count(),
        all: range(values.iter().copied()),
        good: cast.and_then(|cast| {
            range(
                cast.legs
                    .water()
                    .filter(|&i| usable(cast, i))
                    .map(|i| values.get(i).copied().unwrap_or(f64::NAN)),
            )
        }),
    };
    let water: &dyn Fn(&Cast, usize) -> bool = &|cast, i| cast.water_usable(i);
    let pressure: &dyn Fn(&Cast, usize) -> bool = &|cast, i| cast.pressure_flag[i].usable();
    let mut all = vec![of("pressure", "dbar", &log.pressure.values, pressure)];
    let channels: [(&'static str, &'static str, &Option<Channel>, _); 6] = [
        ("temperature", "degC", &log.temperature, water),
        ("conductivity", "mS/cm", &log.conductivity, water),
        ("salinity", "", &log.salinity, water),
        ("altitude", "m", &log.altitude, pressure),
        ("pitch", "degree", &log.pitch, pressure),
        ("roll", "degree", &log.roll, pressure),
    ];
    for (quantity, unit, channel, usable) in channels {
        all.extend(channel.as_ref().map(|channel| of(quantity, unit, &channel.values, usable)));
    }
    if let Some(cast) = cast.filter(|cast| log.conductivity.is_some() && !cast.practical_salinity.is_empty())
    {
        all.push(of("salinity from conductivity", "", &cast.practical_salinity, water));
    }
    all
}

fn counts(about: &'static str, flags: impl Iterator<Item = Flag>) -> FlagCounts {
    let mut counts =
        [Flag::Good, Flag::NotEvaluated, Flag::Questionable, Flag::Bad, Flag::Missing].map(|f| (f, 0));
    for flag in flags {
        counts.iter_mut().filter(|(f, _)| *f == flag).for_each(|(_, count)| *count += 1);
    }
    FlagCounts { about, counts: counts.into_iter().filter(|(_, count)| *count > 0).collect() }
}

fn logged_flags(log: &Log) -> Vec<FlagCounts> {
    let of = |channel: &Option<Channel>| channel.as_ref().and_then(|c| c.flags.clone());
    [
        ("samples", log.flags.clone()),
        ("pressure", log.pressure.flags.clone()),
        ("temperature", of(&log.temperature)),
        ("conductivity", of(&log.conductivity)),
        ("salinity", of(&log.salinity)),
    ]
    .into_iter()
    .filter_map(|(about, flags)| Some(counts(about, flags?.into_iter())))
    .collect()
}

/// Suspects by quantity and reason, those in a row taken together.
fn findings(log: &Log, cast: &Cast) -> Vec<Finding> {
    let mut found: Vec<(Quantity, Finding)> = Vec::new();
    for suspect in &cast.suspects {
        let at = found.iter().position(|(q, f)| *q == suspect.quantity && f.reason == suspect.reason);
        let at = at.unwrap_or_else(|| {
            let quantity = name_of(log, suspect.quantity);
            let finding = Finding { quantity, reason: suspect.reason, count: 0, stretches: Vec::new() };
            found.push((suspect.quantity, finding));
            found.len() - 1
        });
        let finding = &mut found[at].1;
        finding.count += 1;
        match finding.stretches.last_mut() {
            Some(stretch) if stretch.last + 1 == suspect.sample => stretch.last = suspect.sample,
            _ => finding.stretches.push(Stretch {
                first: suspect.sample,
                last: suspect.sample,
                pressure_dbar: None,
            }),
        }
    }
    for (_, finding) in &mut found {
        for stretch in &mut finding.stretches {
            stretch.pressure_dbar = range(cast.pressure_dbar[stretch.first..=stretch.last].iter().copied());
        }
    }
    found.into_iter().map(|(_, finding)| finding).collect()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn intervals_and_gaps() {
        let times: Vec<f64> =
            (0..10).map(f64::from).chain([f64::NAN]).chain((16..20).map(f64::from)).collect();
        let (sampling, gaps) = sampling_of(&times).unwrap();
        assert_eq!((sampling.median_interval_s, sampling.span_s, sampling.missing), (1.0, 19.0, 1));
        assert_eq!(sampling.irregular_share, 1.0 / 13.0);
        assert_eq!(gaps, [Gap { after_sample: 9, before_sample: 11, time_s: 9.0, duration_s: 7.0 }]);
    }

    #[test]
    fn a_clock_that_stands_has_no_gaps() {
        let (sampling, gaps) = sampling_of(&[0.0, 0.0, 0.0, 0.0, 60.0]).unwrap();
        assert_eq!((sampling.median_interval_s, sampling.irregular_share), (0.0, 0.25));
        assert!(gaps.is_empty());
        assert_eq!(sampling_of(&[5.0]), None);
        assert_eq!(sampling_of(&[f64::NAN, f64::NAN]), None);
    }

    #[test]
    fn ranges_pass_over_what_is_missing() {
        assert_eq!(range([f64::NAN, 2.0, -1.0, f64::NAN].into_iter()), Some((-1.0, 2.0)));
        assert_eq!(range([f64::NAN].into_iter()), None);
    }

    #[test]
    fn flags_are_counted_one_by_one() {
        let flags = counts("samples", [Flag::Bad, Flag::Good, Flag::Bad].into_iter());
        assert_eq!(flags.counts, [(Flag::Good, 1), (Flag::Bad, 2)]);
    }
}
