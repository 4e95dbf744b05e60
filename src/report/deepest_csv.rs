//! One row per cast: the table of a cruise.

use super::Report;
use super::series_csv::absolute;
use crate::reduction::Reduction;
use std::io::{self, Write};

/// One row per cast with its deepest depth.
#[derive(Debug, Default)]
pub struct DeepestCsv;

const HEADER: [&str; 18] = [
    "log",
    "station",
    "latitude",
    "longitude",
    "start_time",
    "samples",
    "depth_m",
    "raw_maximum_m",
    "time_s",
    "pressure_dbar",
    "standard_uncertainty_m",
    "expanded_uncertainty_m",
    "coverage_probability",
    "coverage_factor",
    "effective_degrees_of_freedom",
    "datum",
    "largest_term",
    "warnings",
];

impl Report for DeepestCsv {
    fn extension(&self) -> &'static str {
        "csv"
    }

    fn begin(&mut self, out: &mut dyn Write) -> io::Result<()> {
        row(out, &HEADER)
    }

    fn cast(&mut self, out: &mut dyn Write, reduction: &Reduction) -> io::Result<()> {
        let (log, budget, deepest) = (&reduction.log, &reduction.budget, &reduction.deepest);
        let time_s = log.time.as_ref().map_or(f64::NAN, |t| t.elapsed_s[deepest.sample]);
        let start = log.start.or(log.time.as_ref().and_then(|t| t.start));
        let metres = |x: f64| if x.is_finite() { format!("{x:.3}") } else { String::new() };
        let number = |x: Option<f64>| x.map_or(String::new(), |x| x.to_string());
        let warnings: Vec<&str> = reduction.warnings.iter().map(|w| w.key).collect();
        let cells = [
            log.source.clone(),
            log.station.clone().unwrap_or_default(),
            reduction.latitude_deg.to_string(),
            number(reduction.longitude_deg),
            start.map_or(String::new(), |s| absolute(s, 0.0)),
            reduction.len().to_string(),
            metres(reduction.deepest_m),
            metres(reduction.depth_m(deepest.raw_pressure_dbar)),
            metres(time_s),
            metres(deepest.pressure_dbar),
            metres(budget.standard_uncertainty_m),
            metres(budget.expanded_uncertainty_m()),
            budget.coverage_probability.to_string(),
            format!("{:.3}", budget.coverage_factor),
            budget.effective_degrees_of_freedom.map_or(String::new(), |nu| format!("{nu:.0}")),
            reduction.datum.clone(),
            budget.largest().map_or(String::new(), |t| t.term.to_string()),
            warnings.join(" "),
        ];
        row(out, &cells)
    }

    fn end(&mut self, _out: &mut dyn Write) -> io::Result<()> {
        Ok(())
    }
}

fn row<T: AsRef<[u8]>>(out: &mut dyn Write, cells: &[T]) -> io::Result<()> {
    let mut writer = csv::Writer::from_writer(out);
    writer.write_record(cells).map_err(io::Error::from)?;
    writer.flush()
}
