//! Sound speed along a column, as an echo sounder needs it.

use super::hydrostatic::Column;
use super::water::{Water, WaterLevel, WaterShift};
use crate::seawater::sound_speed_m_s;

/// Depth, slowness and travel time of sound from the sea surface down.
///
/// An echo from depth `z` takes `integral of dz / c` on its way down; the sound speed that turns this time back
/// into the depth is the harmonic mean `z / integral of dz / c`. Between levels salinity and temperature are linear in pressure and
/// slowness `1 / c` is the parabola through both ends and the middle, which is integrated exactly.
#[derive(Debug, Clone, PartialEq)]
pub struct SoundColumn {
    depth_m: Vec<f64>,
    time_s: Vec<f64>,
    slowness_s_m: Vec<f64>,
    /// Of the middle of each interval.
    middle_s_m: Vec<f64>,
}

impl SoundColumn {
    /// Sound in `water`, whose surface is at the sea pressure `surface_dbar`, with the depths of `column`, the same water integrated.
    pub fn new(water: &Water, surface_dbar: f64, column: &Column) -> Self {
        let levels = water.levels(surface_dbar, &WaterShift::default());
        // Levels above the surface are air; the first one kept is where the surface is.
        let first = levels.partition_point(|l| l.pressure_dbar <= surface_dbar).clamp(1, levels.len() - 1);
        let (above, below) = (&levels[first - 1], &levels[first]);
        let share = (surface_dbar - above.pressure_dbar) / (below.pressure_dbar - above.pressure_dbar);
        let surface = above.towards(below, share);
        let levels: Vec<WaterLevel> = [surface].into_iter().chain(levels[first..].iter().copied()).collect();

        let slowness_s_m: Vec<f64> = levels.iter().map(slowness).collect();
        let middle_s_m: Vec<f64> = levels.windows(2).map(|w| slowness(&w[0].towards(&w[1], 0.5))).collect();
        let depth_m: Vec<f64> = levels.iter().map(|l| column.depth_m(l.pressure_dbar)).collect();
        let mut time_s = vec![0.0; levels.len()];
        for i in 1..levels.len() {
            let mean = (slowness_s_m[i - 1] + 4.0 * middle_s_m[i - 1] + slowness_s_m[i]) / 6.0;
            time_s[i] = time_s[i - 1] + mean * (depth_m[i] - depth_m[i - 1]);
        }
        Self { depth_m, time_s, slowness_s_m, middle_s_m }
    }

    /// Sound speed in m/s at `depth_m` below the sea surface; above the surface that of the surface, below the
    /// last level that of the last level.
    pub fn sound_speed_m_s(&self, depth_m: f64) -> f64 {
        let (i, _, u) = self.place(depth_m);
        let [a, b, c] = self.parabola(i);
        (a + u * (b + u * c)).recip()
    }

    /// Time in s that sound takes from the sea surface straight down to `depth_m`, one way; zero above the surface.
    pub fn travel_time_s(&self, depth_m: f64) -> f64 {
        let (i, height_m, u) = self.place(depth_m);
        let [a, b, c] = self.parabola(i);
        let last = self.depth_m[self.depth_m.len() - 1];
        let beyond = (depth_m - last).max(0.0) / self.sound_speed_m_s(last);
        self.time_s[i] + height_m * u * (a + u * (b / 2.0 + u * c / 3.0)) + beyond
    }

    /// Mean sound speed in m/s between the sea surface and `depth_m` for which depth is speed times travel time: the
    /// harmonic mean.
    pub fn mean_sound_speed_m_s(&self, depth_m: f64) -> f64 {
        // Closer to the surface than this the quotient loses digits and the mean is the value there.
        if depth_m < 1e-6 { self.sound_speed_m_s(0.0) } else { depth_m / self.travel_time_s(depth_m) }
    }

    /// The interval that holds a depth, its height in m and the place in it from 0 to 1.
    fn place(&self, depth_m: f64) -> (usize, f64, f64) {
        let i = super::profile::interval(&self.depth_m, depth_m);
        let height = self.depth_m[i + 1] - self.depth_m[i];
        (i, height, ((depth_m - self.depth_m[i]) / height).clamp(0.0, 1.0))
    }

    /// Slowness in an interval as `a + b u + c u^2`.
    fn parabola(&self, i: usize) -> [f64; 3] {
        let (top, middle, bottom) = (self.slowness_s_m[i], self.middle_s_m[i], self.slowness_s_m[i + 1]);
        [top, -3.0 * top + 4.0 * middle - bottom, 2.0 * (top - 2.0 * middle + bottom)]
    }
}

fn slowness(level: &WaterLevel) -> f64 {
    sound_speed_m_s(level.absolute_salinity_g_kg, level.temperature_degc, level.pressure_dbar).recip()
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::gravity::LocalGravity;

    fn standard() -> SoundColumn {
        let water = Water::standard_ocean(6_000.0);
        let profile = water.profile(0.0, &WaterShift::default()).unwrap();
        SoundColumn::new(&water, 0.0, &Column::integrate(&profile, 0.0, &LocalGravity::normal(45.0)))
    }

    #[test]
    fn the_mean_starts_at_the_surface_and_lags_behind() {
        let sound = standard();
        assert_eq!(sound.mean_sound_speed_m_s(0.0), sound.sound_speed_m_s(0.0));
        assert!((sound.mean_sound_speed_m_s(0.01) - sound.sound_speed_m_s(0.0)).abs() < 1e-3);
        // Sound speed rises all the way down in water of one temperature, so that the mean stays below it.
        for z in [10.0, 500.0, 5_000.0] {
            assert!(sound.mean_sound_speed_m_s(z) < sound.sound_speed_m_s(z));
            assert!(sound.mean_sound_speed_m_s(z) > sound.sound_speed_m_s(0.0));
        }
    }

    #[test]
    fn travel_time_is_the_integral_of_slowness() {
        let sound = standard();
        let h = 0.5;
        for z in [3.0, 777.7, 4_321.0, 7_000.0] {
            let slope = (sound.travel_time_s(z + h) - sound.travel_time_s(z - h)) / (2.0 * h);
            assert!((slope * sound.sound_speed_m_s(z) - 1.0).abs() < 1e-8, "{z}");
        }
    }
}
