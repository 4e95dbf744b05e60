//! Depth at every sample, as NetCDF by the CF conventions 1.11.

use super::extra::{Extra, Extras};
use super::netcdf_attributes::{
    leg_number, of_density, of_depth, of_extra, of_flag, of_leg, of_pressure, of_time, of_u_depth, source,
};
use super::netcdf_classic::{Attributes, Data, Dimension, Encoding, FILL_DOUBLE, Variable};
use super::provenance::Provenance;
use super::{CAUTION, Report};
use crate::reduction::Reduction;
use std::io::{self, Write};

/// One file per cast: the variables `time`, `pressure`, `depth`, `u_depth`, `density`, `leg` and `flag` along the dimension
/// `obs`, one value per sample of the log in its order and unrounded; position, station and start as single values; the
/// deepest depth, its uncertainty, the water, what was assumed and noticed as global attributes.
///
/// The file is a CF `profile` where position and start are known, as that feature demands; else it carries no feature type.
#[derive(Debug, Default)]
pub struct SeriesNetcdf {
    provenance: Provenance,
    with: Vec<Extra>,
}

const REFERENCES: &str = "\
IOC, SCOR and IAPSO (2010), The international thermodynamic equation of seawater - 2010, IOC Manuals and Guides 56; \
JCGM 100:2008, Guide to the expression of uncertainty in measurement; \
IOC (2013), Quality flag standard, IOC Manuals and Guides 54, volume 3";

impl SeriesNetcdf {
    /// With the call that makes the files, and further variables.
    pub fn new(provenance: Provenance, with: Vec<Extra>) -> Self {
        Self { provenance, with }
    }

    fn global(&self, r: &Reduction, is_profile: bool) -> Attributes {
        let name = r.log.source.rsplit(['/', '\\']).next().unwrap_or_default();
        let warnings: Vec<String> = r.warnings.iter().map(ToString::to_string).collect();
        Attributes::default()
            .with("Conventions", "CF-1.11")
            .with("featureType", if is_profile { "profile" } else { "" })
            .with("title", format!("Depth at each sample of {}, with its standard uncertainty", name))
            .with("source", source(&r.log))
            .with("history", self.provenance.history())
            .with("references", REFERENCES)
            .with("comment", CAUTION)
            .with("log", r.log.source.as_str())
            .with("datum", r.datum.as_str())
            .with("water", r.water_words.as_str())
            .with("deepest_depth_m", r.deepest_m)
            .with("deepest_depth_expanded_uncertainty_m", r.budget.expanded_uncertainty_m())
            .with("coverage_probability", r.budget.coverage_probability)
            .with("coverage_factor", r.budget.coverage_factor)
            .with("assumptions", r.assumptions.join("\n"))
            .with("warnings", warnings.join("\n"))
    }
}

