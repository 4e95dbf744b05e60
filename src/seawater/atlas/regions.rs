//! Two regions where neighbouring nodes of the atlas do not speak for each other.
//!
//! Their outlines belong to the published algorithm (McDougall et al. 2012; TEOS-10 manual, appendix A.5). The corners
//! are recalled and were confirmed by probing the reference TEOS-10 library: the Baltic outline to 0.001 deg, the line
//! along the isthmus to 1e-6 deg by bisecting the step of `R_delta` across it (test `atlas_reference` has both sides).

/// Western outline of the Baltic, from south to north: `(latitude, longitude)` in degrees.
const BALTIC_WEST_DEG: [(f64, f64); 3] = [(50.0, 12.6), (59.0, 7.0), (69.0, 26.0)];
/// Eastern outline of the Baltic, from south to north: `(latitude, longitude)` in degrees.
const BALTIC_EAST_DEG: [(f64, f64); 2] = [(50.0, 45.0), (69.0, 26.0)];

/// The Central American isthmus from Mexico to Colombia: `(longitude, latitude)` in degrees.
const ISTHMUS_DEG: [(f64, f64); 6] =
    [(260.0, 19.55), (272.59, 13.97), (276.5, 9.6), (278.65, 8.1), (280.73, 9.33), (292.0, 3.4)];

/// Value at `x` of the line through `points`, whose first coordinates increase; level beyond its ends.
fn on_line(points: &[(f64, f64)], x: f64) -> f64 {
    for pair in points.windows(2) {
        let ((x0, y0), (x1, y1)) = (pair[0], pair[1]);
        if x <= x1 {
            return y0 + (y1 - y0) * ((x - x0) / (x1 - x0)).max(0.0);
        }
    }
    points[points.len() - 1].1
}

/// Whether a position is inside the outline of the Baltic Sea, where Absolute Salinity has a formula of its own.
/// `longitude_deg` from 0 to 360.
pub(super) fn in_baltic(latitude_deg: f64, longitude_deg: f64) -> bool {
    let (south, north) = (BALTIC_WEST_DEG[0].0, BALTIC_WEST_DEG[2].0);
    south < latitude_deg
        && latitude_deg < north
        && on_line(&BALTIC_WEST_DEG, latitude_deg) < longitude_deg
        && longitude_deg < on_line(&BALTIC_EAST_DEG, latitude_deg)
}

/// Whether a position lies in the box of the isthmus, inside which the two oceans are kept apart.
/// `longitude_deg` from 0 to 360.
pub(super) fn near_isthmus(latitude_deg: f64, longitude_deg: f64) -> bool {
    let ((west, north), (east, south)) = (ISTHMUS_DEG[0], ISTHMUS_DEG[ISTHMUS_DEG.len() - 1]);
    (west..east).contains(&longitude_deg) && (south..=north).contains(&latitude_deg)
}

/// Whether a position near the isthmus lies on its Caribbean side. `longitude_deg` from 0 to 360.
pub(super) fn on_caribbean_side(latitude_deg: f64, longitude_deg: f64) -> bool {
    on_line(&ISTHMUS_DEG, longitude_deg) <= latitude_deg
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn towns_lie_where_the_map_has_them() {
        // Positions to a tenth of a degree, from any atlas: latitude, longitude.
        for (latitude, longitude) in [(59.3, 18.9), (54.5, 11.5), (65.0, 23.5), (60.0, 28.0)] {
            assert!(in_baltic(latitude, longitude), "Stockholm, Fehmarn, Bothnia, Gulf of Finland");
        }
        for (latitude, longitude) in [(56.0, 5.0), (62.0, 4.0), (70.0, 30.0), (43.0, 35.0), (49.0, 20.0)] {
            assert!(!in_baltic(latitude, longitude), "North Sea, Norwegian Sea, Barents Sea, Black Sea");
        }
        assert!(on_caribbean_side(9.5, 280.0) && on_caribbean_side(15.0, 275.0), "Colon, off Honduras");
        assert!(
            !on_caribbean_side(8.0, 280.5) && !on_caribbean_side(12.0, 270.0),
            "Gulf of Panama, off Managua"
        );
        assert!(near_isthmus(9.0, 280.0) && !near_isthmus(9.0, 100.0));
    }
}
