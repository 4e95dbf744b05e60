//! The whole way of one log: cast, water column, depth, uncertainty.

mod remarks;
mod water;

use crate::cast::{Cast, Leg, Quantity, Reason};
use crate::column::{Column, ProfileError};
use crate::depth::{Deepest, Model, Place, Rung, ladder};
use crate::gravity::SurfaceGravity;
use crate::log::{Flag, Log, LogError, PressureKind};
use crate::seawater::Composition;
use crate::settings::Settings;
use crate::uncertainty::{Budget, DepthUncertainty, Evidence, SurveyOrder, WaterOrigin, survey_orders};
use crate::warning::Warning;

/// A log, reduced to depths.
pub struct Reduction {
    /// The log.
    pub log: Log,
    /// Latitude that was used, in degrees.
    pub latitude_deg: f64,
    /// Longitude, in degrees, when known.
    pub longitude_deg: Option<f64>,
    /// The cast: sea pressure, legs, flags.
    pub cast: Cast,
    /// Water, place and day.
    pub model: Model,
    /// The integrated column.
    pub column: Column,
    /// From where the water comes.
    pub origin: WaterOrigin,
    /// Words for it.
    pub water_words: String,
    /// Uncertainty at every pressure.
    pub uncertainty: DepthUncertainty,
    /// The deepest point.
    pub deepest: Deepest,
    /// Depth of the deepest point in m, below the datum at the reference point.
    pub deepest_m: f64,
    /// Budget of the deepest depth.
    pub budget: Budget,
    /// Steps from the shortcut to the full answer.
    pub ladder: Vec<Rung>,
    /// Survey orders.
    pub survey_orders: Vec<SurveyOrder>,
    /// What depths are counted from.
    pub datum: String,
    /// What was assumed for want of better knowledge, as sentences.
    pub assumptions: Vec<String>,
    /// What was noticed.
    pub warnings: Vec<Warning>,
}

/// One sample of a reduced log. Values that the log cannot tell are NaN.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Sample {
    /// Seconds since the first sample.
    pub time_s: f64,
    /// Sea pressure in dbar.
    pub pressure_dbar: f64,
    /// Depth in m, below the datum at the reference point.
    pub depth_m: f64,
    /// Its standard uncertainty in m.
    pub u_depth_m: f64,
    /// Density in kg/m3 where the water of the sample can be trusted.
    pub density_kg_m3: f64,
    /// Part of the cast.
    pub leg: Leg,
    /// Flag of the sample.
    pub flag: Flag,
}