impl Report for SeriesNetcdf {
    fn extension(&self) -> &'static str {
        "nc"
    }

    fn begin(&mut self, _out: &mut dyn Write) -> io::Result<()> {
        Ok(())
    }

    fn cast(&mut self, out: &mut dyn Write, r: &Reduction) -> io::Result<()> {
        // A time column without a single time tells nothing.
        let times = r.log.time.as_ref().filter(|t| t.elapsed_s.iter().any(|s| s.is_finite()));
        let start = times.map_or(r.log.start, |t| t.start.or(r.log.start));
        let station = r.log.station.as_deref().filter(|s| !s.is_empty());
        let is_profile = r.longitude_deg.is_some() && start.is_some();
        let known = [
            ("time", times.is_some()),
            ("start_time", start.is_some()),
            ("depth", true),
            ("latitude", true),
            ("longitude", r.longitude_deg.is_some()),
            ("station", station.is_some()),
        ];
        let coordinates: Vec<&str> =
            known.iter().filter(|(_, is_known)| *is_known).map(|(name, _)| *name).collect();
        let coordinates = coordinates.join(" ");
        // A sample is costly and gives three variables, which the format wants one after the other.
        let [mut depth, mut u_depth, mut density] = [(); 3].map(|()| Vec::with_capacity(r.len()));
        for sample in (0..r.len()).map(|i| r.sample(i)) {
            depth.push(sample.depth_m);
            u_depth.push(sample.u_depth_m);
            density.push(sample.density_kg_m3);
        }

        let mut file = Encoding::new(self.global(r, is_profile));
        let obs = Some(file.dimension("obs", r.len()));
        if let Some(times) = times {
            let long_name = match times.start {
                Some(_) => "time of the sample",
                None => "time since the first sample",
            };
            let attributes = of_time(times.start).with("long_name", long_name);
            file.variable(doubles("time", obs, attributes, times.elapsed_s.iter().copied()));
        }
        if start.is_some() {
            let attributes = of_time(start).with("long_name", "start of the cast").with("axis", "T");
            file.variable(doubles("start_time", None, attributes, std::iter::once(0.0)));
        }
        file.variable(doubles("depth", obs, of_depth(r), depth));
        position(&mut file, r);
        if let Some(station) = station {
            let letters = file.dimension("station_letters", station.len());
            let role = if is_profile { "profile_id" } else { "" };
            let attributes = Attributes::default()
                .with("long_name", "station")
                .with("cf_role", role)
                .with("_Encoding", "utf-8");
            let data = Data::Text(station.to_string());
            file.variable(Variable { name: "station", dimension: Some(letters), attributes, data });
        }
        let of = |attributes: Attributes| attributes.with("coordinates", coordinates.as_str());
        file.variable(doubles("pressure", obs, of(of_pressure()), r.cast.pressure_dbar.iter().copied()));
        file.variable(doubles("u_depth", obs, of(of_u_depth()), u_depth));
        file.variable(doubles("density", obs, of(of_density()), density));
        file.variable(bytes("leg", obs, of(of_leg()), (0..r.len()).map(|i| leg_number(r.cast.legs.of(i)))));
        file.variable(bytes("flag", obs, of(of_flag()), (0..r.len()).map(|i| r.cast.flag(i).code() as i8)));
        let extras = Extras::new(&self.with, r);
        for extra in extras.columns() {
            let values: Vec<f64> = (0..r.len()).map(|i| extras.value(extra, i)).collect();
            file.variable(doubles(extra.name(), obs, of(of_extra(extra)), values));
        }
        file.write(out)
    }

    fn end(&mut self, _out: &mut dyn Write) -> io::Result<()> {
        Ok(())
    }

    fn holds_many(&self) -> bool {
        false
    }
}

fn doubles<'a>(
    name: &'static str,
    dimension: Option<Dimension>,
    attributes: Attributes,
    values: impl IntoIterator<Item = f64, IntoIter: 'a>,
) -> Variable<'a> {
    // A single value is there or its variable is not.
    let attributes =
        if dimension.is_some() { attributes.with("_FillValue", FILL_DOUBLE) } else { attributes };
    Variable { name, dimension, attributes, data: Data::Doubles(Box::new(values.into_iter())) }
}

fn bytes<'a>(
    name: &'static str,
    dimension: Option<Dimension>,
    attributes: Attributes,
    values: impl Iterator<Item = i8> + 'a,
) -> Variable<'a> {
    Variable { name, dimension, attributes, data: Data::Bytes(Box::new(values)) }
}

fn position(file: &mut Encoding, r: &Reduction) {
    let latitude = Attributes::default()
        .with("standard_name", "latitude")
        .with("long_name", "latitude of the cast")
        .with("units", "degrees_north")
        .with("axis", "Y");
    file.variable(doubles("latitude", None, latitude, std::iter::once(r.latitude_deg)));
    if let Some(longitude_deg) = r.longitude_deg {
        let longitude = Attributes::default()
            .with("standard_name", "longitude")
            .with("long_name", "longitude of the cast")
            .with("units", "degrees_east")
            .with("axis", "X");
        file.variable(doubles("longitude", None, longitude, std::iter::once(longitude_deg)));
    }
}

#[cfg(test)]
mod tests {
    use super::super::provenance::PROGRAM;
    use super::*;
    use crate::log::{ReadOptions, read_bytes};
    use crate::settings::Settings;
    use jiff::Timestamp;
    use netcdf_reader::{NcAttrValue, NcFile};

