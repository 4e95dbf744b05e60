//! Quality flags of a variable: where they are, and what they mean.

use super::container::{Container, Variable};
use crate::log::Flag;
use crate::log::flags::Scheme;
use crate::log::role::compact;
use crate::warning::Warning;

/// The variable that holds the flags of `variable`: named by an attribute, else by its own name.
pub(super) fn variable_of<'a>(container: &'a Container, variable: &Variable) -> Option<&'a Variable> {
    let attributes = variable.attributes();
    if let Some(name) = attributes.text("OBS_QC_VARIABLE")
        && let Some(found) = container.variable(name)
    {
        return Some(found);
    }
    let ancillary = attributes.text("ancillary_variables").unwrap_or("");
    let named =
        ancillary.split_whitespace().filter_map(|name| container.variable(name)).find(|v| is_flags(v));
    named.or_else(|| {
        let own = compact(&variable.name);
        let wanted = ["qc", "flag", "flagw", "qf", "qualityflag"].map(|suffix| format!("{own}{suffix}"));
        container.variables.iter().find(|v| wanted.contains(&compact(&v.name)))
    })
}

fn is_flags(variable: &Variable) -> bool {
    let attributes = variable.attributes();
    let name = compact(&variable.name);
    attributes.text("flag_meanings").is_some()
        || attributes
            .text("standard_name")
            .is_some_and(|name| name.ends_with("status_flag") || name.ends_with("quality_flag"))
        || name.ends_with("qc")
        || name.contains("flag")
}

/// Reads flags; a warning tells when their scheme had to be assumed, or a number is none of it.
pub(super) fn read(
    container: &Container,
    variable: &Variable,
    warnings: &mut Vec<Warning>,
) -> Result<Vec<Flag>, String> {
    let attributes = variable.attributes();
    let all = |attributes: &super::container::Attributes, names: &[&str]| {
        names.iter().filter_map(|name| attributes.text(name)).collect::<Vec<_>>().join(" ")
    };
    let values: Vec<i64> = attributes.numbers("flag_values").iter().map(|value| *value as i64).collect();
    let meanings = attributes.text("flag_meanings").unwrap_or("");
    let local = all(attributes, &["units", "conventions", "long_name", "comment", "references"]);
    let global = all(&container.globals, &["Conventions", "data_type", "format_version", "references"]);
    let scheme =
        Scheme::from_words(&values, meanings, &local).or_else(|| Scheme::from_words(&[], "", &global));
    let scheme = scheme.unwrap_or_else(|| {
        warnings.push(Warning::new(
            "flag_scheme_assumed",
            format!(
                "the scheme of the flags in '{}' is not told: 1 good, 2 not evaluated, 3 questionable, 4 bad, 9 missing is assumed",
                variable.name
            ),
            "check that the flags follow the IOC scheme",
        ));
        Scheme::Ioc
    });
    let mut strange = None;
    let flag = |code: Option<i64>| {
        let Some(code) = code else { return Flag::NotEvaluated };
        scheme.flag(code).unwrap_or_else(|| {
            strange.get_or_insert(code);
            Flag::NotEvaluated
        })
    };
    let flags = container.codes(variable)?.into_iter().map(flag).collect();
    if let Some(code) = strange {
        let shown = if code < 0 { "a mark".to_string() } else { code.to_string() };
        warnings.push(Warning::new(
            "flag_not_in_scheme",
            format!(
                "'{}' holds {shown} that its scheme of flags does not have; it counts as not evaluated",
                variable.name
            ),
            "",
        ));
    }
    Ok(flags)
}