impl Reduction {
    /// Reduces a log.
    ///
    /// # Errors
    /// [`LogError`] when the latitude is not known, or the log cannot be read as a cast (see [`Cast::new`]), has no sample in
    /// the water, or too little water to make a profile of.
    pub fn new(mut log: Log, settings: &Settings) -> Result<Self, LogError> {
        settings.correct(&mut log);
        let (latitude_deg, longitude_deg) = position(&log, settings)?;
        let composition = composition(settings, latitude_deg, longitude_deg);
        let cast_settings = settings.cast();
        let cast = Cast::new(&log, &cast_settings)?;
        believable(&log, &cast)?;
        let elapsed_s = log.time.as_ref().map(|t| t.elapsed_s.as_slice());
        let deepest = Deepest::find(&cast, elapsed_s).ok_or_else(|| {
            LogError::new(&log.source, "no sample in the water has a pressure that can be used")
        })?;

        let mut warnings = cast.warnings.clone();
        let deepest_dbar = deepest.pressure_dbar.max(deepest.raw_pressure_dbar);
        let span_dbar = span(&cast);
        let not_water = |e: ProfileError| {
            let why = match e {
                ProfileError::TooFew { .. } => {
                    format!(
                        "the samples in the water span {span_dbar:.1} dbar, too little to make a water column of"
                    )
                }
                other => format!("the water column cannot be built: {other}"),
            };
            LogError::new(&log.source, why).remedy("give the water of a nearby cast: --profile FILE")
        };
        let chosen = water::choose_water(&log, &cast, settings, &composition, deepest_dbar, &mut warnings)
            .map_err(not_water)?;

        let place = Place {
            latitude_deg,
            surface_dbar: cast_settings.surface_dbar(),
            surface_gravity: settings.surface_gravity.unwrap_or(SurfaceGravity::Disturbance(0.0)),
            gradient_eotvos: settings.gradient_eotvos.unwrap_or(0.0),
            geoid_height_m: settings.geoid_height_m.unwrap_or(0.0),
            water_level_m: settings.water_level_m.unwrap_or(0.0),
            reference_below_sensor_m: settings.reference_below_sensor_m.unwrap_or(0.0),
        };
        let eos = settings.equation_of_state();
        let same_sensor = chosen.origin == WaterOrigin::Log;
        let model = Model { water: chosen.water.with_equation_of_state(eos), place, same_sensor };
        let other_leg = chosen.other_leg.map(|water| water.with_equation_of_state(eos));
        let column = model.column().map_err(not_water)?;
        let evidence = Evidence {
            tare: &cast.tare,
            noise: &cast.noise,
            origin: chosen.origin,
            other_leg: other_leg.as_ref(),
            pressure_follows_air: cast.tare.follows_air() || cast.pressure_kind == PressureKind::Gauge,
            air_pressure_given: settings.air_pressure_hpa.is_some(),
            composition_known: *model.water.composition() != Composition::Reference,
            supplied: &settings.uncertainties,
        };
        let uncertainty =
            DepthUncertainty::evaluate(&model, &column, deepest_dbar, &evidence).map_err(not_water)?;
        let (_, slope) = column.depth_and_slope(deepest.pressure_dbar);
        let budget = uncertainty.budget(&deepest, slope, settings.coverage_probability());
        let deepest_m = place.below_datum_m(column.depth_m(deepest.pressure_dbar));
        let ladder = ladder(&model, deepest.pressure_dbar).map_err(not_water)?;
        let survey_orders = survey_orders(deepest_m, budget.expanded_for_m(0.95));

        warnings.extend(remarks::noticed(&log, &cast, &model, &deepest, settings));
        let of_water = model.water.composition();
        let known = chosen.origin == WaterOrigin::StandardOcean || *of_water != Composition::Reference;
        if !known && settings.composition.is_none() && longitude_deg.is_some() {
            warnings.push(Warning::new(
                "composition_not_known",
                "the atlas of the composition of the salt does not cover this position (land, or a sea of its own): the reference composition is used, and its term widened",
                "check the position",
            ));
        }
        let mut assumptions = remarks::assumed(&cast, settings);
        if !known {
            let why = if longitude_deg.is_none() { ": --lon DEGREES, for that of the place" } else { "" };
            assumptions.push(format!("salt of the reference composition{why}"));
        }
        Ok(Self {
            latitude_deg,
            longitude_deg,
            model,
            column,
            origin: chosen.origin,
            water_words: chosen.words,
            uncertainty,
            deepest,
            deepest_m,
            budget,
            ladder,
            survey_orders,
            datum: settings.datum(),
            assumptions,
            warnings,
            cast,
            log,
        })
    }

    /// Number of samples.
    pub fn len(&self) -> usize {
        self.cast.len()
    }

    /// Whether the log has no sample.
    pub fn is_empty(&self) -> bool {
        self.cast.is_empty()
    }

    /// Depth in m, below the datum at the reference point, at a sea pressure in dbar.
    pub fn depth_m(&self, pressure_dbar: f64) -> f64 {
        self.model.place.below_datum_m(self.column.depth_m(pressure_dbar))
    }

    /// Sample `i` of the log.
    pub fn sample(&self, i: usize) -> Sample {
        let pressure_dbar = self.cast.pressure_dbar[i];
        let leg = self.cast.legs.of(i);
        let (depth_m, u_depth_m) = if pressure_dbar.is_finite() {
            let (below_surface_m, slope) = self.column.depth_and_slope(pressure_dbar);
            let u_depth_m = self.uncertainty.of_sample_m(pressure_dbar, slope);
            (self.model.place.below_datum_m(below_surface_m), u_depth_m)
        } else {
            (f64::NAN, f64::NAN)
        };
        Sample {
            time_s: self.log.time.as_ref().map_or(f64::NAN, |t| t.elapsed_s[i]),
            pressure_dbar,
            depth_m,
            u_depth_m,
            density_kg_m3: self.density_kg_m3(i),
            leg,
            flag: self.cast.flag(i),
        }
    }