    /// A cast down and up in steps of 5 dbar, with one missing pressure and one missing time.
    fn rows(time: impl Fn(usize) -> String) -> String {
        (0..41).fold(String::new(), |mut text, i: usize| {
            let pressure = if i == 7 { String::new() } else { (5 * i.min(40 - i) + 5).to_string() };
            text.push_str(&format!("{}{pressure};35.0;4.0\n", time(i)));
            text
        })
    }

    fn reduced(header: &str, rows: &str, settings: &Settings) -> Reduction {
        let text = format!("{header}pressure_dbar;practical_salinity;temperature_degC\n{rows}");
        let mut logs = read_bytes("a/cast 1.csv", text.into_bytes(), &ReadOptions::default()).unwrap();
        Reduction::new(logs.remove(0), settings).unwrap()
    }

    fn stamped(settings: &Settings) -> Reduction {
        let stamp = |i| match i {
            3 => ";".to_string(),
            _ => format!("2026-03-01T10:00:{i:02}.5Z;"),
        };
        reduced("time;", &rows(stamp), settings)
    }

    fn at(latitude_deg: f64, longitude_deg: Option<f64>) -> Settings {
        Settings { latitude_deg: Some(latitude_deg), longitude_deg, ..Settings::default() }
    }

    fn written(r: &Reduction) -> NcFile {
        let mut out = Vec::new();
        let time = Timestamp::from_second(0).ok();
        SeriesNetcdf::new(Provenance { call: "seaplumb reduce x".to_string(), time }, Extra::ALL.to_vec())
            .cast(&mut out, r)
            .unwrap();
        NcFile::from_vec(out).unwrap()
    }

    fn text(file: &NcFile, variable: &str, attribute: &str) -> String {
        let variable = file.variable(variable).unwrap();
        variable.attribute(attribute).map_or(String::new(), |a| a.value.as_string().unwrap())
    }

    fn global(file: &NcFile, attribute: &str) -> String {
        file.global_attribute(attribute).map_or(String::new(), |a| a.value.as_string().unwrap())
    }

    /// Every value, missing ones as NaN.
    fn values(file: &NcFile, name: &str) -> Vec<f64> {
        file.read_variable_unpacked_masked(name).unwrap().into_raw_vec_and_offset().0
    }

    /// To the bit, so that NaN equals NaN.
    fn assert_same(file: &NcFile, name: &str, expected: impl Iterator<Item = f64>) {
        let bits = |x: f64| if x.is_nan() { None } else { Some(x.to_bits()) };
        let read: Vec<_> = values(file, name).into_iter().map(bits).collect();
        assert_eq!(read, expected.map(bits).collect::<Vec<_>>(), "{name}");
    }

    #[test]
    fn every_sample_comes_back() {
        let r = stamped(&at(-31.5, Some(-176.2)));
        let file = written(&r);
        let samples = || (0..r.len()).map(|i| r.sample(i));
        assert_eq!(file.dimension("obs").unwrap().size, 41);
        assert_same(&file, "time", samples().map(|s| s.time_s));
        assert_same(&file, "pressure", samples().map(|s| s.pressure_dbar));
        assert_same(&file, "depth", samples().map(|s| s.depth_m));
        assert_same(&file, "u_depth", samples().map(|s| s.u_depth_m));
        assert_same(&file, "density", samples().map(|s| s.density_kg_m3));
        assert_same(&file, "flag", samples().map(|s| f64::from(s.flag.code())));
        let words = text(&file, "leg", "flag_meanings");
        let words: Vec<&str> = words.split(' ').collect();
        let legs: Vec<&str> = values(&file, "leg").iter().map(|&number| words[number as usize]).collect();
        assert_eq!(legs, samples().map(|s| s.leg.name()).collect::<Vec<_>>());
        // The log has one of each kind of gap, or the comparison above would prove less.
        assert!(values(&file, "time")[3].is_nan() && values(&file, "depth")[7].is_nan());
        assert_eq!(values(&file, "flag")[7], 9.0);
        assert_eq!(values(&file, "latitude"), [-31.5]);
        assert_eq!(values(&file, "longitude"), [-176.2]);
    }

