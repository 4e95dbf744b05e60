//! Results on paper: one file per output, all from one [`Reduction`].

mod deepest_csv;
mod deepest_json;
mod deepest_text;
mod extra;
mod inspect_json;
mod inspect_text;
mod netcdf_attributes;
mod netcdf_classic;
mod number;
mod provenance;
mod series_csv;
mod series_json;
mod series_netcdf;

pub use deepest_csv::DeepestCsv;
pub use deepest_json::DeepestJson;
pub use deepest_text::DeepestText;
pub use extra::Extra;
pub use inspect_json::InspectJson;
pub use inspect_text::InspectText;
pub use provenance::Provenance;
pub use series_csv::SeriesCsv;
pub use series_json::SeriesJson;
pub use series_netcdf::SeriesNetcdf;

use crate::inspection::Inspection;
use crate::reduction::Reduction;
use std::io::{self, Write};

/// What everyone who uses a depth must know, once in each report for people.
pub const CAUTION: &str = "Not for navigation, not for life support, not for deciding how deep a hull may go: there the \
vehicle's certificate, the class rules, the pilot and the hydrographic office decide.";

/// A way to write results: begun once, one cast after the other, ended once.
pub trait Report {
    /// Ending of the names of files that hold it.
    fn extension(&self) -> &'static str;

    /// What stands before the first cast.
    ///
    /// # Errors
    /// Those of the writer.
    fn begin(&mut self, out: &mut dyn Write) -> io::Result<()>;

    /// One cast.
    ///
    /// # Errors
    /// Those of the writer.
    fn cast(&mut self, out: &mut dyn Write, reduction: &Reduction) -> io::Result<()>;

    /// What stands after the last cast.
    ///
    /// # Errors
    /// Those of the writer.
    fn end(&mut self, out: &mut dyn Write) -> io::Result<()>;

    /// Whether several casts may follow each other in one output.
    fn holds_many(&self) -> bool {
        true
    }
}

/// A way to write what was understood of logs: begun once, one log after the other, ended once.
pub trait InspectReport {
    /// What stands before the first log.
    ///
    /// # Errors
    /// Those of the writer.
    fn begin(&mut self, out: &mut dyn Write) -> io::Result<()>;

    /// One log.
    ///
    /// # Errors
    /// Those of the writer.
    fn cast(&mut self, out: &mut dyn Write, inspection: &Inspection) -> io::Result<()>;

    /// What stands after the last log.
    ///
    /// # Errors
    /// Those of the writer.
    fn end(&mut self, out: &mut dyn Write) -> io::Result<()>;
}
