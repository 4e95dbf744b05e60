//! The deepest depth and its budget, as JSON.

use super::Report;
use super::number::{rounded, significant};
use crate::depth::Rung;
use crate::reduction::Reduction;
use crate::uncertainty::{BudgetTerm, SurveyOrder};
use crate::warning::Warning;
use serde::Serialize;
use std::io::{self, Write};

/// `{"schema": "seaplumb.deepest/1", "casts": [...]}`. Null degrees of freedom mean infinite.
#[derive(Debug, Default)]
pub struct DeepestJson {
    written: bool,
}

#[derive(Serialize)]
struct CastJson<'a> {
    log: &'a str,
    station: Option<&'a str>,
    latitude: f64,
    longitude: Option<f64>,
    deepest: DeepestPart<'a>,
    budget: Vec<BudgetTerm>,
    ladder: Vec<Rung>,
    survey_orders: Vec<SurveyOrder>,
    monte_carlo: Option<()>,
    assumptions: &'a [String],
    warnings: &'a [Warning],
}

#[derive(Serialize)]
struct DeepestPart<'a> {
    depth_m: f64,
    raw_maximum_m: f64,
    time_s: Option<f64>,
    time: Option<String>,
    pressure_dbar: f64,
    standard_uncertainty_m: f64,
    expanded_uncertainty_m: f64,
    coverage_probability: f64,
    coverage_factor: f64,
    effective_degrees_of_freedom: Option<f64>,
    datum: &'a str,
    sample: usize,
    window_samples: usize,
    within_1_m_s: Option<f64>,
    water: &'a str,
}

impl<'a> CastJson<'a> {
    fn new(reduction: &'a Reduction) -> Self {
        let (deepest, budget) = (&reduction.deepest, &reduction.budget);
        let time_s =
            reduction.log.time.as_ref().map(|t| t.elapsed_s[deepest.sample]).filter(|t| t.is_finite());
        let start = reduction.log.time.as_ref().and_then(|t| t.start);
        let terms = budget.terms.iter().cloned().map(|term| BudgetTerm {
            value: significant(term.value, 8),
            standard_uncertainty: significant(term.standard_uncertainty, 5),
            degrees_of_freedom: term.degrees_of_freedom.map(|nu| significant(nu, 4)),
            sensitivity: significant(term.sensitivity, 6),
            contribution_m: significant(term.contribution_m, 5),
            share: rounded(term.share, 6),
            ..term
        });
        let metres = |depth_m| rounded(depth_m, 4);
        Self {
            log: &reduction.log.source,
            station: reduction.log.station.as_deref(),
            latitude: reduction.latitude_deg,
            longitude: reduction.longitude_deg,
            deepest: DeepestPart {
                depth_m: metres(reduction.deepest_m),
                raw_maximum_m: metres(reduction.depth_m(deepest.raw_pressure_dbar)),
                time_s: time_s.map(|t| rounded(t, 4)),
                time: start.zip(time_s).map(|(start, t)| super::series_csv::absolute(start, t)),
                pressure_dbar: metres(deepest.pressure_dbar),
                standard_uncertainty_m: metres(budget.standard_uncertainty_m),
                expanded_uncertainty_m: metres(budget.expanded_uncertainty_m()),
                coverage_probability: budget.coverage_probability,
                coverage_factor: rounded(budget.coverage_factor, 4),
                effective_degrees_of_freedom: budget
                    .effective_degrees_of_freedom
                    .map(|nu| significant(nu, 4)),
                datum: &reduction.datum,
                sample: deepest.sample,
                window_samples: deepest.window,
                within_1_m_s: reduction.time_within_a_metre_s().map(|s| rounded(s, 3)),
                water: &reduction.water_words,
            },
            budget: terms.collect(),
            ladder: reduction.ladder.iter().map(|r| Rung { depth_m: metres(r.depth_m), ..*r }).collect(),
            survey_orders: reduction
                .survey_orders
                .iter()
                .map(|o| SurveyOrder { limit_m: metres(o.limit_m), ..*o })
                .collect(),
            monte_carlo: None,
            assumptions: &reduction.assumptions,
            warnings: &reduction.warnings,
        }
    }
}

impl Report for DeepestJson {
    fn extension(&self) -> &'static str {
        "json"
    }

    fn begin(&mut self, out: &mut dyn Write) -> io::Result<()> {
        self.written = false;
        out.write_all(b"{ \"schema\": \"seaplumb.deepest/1\",\n  \"casts\": [")
    }

    fn cast(&mut self, out: &mut dyn Write, reduction: &Reduction) -> io::Result<()> {
        out.write_all(if self.written { b",\n" } else { b"\n" })?;
        self.written = true;
        serde_json::to_writer_pretty(out, &CastJson::new(reduction)).map_err(io::Error::from)
    }

    fn end(&mut self, out: &mut dyn Write) -> io::Result<()> {
        write!(out, "\n],\n  \"caution\": {} }}\n", serde_json::Value::from(super::CAUTION))
    }
}
