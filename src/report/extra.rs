//! Further columns of a depth series, on request.

use crate::column::SoundColumn;
use crate::reduction::Reduction;
use crate::seawater::{conservative_temperature_degc, sound_speed_m_s};

/// A further column.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Extra {
    /// Practical Salinity of the sample.
    PracticalSalinity,
    /// Absolute Salinity of the sample in g/kg.
    AbsoluteSalinity,
    /// Conservative Temperature of the sample in degC.
    ConservativeTemperature,
    /// Sound speed in the water of the sample in m/s.
    SoundSpeed,
    /// Travel-time mean of sound speed from the sea surface to the sample in m/s.
    MeanSoundSpeed,
    /// Gravity at the sample in m/s2.
    Gravity,
    /// Depth of the seafloor in m: that of the sample and the altitude that the log tells, as logged.
    SeafloorDepth,
}

impl Extra {
    /// All of them.
    pub const ALL: [Extra; 7] = [
        Extra::PracticalSalinity,
        Extra::AbsoluteSalinity,
        Extra::ConservativeTemperature,
        Extra::SoundSpeed,
        Extra::MeanSoundSpeed,
        Extra::Gravity,
        Extra::SeafloorDepth,
    ];

    /// Name of the column.
    pub fn name(self) -> &'static str {
        match self {
            Extra::PracticalSalinity => "practical_salinity",
            Extra::AbsoluteSalinity => "absolute_salinity_g_kg",
            Extra::ConservativeTemperature => "conservative_temperature_degC",
            Extra::SoundSpeed => "sound_speed_m_s",
            Extra::MeanSoundSpeed => "mean_sound_speed_m_s",
            Extra::Gravity => "gravity_m_s2",
            Extra::SeafloorDepth => "seafloor_depth_m",
        }
    }

    /// Decimals that are worth printing.
    pub(super) fn decimals(self) -> u32 {
        match self {
            Extra::PracticalSalinity | Extra::AbsoluteSalinity | Extra::ConservativeTemperature => 4,
            Extra::SoundSpeed | Extra::MeanSoundSpeed => 2,
            Extra::Gravity => 6,
            Extra::SeafloorDepth => 3,
        }
    }
}

/// The further columns of one cast.
pub(super) struct Extras<'a> {
    columns: &'a [Extra],
    reduction: &'a Reduction,
    sound: Option<SoundColumn>,
}

impl<'a> Extras<'a> {
    pub fn new(columns: &'a [Extra], reduction: &'a Reduction) -> Self {
        let sound = columns.contains(&Extra::MeanSoundSpeed).then(|| {
            let surface_dbar = reduction.model.place.surface_dbar;
            SoundColumn::new(&reduction.model.water, surface_dbar, &reduction.column)
        });
        Self { columns, reduction, sound }
    }

    /// The value of a column for sample `i`; NaN where the sample cannot tell it.
    pub fn value(&self, column: Extra, i: usize) -> f64 {
        let r = self.reduction;
        let p = r.cast.pressure_dbar[i];
        if let Extra::Gravity = column {
            return r.column.gravity_m_s2(p);
        }
        if let Extra::SeafloorDepth = column {
            return r.log.altitude.as_ref().map_or(f64::NAN, |a| r.depth_m(p) + a.values[i]);
        }
        if let Extra::MeanSoundSpeed = column {
            return self.sound.as_ref().map_or(f64::NAN, |s| s.mean_sound_speed_m_s(r.column.depth_m(p)));
        }
        let Some((practical, absolute, temperature)) = r.water_of_sample(i) else { return f64::NAN };
        match column {
            Extra::PracticalSalinity => practical,
            Extra::AbsoluteSalinity => absolute,
            Extra::ConservativeTemperature => conservative_temperature_degc(absolute, temperature, p),
            _ => sound_speed_m_s(absolute, temperature, p),
        }
    }

    /// The columns in their order.
    pub fn columns(&self) -> impl Iterator<Item = Extra> {
        self.columns.iter().copied()
    }
}
