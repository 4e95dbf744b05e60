//! Terms combined to one uncertainty.

use super::term::Term;
use crate::statistics::student_quantile;
use serde::Serialize;

/// Shape of what is known of an input.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Serialize)]
#[serde(rename_all = "lowercase")]
pub enum Distribution {
    /// Normal.
    Normal,
    /// Rectangular: bounds are known, nothing else.
    Rectangular,
}

/// Where a standard uncertainty comes from.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Serialize)]
#[serde(rename_all = "lowercase")]
pub enum Basis {
    /// A default: nothing better was supplied.
    Assumed,
    /// The cast sheet.
    Sheet,
    /// An option of the call.
    Option,
    /// The log itself.
    Data,
}

impl Basis {
    /// Its name in results.
    pub fn name(self) -> &'static str {
        match self {
            Basis::Assumed => "assumed",
            Basis::Sheet => "sheet",
            Basis::Option => "option",
            Basis::Data => "data",
        }
    }
}

/// One line of the budget.
#[derive(Debug, Clone, PartialEq, Serialize)]
pub struct BudgetTerm {
    /// Key of the term.
    pub term: &'static str,
    /// Value that was used, in `unit`.
    pub value: f64,
    /// Unit of the value and its uncertainty.
    pub unit: &'static str,
    /// Standard uncertainty in `unit`.
    pub standard_uncertainty: f64,
    /// Shape of the input.
    pub distribution: Distribution,
    /// Degrees of freedom; `None` for infinite.
    pub degrees_of_freedom: Option<f64>,
    /// Change of depth with the input, in `sensitivity_unit`.
    pub sensitivity: f64,
    /// Metres per `unit`.
    pub sensitivity_unit: String,
    /// Standard uncertainty of depth through this term, in m.
    pub contribution_m: f64,
    /// Its share of the variance, 0 to 1.
    pub share: f64,
    /// Where the standard uncertainty comes from.
    pub basis: Basis,
}

impl BudgetTerm {
    /// A line whose share is still to be settled by [`combine`].
    pub fn new(term: Term, value: f64, standard_uncertainty: f64, sensitivity: f64, basis: Basis) -> Self {
        Self {
            term: term.key(),
            value,
            unit: term.unit(),
            standard_uncertainty,
            distribution: Distribution::Normal,
            degrees_of_freedom: None,
            sensitivity,
            sensitivity_unit: match term.unit() {
                "m" => "1".to_string(),
                "1" => "m".to_string(),
                unit if unit.contains('/') => format!("m/({unit})"),
                unit => format!("m/{unit}"),
            },
            contribution_m: (sensitivity * standard_uncertainty).abs(),
            share: 0.0,
            basis,
        }
    }

    /// The same line with another distribution.
    #[must_use]
    pub fn distribution(mut self, distribution: Distribution) -> Self {
        self.distribution = distribution;
        self
    }

    /// The same line with degrees of freedom.
    #[must_use]
    pub fn degrees_of_freedom(mut self, degrees_of_freedom: Option<f64>) -> Self {
        self.degrees_of_freedom = degrees_of_freedom;
        self
    }
}

/// That two terms share a cause.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Correlation {
    /// Index of one term.
    pub one: usize,
    /// Index of the other.
    pub other: usize,
    /// Correlation coefficient, -1 to 1.
    pub coefficient: f64,
}

/// Terms and what they come to.
#[derive(Debug, Clone, PartialEq)]
pub struct Budget {
    /// The terms.
    pub terms: Vec<BudgetTerm>,
    /// Combined standard uncertainty in m.
    pub standard_uncertainty_m: f64,
    /// Effective degrees of freedom; `None` for infinite.
    pub effective_degrees_of_freedom: Option<f64>,
    /// Probability that the expanded uncertainty covers.
    pub coverage_probability: f64,
    /// Coverage factor.
    pub coverage_factor: f64,
}

impl Budget {
    /// Expanded uncertainty in m.
    pub fn expanded_uncertainty_m(&self) -> f64 {
        self.coverage_factor * self.standard_uncertainty_m
    }

    /// Expanded uncertainty in m for another coverage probability.
    pub fn expanded_for_m(&self, coverage_probability: f64) -> f64 {
        coverage_factor(coverage_probability, self.effective_degrees_of_freedom) * self.standard_uncertainty_m
    }

    /// The term that contributes most.
    pub fn largest(&self) -> Option<&BudgetTerm> {
        self.terms.iter().max_by(|a, b| a.contribution_m.total_cmp(&b.contribution_m))
    }
}

