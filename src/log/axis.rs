//! The time axis of a log, from absolute or counted times.

use jiff::Timestamp;

use super::time::{self, DAY_NANOS, Nanos};
use super::unit::Unit;

/// Mark of a missing absolute time.
pub(super) const MISSING: Nanos = i64::MIN;

/// Elapsed seconds since the first time that is there, and that time.
pub(super) type Axis = (Vec<f64>, Option<Timestamp>);

/// From stamps. When only the time of day is known (`dated` is false) there is no start, and a clock
/// that falls back by more than half a day has passed midnight.
pub(super) fn absolute(stamps: &[Nanos], dated: bool) -> Axis {
    let Some(&first) = stamps.iter().find(|&&stamp| stamp != MISSING) else {
        return (vec![f64::NAN; stamps.len()], None);
    };
    let (mut days, mut last) = (0, first);
    let elapsed = stamps
        .iter()
        .map(|&stamp| {
            if stamp == MISSING {
                return f64::NAN;
            }
            if !dated {
                if last - stamp > DAY_NANOS / 2 {
                    days += 1;
                } else if stamp - last > DAY_NANOS / 2 {
                    days -= 1;
                }
                last = stamp;
            }
            time::seconds_between(first, stamp) + f64::from(days) * 86_400.0
        })
        .collect();
    (elapsed, time::timestamp(first).filter(|_| dated))
}

/// From counted times: `since` is the reference of the count; `known` the absolute time of a sample.
pub(super) fn counted(
    mut values: Vec<f64>,
    unit: &Unit,
    since: Option<Nanos>,
    known: Option<(usize, Nanos)>,
) -> Axis {
    let Some(first) = values.iter().copied().find(|value| value.is_finite()) else {
        return (values, None);
    };
    values.iter_mut().for_each(|value| *value = unit.convert(*value - first));
    let start = match (since, known) {
        (Some(reference), _) => time::after(reference, first, unit.convert(1.0)),
        (None, Some((sample, nanos))) => values
            .get(sample)
            .filter(|elapsed| elapsed.is_finite())
            .and_then(|elapsed| time::after(nanos, -elapsed, 1.0)),
        (None, None) => None,
    };
    (values, start.and_then(time::timestamp))
}

#[cfg(test)]
mod tests {
    use super::super::{Role, unit};
    use super::*;

    const SECOND: Nanos = 1_000_000_000;

    #[test]
    fn stamps_count_from_the_first_that_is_there() {
        let (elapsed, start) = absolute(&[MISSING, 10 * SECOND, MISSING, 12 * SECOND + 500_000_000], true);
        assert!(elapsed[0].is_nan() && elapsed[2].is_nan());
        assert_eq!((elapsed[1], elapsed[3]), (0.0, 2.5));
        assert_eq!(start, Timestamp::from_second(10).ok());
    }

    #[test]
    fn a_clock_passes_midnight() {
        let (elapsed, start) = absolute(&[86_399 * SECOND, SECOND, 0, 86_398 * SECOND], false);
        assert_eq!(elapsed, [0.0, 2.0, 1.0, -1.0]);
        assert_eq!(start, None);
    }

    #[test]
    fn counts_start_at_zero() {
        let hours = unit::parse(Role::Time, "h").unwrap();
        let (elapsed, start) = counted(vec![f64::NAN, 2.0, 2.5], &hours, Some(0), None);
        assert_eq!(elapsed[1..], [0.0, 1800.0]);
        assert_eq!(start, Timestamp::from_second(7200).ok());
        let seconds = unit::parse(Role::Time, "s").unwrap();
        let (_, start) = counted(vec![5.0, 7.0], &seconds, None, Some((1, 102 * SECOND)));
        assert_eq!(start, Timestamp::from_second(100).ok());
        assert_eq!(counted(vec![f64::NAN], &seconds, Some(0), None).1, None);
    }
}
