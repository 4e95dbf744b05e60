//! Student's t against a statistics library, and the examples of the GUM through the budget.

mod support;

use seaplumb::statistics::student_quantile;
use seaplumb::uncertainty::{Basis, BudgetTerm, Correlation, Term, combine};
use support::{Residuals, Table};

/// scipy 1.17.1, stats.t.
#[test]
fn student_t_table() {
    let table = Table::reference("student_t.csv");
    let (c, nu) = (table.numbers("coverage"), table.numbers("degrees_of_freedom"));
    let theirs = table.numbers("coverage_factor");
    Residuals::new(
        "Student's t, 1 to infinite degrees of freedom, against scipy, relative",
        (0..table.len()).map(|i| {
            let nu = Some(nu[i]).filter(|nu| nu.is_finite());
            student_quantile(0.5 * (1.0 + c[i]), nu) / theirs[i] - 1.0
        }),
    )
    .within(1e-9, "");
}

fn gum(name: &str) -> serde_json::Value {
    let path = std::path::Path::new(env!("CARGO_MANIFEST_DIR")).join("tests/reference/gum_examples.json");
    let all: serde_json::Value =
        serde_json::from_str(&std::fs::read_to_string(path).expect("gum_examples.json")).expect("JSON");
    all[name].clone()
}

/// JCGM 100:2008, annex H.1, the end gauge, from its inputs: metrolopy 1.1.1 and the printed results.
#[test]
fn gum_h1_end_gauge() {
    let example = gum("h1_end_gauge");
    let number = |v: &serde_json::Value, key: &str| v[key].as_f64().expect("a number");
    let terms: Vec<BudgetTerm> = example["inputs"]
        .as_array()
        .expect("inputs")
        .iter()
        .map(|input| {
            BudgetTerm::new(
                Term::Tare,
                0.0,
                number(input, "standard_uncertainty"),
                number(input, "sensitivity"),
                Basis::Data,
            )
            .degrees_of_freedom(input["degrees_of_freedom"].as_f64())
        })
        .collect();
    let budget = combine(terms, &[], number(&example, "coverage"));
    let close = |ours: f64, key: &str, tolerance: f64| {
        let theirs = number(&example, key);
        assert!((ours / theirs - 1.0).abs() < tolerance, "{key}: {ours} against {theirs}");
    };
    close(budget.standard_uncertainty_m, "combined_nm", 1e-12);
    close(budget.effective_degrees_of_freedom.expect("finite"), "effective_degrees_of_freedom", 1e-9);
    close(budget.coverage_factor, "coverage_factor", 1e-9);
    close(budget.expanded_uncertainty_m(), "expanded_nm", 1e-9);
    // Printed in the GUM.
    assert_eq!(budget.standard_uncertainty_m.round(), number(&example["printed"], "combined_nm"));
}

/// A pair of fully correlated terms, by hand: JCGM 100:2008, 5.2.2, note 1 (ten resistors of 100 mOhm that one standard
/// calibrated: 1 Ohm, not 0.32 Ohm).
#[test]
fn gum_ten_resistors() {
    let terms: Vec<BudgetTerm> =
        (0..10).map(|_| BudgetTerm::new(Term::Tare, 1000.0, 0.1, 1.0, Basis::Data)).collect();
    let all_pairs: Vec<Correlation> = (0..10)
        .flat_map(|one| (one + 1..10).map(move |other| Correlation { one, other, coefficient: 1.0 }))
        .collect();
    let correlated = combine(terms.clone(), &all_pairs, 0.95);
    assert!((correlated.standard_uncertainty_m - 1.0).abs() < 1e-12);
    assert!((combine(terms, &[], 0.95).standard_uncertainty_m - 0.32).abs() < 0.005);
}
