//! One position of a whole cast, from the positions that its log holds.

use super::Position;
use crate::warning::Warning;

/// A position from single values; out of range it is left aside with a warning.
pub(super) fn of_point(
    latitude: f64,
    longitude: Option<f64>,
    warnings: &mut Vec<Warning>,
) -> Option<Position> {
    let longitude = longitude.filter(|value| value.is_finite());
    if !latitude.is_finite() {
        return None;
    }
    if latitude.abs() > 90.0 || longitude.is_some_and(|value| !(-360.0..=360.0).contains(&value)) {
        warnings.push(Warning::new(
            "position_out_of_range",
            format!(
                "the log gives the position {latitude}, {}, which is nowhere on Earth",
                longitude.unwrap_or(f64::NAN)
            ),
            "give it with --lat and --lon",
        ));
        return None;
    }
    Some(Position { latitude_deg: latitude, longitude_deg: longitude })
}

/// The median of a track. A median is one of the values, so it holds across the date line too.
pub(super) fn of_track(
    latitude: &[f64],
    longitude: Option<&[f64]>,
    warnings: &mut Vec<Warning>,
) -> Option<Position> {
    of_point(median(latitude)?, longitude.and_then(median), warnings)
}

fn median(values: &[f64]) -> Option<f64> {
    let mut finite: Vec<f64> = values.iter().copied().filter(|value| value.is_finite()).collect();
    if finite.is_empty() {
        return None;
    }
    let middle = (finite.len() - 1) / 2;
    Some(*finite.select_nth_unstable_by(middle, f64::total_cmp).1)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_track_becomes_its_median() {
        let mut warnings = Vec::new();
        let track = of_track(&[f64::NAN, -31.0, -31.2, -31.1], Some(&[179.9, -179.9, 179.8]), &mut warnings);
        assert_eq!(track, Some(Position { latitude_deg: -31.1, longitude_deg: Some(179.8) }));
        assert_eq!(of_track(&[f64::NAN], None, &mut warnings), None);
        assert!(warnings.is_empty());
    }

    #[test]
    fn a_position_nowhere_on_earth_is_left_aside_with_a_warning() {
        let mut warnings = Vec::new();
        assert_eq!(of_point(91.0, Some(3.0), &mut warnings), None);
        assert_eq!(of_point(9.0, Some(400.0), &mut warnings), None);
        assert_eq!(warnings.len(), 2);
    }
}