/// From so many degrees of freedom on, Student's t is that of infinitely many to six digits.
const AS_GOOD_AS_INFINITE: f64 = 1.0e7;

/// Combines terms: `u_c^2 = sum c_i^2 u_i^2 + 2 sum r_ij c_i u_i c_j u_j` (JCGM 100:2008, eq. 16), effective degrees of
/// freedom `nu = u_c^4 / sum (c_i u_i)^4 / nu_i` (eq. G.2b), truncated to an integer as G.4.1 advises when small, and the
/// coverage factor from Student's distribution (G.3.2).
pub fn combine(
    mut terms: Vec<BudgetTerm>,
    correlations: &[Correlation],
    coverage_probability: f64,
) -> Budget {
    let signed: Vec<f64> = terms.iter().map(|t| t.sensitivity.signum() * t.contribution_m).collect();
    let own: f64 = signed.iter().map(|c| c * c).sum();
    let shared: f64 =
        correlations.iter().map(|c| 2.0 * c.coefficient * signed[c.one] * signed[c.other]).sum();
    let variance = (own + shared).max(0.0);
    let fourth: f64 =
        terms.iter().filter_map(|t| t.degrees_of_freedom.map(|nu| t.contribution_m.powi(4) / nu)).sum();
    let effective =
        (fourth > 0.0).then(|| variance * variance / fourth).filter(|nu| *nu < AS_GOOD_AS_INFINITE);
    for term in &mut terms {
        term.share = if variance > 0.0 { term.contribution_m.powi(2) / variance } else { 0.0 };
    }
    Budget {
        terms,
        standard_uncertainty_m: variance.sqrt(),
        effective_degrees_of_freedom: effective,
        coverage_probability,
        coverage_factor: coverage_factor(coverage_probability, effective),
    }
}

/// Student's t for an interval of `coverage_probability`; fewer than 1 000 degrees of freedom are truncated to an integer
/// (JCGM 100:2008, G.4.1), one at least.
fn coverage_factor(coverage_probability: f64, degrees_of_freedom: Option<f64>) -> f64 {
    let nu = degrees_of_freedom.map(|nu| if nu < 1_000.0 { nu.floor().max(1.0) } else { nu });
    student_quantile(0.5 * (1.0 + coverage_probability), nu)
}

#[cfg(test)]
mod tests {
    use super::*;

    fn line(contribution: f64, nu: Option<f64>) -> BudgetTerm {
        BudgetTerm::new(Term::WaterLevel, 0.0, contribution, 1.0, Basis::Assumed).degrees_of_freedom(nu)
    }

    /// JCGM 100:2008, annex H.1 (end gauge), contributions in nm (table H.1): u_c = 32 nm, nu_eff = 16, t_99(16) = 2.92,
    /// U_99 = 93 nm.
    #[test]
    fn end_gauge_of_the_gum() {
        let terms =
            vec![line(25.0, Some(18.0)), line(9.7, Some(25.6)), line(2.9, Some(50.0)), line(16.6, Some(2.0))];
        let budget = combine(terms, &[], 0.99);
        assert_eq!(budget.standard_uncertainty_m.round(), 32.0);
        assert_eq!(budget.effective_degrees_of_freedom.unwrap().floor(), 16.0);
        assert!((budget.coverage_factor - 2.92).abs() < 0.005);
        // The GUM multiplies the rounded figures, 2.92 x 32 nm; unrounded it is half a nanometre less.
        assert!((budget.expanded_uncertainty_m() - 93.0).abs() < 0.6);
    }

    #[test]
    fn terms_combine_to_the_total() {
        let budget = combine(vec![line(3.0, None), line(4.0, None)], &[], 0.95);
        assert!((budget.standard_uncertainty_m - 5.0).abs() < 1e-15);
        assert!((budget.terms.iter().map(|t| t.share).sum::<f64>() - 1.0).abs() < 1e-15);
        assert_eq!(budget.effective_degrees_of_freedom, None);
    }

    #[test]
    fn full_correlation_adds_and_full_anticorrelation_cancels() {
        let with = |coefficient| {
            combine(
                vec![line(3.0, None), line(3.0, None)],
                &[Correlation { one: 0, other: 1, coefficient }],
                0.95,
            )
            .standard_uncertainty_m
        };
        assert!((with(1.0) - 6.0).abs() < 1e-12);
        assert!(with(-1.0).abs() < 1e-7);
    }
}