    /// In-situ density in kg/m3 of sample `i`: from its own salinity and temperature where the log has them and they can
    /// be trusted, from the column where the log has none, NaN on deck and where they cannot.
    fn density_kg_m3(&self, i: usize) -> f64 {
        if self.cast.legs.of(i) == Leg::Deck || !self.cast.pressure_dbar[i].is_finite() {
            return f64::NAN;
        }
        let p = self.cast.pressure_dbar[i];
        if self.log.temperature.is_none() || self.cast.practical_salinity.is_empty() {
            return self.column.specific_volume_m3_kg(p).recip();
        }
        self.water_of_sample(i).map_or(f64::NAN, |(_, absolute, temperature)| {
            self.model.water.equation_of_state().density_kg_m3(absolute, temperature, p)
        })
    }

    /// Practical Salinity, Absolute Salinity in g/kg and temperature in degC of sample `i`, where the log has them, the sample is
    /// in the water and they can be trusted.
    pub fn water_of_sample(&self, i: usize) -> Option<(f64, f64, f64)> {
        let temperature = self.log.temperature.as_ref()?.values[i];
        let practical = *self.cast.practical_salinity.get(i)?;
        let p = self.cast.pressure_dbar[i];
        let absolute = self.model.water.composition().absolute_salinity_g_kg(practical, p);
        self.cast.water_usable(i).then_some((practical, absolute, temperature))
    }

    /// Seconds spent within a metre of the deepest depth, when the log tells time.
    pub fn time_within_a_metre_s(&self) -> Option<f64> {
        let elapsed_s = self.log.time.as_ref().map(|t| t.elapsed_s.as_slice());
        self.deepest.time_within_s(&self.cast, elapsed_s, 1.0, |p| self.depth_m(p))
    }
}

/// Latitude and longitude by the user's word, else the log's.
fn position(log: &Log, settings: &Settings) -> Result<(f64, Option<f64>), LogError> {
    let of_log = log.position;
    let latitude = settings.latitude_deg.or(of_log.map(|p| p.latitude_deg)).ok_or_else(|| {
        let nowhere = log.warnings.iter().find(|w| w.key == "position_out_of_range");
        let why = nowhere.map_or(String::new(), |w| format!(": {}", w.cause));
        LogError::new(
            &log.source,
            format!("the latitude is not known, and depth depends on it by up to 0.5 %{why}"),
        )
        .remedy("give it: --lat DEGREES (north positive), and --lon DEGREES")
    })?;
    if !(-90.0..=90.0).contains(&latitude) {
        return Err(LogError::new(&log.source, format!("a latitude of {latitude} degrees is none"))
            .remedy("give one from -90 to 90: --lat DEGREES"));
    }
    // Positions of single precision carry digits that mean nothing: a millionth of a degree is 0.1 m.
    let rounded = |degrees: f64| (degrees * 1e6).round() / 1e6;
    let longitude = settings.longitude_deg.or(of_log.and_then(|p| p.longitude_deg));
    Ok((rounded(latitude), longitude.map(rounded)))
}

/// A log whose pressures mostly lie where no sea is has the wrong sign, unit or kind.
fn believable(log: &Log, cast: &Cast) -> Result<(), LogError> {
    let out = cast
        .suspects
        .iter()
        .filter(|s| (s.quantity, s.reason) == (Quantity::Pressure, Reason::Range))
        .count();
    let present = cast.pressure_dbar.iter().filter(|p| p.is_finite()).count();
    if out * 2 <= present {
        return Ok(());
    }
    let problem = format!(
        "{out} of {present} pressures lie outside -3 to 11 600 dbar (column '{}', read as {})",
        log.pressure.name, log.pressure.unit
    );
    Err(LogError::new(&log.source, problem).remedy(format!(
        "check its sign, its unit (--column pressure={}:UNIT) and its kind (--pressure absolute, sea or gauge)",
        log.pressure.name
    )))
}

/// The salt by the user's word, else by the atlas at the position, else of the reference composition.
fn composition(settings: &Settings, latitude_deg: f64, longitude_deg: Option<f64>) -> Composition {
    settings.composition.clone().unwrap_or_else(|| {
        longitude_deg.map_or(Composition::Reference, |longitude| Composition::at(latitude_deg, longitude))
    })
}

/// From the smallest to the largest pressure in the water, in dbar.
fn span(cast: &Cast) -> f64 {
    let pressures = || cast.legs.water().map(|i| cast.pressure_dbar[i]).filter(|p| p.is_finite());
    pressures().fold(f64::NEG_INFINITY, f64::max) - pressures().fold(f64::INFINITY, f64::min)
}