    #[test]
    fn attributes_are_those_of_the_conventions() {
        let settings = Settings {
            datum: Some("mean sea level".to_string()),
            water_level_m: Some(0.4),
            reference_below_sensor_m: Some(0.85),
            ..at(-31.5, Some(-176.2))
        };
        let r = stamped(&settings);
        let file = written(&r);
        assert_eq!(global(&file, "Conventions"), "CF-1.11");
        assert_eq!(global(&file, "featureType"), "profile");
        assert_eq!(
            global(&file, "title"),
            "Depth at each sample of cast 1.csv, with its standard uncertainty"
        );
        assert_eq!(global(&file, "log"), "a/cast 1.csv");
        assert_eq!(global(&file, "history"), format!("1970-01-01T00:00:00Z {PROGRAM}: seaplumb reduce x"));
        assert_eq!(global(&file, "datum"), "mean sea level");
        let number = |name| file.global_attribute(name).unwrap().value.as_f64().unwrap();
        assert_eq!(number("deepest_depth_m"), r.deepest_m);
        assert_eq!(number("deepest_depth_expanded_uncertainty_m"), r.budget.expanded_uncertainty_m());
        assert_eq!(number("coverage_probability"), 0.95);
        let long_name =
            "depth of the reference point (0.85 m below the pressure sensor) below the mean sea level";
        for (variable, attribute, expected) in [
            ("time", "standard_name", "time"),
            ("time", "units", "seconds since 2026-03-01T10:00:00.5Z"),
            ("start_time", "axis", "T"),
            ("depth", "standard_name", "depth"),
            ("depth", "long_name", long_name),
            ("depth", "units", "m"),
            ("depth", "positive", "down"),
            ("depth", "axis", "Z"),
            ("depth", "ancillary_variables", "u_depth flag"),
            ("u_depth", "standard_name", "depth standard_error"),
            ("pressure", "standard_name", "sea_water_pressure_due_to_sea_water"),
            ("pressure", "units", "dbar"),
            ("density", "standard_name", "sea_water_density"),
            ("density", "units", "kg m-3"),
            ("latitude", "units", "degrees_north"),
            ("longitude", "units", "degrees_east"),
            ("flag", "standard_name", "quality_flag"),
            ("flag", "flag_meanings", "good not_evaluated questionable bad missing"),
        ] {
            assert_eq!(text(&file, variable, attribute), expected, "{variable}:{attribute}");
        }
        for variable in ["pressure", "u_depth", "density", "leg", "flag"] {
            let coordinates = text(&file, variable, "coordinates");
            assert_eq!(coordinates, "time start_time depth latitude longitude", "{variable}");
        }
        let numbers = &file.variable("flag").unwrap().attribute("flag_values").unwrap().value;
        assert_eq!(*numbers, NcAttrValue::Bytes(vec![1, 2, 3, 4, 9]));
    }

    #[test]
    fn what_is_not_known_is_left_out() {
        let r = reduced("", &rows(|_| String::new()), &at(10.0, None));
        let file = written(&r);
        for variable in ["time", "start_time", "longitude", "station"] {
            assert!(file.variable(variable).is_err(), "{variable}");
        }
        assert_eq!(global(&file, "featureType"), "");
        assert_eq!(text(&file, "leg", "coordinates"), "depth latitude");

        let r = reduced("time_s;", &rows(|i| format!("{i};")), &at(10.0, Some(3.0)));
        let file = written(&r);
        assert_eq!(text(&file, "time", "units"), "s");
        assert_eq!(text(&file, "time", "standard_name"), "");
        assert!(file.variable("start_time").is_err());
        assert_eq!(global(&file, "featureType"), "");

        // The start of the cast need not be the time of the first sample.
        let mut r = r;
        r.log.start = Timestamp::from_second(7).ok();
        let file = written(&r);
        assert_eq!(text(&file, "time", "units"), "s");
        assert_eq!(text(&file, "start_time", "units"), "seconds since 1970-01-01T00:00:07Z");
        assert_eq!(global(&file, "featureType"), "profile");
    }

    #[test]
    fn a_station_is_the_profile() {
        let mut r = stamped(&at(-31.5, Some(-176.2)));
        r.log.station = Some("Süd 7/2".to_string());
        let file = written(&r);
        assert_eq!(file.read_variable_as_string("station").unwrap(), "Süd 7/2");
        assert_eq!(text(&file, "station", "cf_role"), "profile_id");
    }
}
