//! Physical constants, each with unit and source. No other file repeats one of these numbers.

/// Standard atmosphere in Pa, the difference between absolute and sea pressure (TEOS-10 manual, section 2.2).
pub const STANDARD_ATMOSPHERE_PA: f64 = 101_325.0;

/// Pascal in a decibar.
pub const PA_PER_DBAR: f64 = 1.0e4;

/// Hectopascal in a decibar.
pub const HPA_PER_DBAR: f64 = 100.0;

/// Standard atmosphere in dbar.
pub const STANDARD_ATMOSPHERE_DBAR: f64 = STANDARD_ATMOSPHERE_PA / PA_PER_DBAR;

/// Absolute Salinity of the standard ocean in g/kg (Millero et al. 2008; TEOS-10 manual, section 2.4).
pub const STANDARD_ABSOLUTE_SALINITY_G_KG: f64 = 35.165_04;

/// Reference Salinity over Practical Salinity in g/kg (Millero et al. 2008, eq. 6.2).
pub const REFERENCE_PER_PRACTICAL_G_KG: f64 = STANDARD_ABSOLUTE_SALINITY_G_KG / 35.0;

/// Absolute Salinity in g/kg of the river water of the Baltic, `S_P = 0` (Feistel et al. 2010, Ocean Science 6, 3-24; TEOS-10
/// manual, appendix A.5).
pub const BALTIC_RIVER_SALT_G_KG: f64 = 0.087;

/// Heat capacity that defines Conservative Temperature, in J/(kg K) (TEOS-10 manual, eq. 3.3.3).
pub const CONSERVATIVE_HEAT_CAPACITY_J_KG_K: f64 = 3_991.867_957_119_63;

/// Temperature of 0 degC in K (ITS-90).
pub const CELSIUS_ZERO_K: f64 = 273.15;

/// IPTS-68 over ITS-90 temperature in degC (Saunders 1990; TEOS-10 manual, appendix A.1).
pub const T68_PER_T90: f64 = 1.000_24;

/// Conductivity of seawater at `S_P = 35`, 15 degC (IPTS-68), zero sea pressure, in mS/cm
/// (Culkin and Smith 1980; TEOS-10 manual, section 2.1).
pub const CONDUCTIVITY_35_15_0_MS_CM: f64 = 42.914_0;

/// Newtonian constant of gravitation in m3 kg-1 s-2 (CODATA 2018; standard uncertainty 0.000 15e-11).
pub const GRAVITATION_M3_KG_S2: f64 = 6.674_30e-11;

/// Standard acceleration of gravity in m/s2 (3rd CGPM, 1901).
pub const STANDARD_GRAVITY_M_S2: f64 = 9.806_65;

/// Density of the uniform water with which the ladder starts, in kg/m3 (common practice, no source).
pub const UNIFORM_WATER_KG_M3: f64 = 1025.0;

/// Density of fresh water in kg/m3, as depths of lakes and gauges are often reckoned (common practice, no source).
pub const FRESH_WATER_KG_M3: f64 = 1000.0;

/// m/s2 in a milligal.
pub const M_S2_PER_MGAL: f64 = 1.0e-5;

/// s-2 in an eotvos.
pub const S2_PER_EOTVOS: f64 = 1.0e-9;

/// WGS 84 (NIMA TR8350.2, third edition, 2000).
pub mod wgs84 {
    /// Semi-major axis in m (table 3.1).
    pub const A_M: f64 = 6_378_137.0;
    /// Flattening (table 3.1: 1/f = 298.257 223 563).
    pub const F: f64 = 1.0 / 298.257_223_563;
    /// First eccentricity squared (table 3.3).
    pub const E2: f64 = 6.694_379_990_14e-3;
    /// Normal gravity at the equator in m/s2 (table 3.4).
    pub const GAMMA_E_M_S2: f64 = 9.780_325_335_9;
    /// Somigliana's constant (table 3.4).
    pub const K: f64 = 0.001_931_852_652_41;
    /// `m = omega^2 a^2 b / GM` (table 3.4).
    pub const M: f64 = 0.003_449_786_506_84;
}
