//! How the samples of a NetCDF file are arranged: one series, a table of profiles, or profiles one
//! behind the other (CF conventions 1.11, chapter 9).

use std::ops::Range;

use super::container::{Container, Variable};
use crate::log::number::Marks;

/// Where the samples of each profile are, once all variables are laid out profile by profile.
#[derive(Debug, PartialEq)]
pub(super) struct Layout {
    /// Dimension along which the samples run.
    sample: String,
    samples: usize,
    /// Dimension that counts the profiles.
    profile: Option<String>,
    /// Samples of each profile.
    pub ranges: Vec<Range<usize>>,
    /// A table padded to the longest profile.
    pub padded: bool,
}

/// Names of dimensions that run down a profile.
const LEVELS: &[&str] =
    &["level", "levels", "lev", "nlevels", "z", "depth", "pressure", "pres", "obs", "nlev", "sample"];

impl Layout {
    /// The arrangement of the samples of `pressure`.
    pub fn of(container: &Container, pressure: &Variable) -> Result<Self, String> {
        if container.length(pressure)? == 0 {
            return Err("it holds no value".into());
        }
        let long = squeezed(pressure);
        let (profile, sample) = match (&long[..], pressure.dimensions.last()) {
            ([], Some(only)) => (None, only.clone()),
            ([only], _) => (None, (*only).clone()),
            ([one, two], _) if is_level(&one.0) && !is_level(&two.0) => {
                (Some((*two).clone()), (*one).clone())
            }
            ([one, two], _) => (Some((*one).clone()), (*two).clone()),
            ([], None) => return Err("it is a single number; a log has one pressure per sample".into()),
            _ => return Err(format!("it has {} dimensions; one or two were expected", long.len())),
        };
        let samples = sample.1;
        if let Some((profile, count)) = profile {
            let ranges = (0..count).map(|i| i * samples..(i + 1) * samples).collect();
            return Ok(Self { sample: sample.0, samples, profile: Some(profile), ranges, padded: true });
        }
        let names = |attribute: &str| {
            container
                .variables
                .iter()
                .find(|v| v.attributes().text(attribute).is_some_and(|name| name == sample.0))
        };
        if let Some(sizes) = names("sample_dimension") {
            let profile = sizes.dimensions.first().map(|d| d.0.clone());
            let counts = container.numbers(sizes, &Marks::default())?;
            let mut ranges = Vec::new();
            let mut begin = 0_usize;
            for count in counts {
                let end = begin.saturating_add(count.max(0.0) as usize);
                if end > samples {
                    return Err(format!(
                        "the profile lengths in '{}' exceed its {samples} samples",
                        sizes.name
                    ));
                }
                ranges.push(begin..end);
                begin = end;
            }
            return Ok(Self { sample: sample.0, samples, profile, ranges, padded: false });
        }
        let indexed = |v: &&Variable| {
            v.attributes().text("instance_dimension").is_some()
                && v.dimensions.iter().any(|d| d.0 == sample.0)
        };
        if let Some(index) = container.variables.iter().find(indexed) {
            return Err(format!(
                "its profiles are interleaved by the index '{}', which is not supported; split the file by profile",
                index.name
            ));
        }
        let whole = std::iter::once(0..samples).collect();
        Ok(Self { sample: sample.0, samples, profile: None, ranges: whole, padded: false })
    }

    /// One value per sample, profile by profile; none when the variable does not run along the samples.
    pub fn per_sample<T: Copy>(&self, variable: &Variable, values: &[T]) -> Option<Vec<T>> {
        let long = squeezed(variable);
        let names: Vec<&str> = long.iter().map(|d| d.0.as_str()).collect();
        let profiles = if self.padded { self.ranges.len() } else { 1 };
        match (names.as_slice(), self.profile.as_deref().filter(|_| self.padded)) {
            ([], _) if self.samples * profiles == 1 && values.len() == 1 => Some(values.to_vec()),
            ([sample], _) if *sample == self.sample && values.len() == self.samples => {
                Some(values.repeat(profiles))
            }
            ([profile, sample], Some(p)) if *profile == p && *sample == self.sample => Some(values.to_vec()),
            ([sample, profile], Some(p)) if *profile == p && *sample == self.sample => {
                let at = |i: usize| values.get((i % self.samples) * profiles + i / self.samples).copied();
                (0..values.len()).map(at).collect()
            }
            _ => None,
        }
    }

    /// One value per profile; none when the variable is no such thing.
    pub fn per_profile<T: Clone>(
        &self,
        variable_dimensions: &[(String, usize)],
        values: &[T],
    ) -> Option<Vec<T>> {
        let count = self.ranges.len();
        let along = variable_dimensions.iter().any(|d| Some(&d.0) == self.profile.as_ref());
        match values {
            [one] => Some(vec![one.clone(); count]),
            many if along && many.len() == count => Some(many.to_vec()),
            _ => None,
        }
    }
}

/// Dimensions longer than one.
fn squeezed(variable: &Variable) -> Vec<&(String, usize)> {
    variable.dimensions.iter().filter(|d| d.1 != 1).collect()
}

fn is_level(name: &str) -> bool {
    let name: String = name.chars().filter(|c| *c != '_').flat_map(char::to_lowercase).collect();
    LEVELS.contains(&name.as_str())
}
