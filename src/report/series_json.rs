//! Depth at every sample, as JSON: one array per column.

use super::Report;
use super::extra::{Extra, Extras};
use super::number::rounded;
use super::series_csv::absolute;
use crate::reduction::{Reduction, Sample};
use crate::warning::Warning;
use serde::Serialize;
use std::collections::BTreeMap;
use std::io::{self, Write};

/// `{"schema": "seaplumb.reduce/1", "casts": [...]}`: each cast with the columns of the CSV as arrays; null for what is not
/// known.
#[derive(Debug, Default)]
pub struct SeriesJson {
    with: Vec<Extra>,
    written: bool,
}

impl SeriesJson {
    /// With further columns.
    pub fn with(with: Vec<Extra>) -> Self {
        Self { with, written: false }
    }
}

#[derive(Serialize)]
struct CastJson<'a> {
    log: &'a str,
    station: Option<&'a str>,
    latitude: f64,
    longitude: Option<f64>,
    datum: &'a str,
    samples: Columns,
    warnings: &'a [Warning],
}

#[derive(Serialize)]
struct Columns {
    time_s: Vec<f64>,
    #[serde(skip_serializing_if = "Option::is_none")]
    time: Option<Vec<Option<String>>>,
    pressure_dbar: Vec<f64>,
    depth_m: Vec<f64>,
    u_depth_m: Vec<f64>,
    density_kg_m3: Vec<f64>,
    leg: Vec<&'static str>,
    flag: Vec<u8>,
    #[serde(flatten)]
    with: BTreeMap<&'static str, Vec<f64>>,
}

impl Columns {
    fn new(reduction: &Reduction, with: &[Extra]) -> Self {
        let extras = Extras::new(with, reduction);
        let samples: Vec<Sample> = (0..reduction.len()).map(|i| reduction.sample(i)).collect();
        let column = |get: fn(&Sample) -> f64, decimals| -> Vec<f64> {
            samples.iter().map(|s| rounded(get(s), decimals)).collect()
        };
        let start = reduction.log.time.as_ref().and_then(|t| t.start);
        Self {
            time_s: column(|s| s.time_s, 4),
            time: start.map(|start| {
                samples.iter().map(|s| Some(absolute(start, s.time_s)).filter(|t| !t.is_empty())).collect()
            }),
            pressure_dbar: column(|s| s.pressure_dbar, 3),
            depth_m: column(|s| s.depth_m, 3),
            u_depth_m: column(|s| s.u_depth_m, 3),
            density_kg_m3: column(|s| s.density_kg_m3, 4),
            leg: samples.iter().map(|s| s.leg.name()).collect(),
            flag: samples.iter().map(|s| s.flag.code()).collect(),
            with: extras
                .columns()
                .map(|column| {
                    let value = |i| rounded(extras.value(column, i), column.decimals() as i32);
                    (column.name(), (0..samples.len()).map(value).collect())
                })
                .collect(),
        }
    }
}

impl Report for SeriesJson {
    fn extension(&self) -> &'static str {
        "json"
    }

    fn begin(&mut self, out: &mut dyn Write) -> io::Result<()> {
        self.written = false;
        out.write_all(b"{\"schema\":\"seaplumb.reduce/1\",\"casts\":[")
    }

    fn cast(&mut self, out: &mut dyn Write, reduction: &Reduction) -> io::Result<()> {
        if self.written {
            out.write_all(b",")?;
        }
        self.written = true;
        let cast = CastJson {
            log: &reduction.log.source,
            station: reduction.log.station.as_deref(),
            latitude: reduction.latitude_deg,
            longitude: reduction.longitude_deg,
            datum: &reduction.datum,
            samples: Columns::new(reduction, &self.with),
            warnings: &reduction.warnings,
        };
        serde_json::to_writer(out, &cast).map_err(io::Error::from)
    }

    fn end(&mut self, out: &mut dyn Write) -> io::Result<()> {
        out.write_all(b"]}\n")
    }
}
