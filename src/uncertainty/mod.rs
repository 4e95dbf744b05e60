//! The uncertainty of a depth, term by term (JCGM 100:2008).

mod budget;
mod evaluate;
mod lines;
mod order;
mod term;

pub use budget::{Basis, Budget, BudgetTerm, Correlation, Distribution, combine};
pub use evaluate::{DepthUncertainty, Evidence, Supplied, WaterOrigin};
pub use order::{SurveyOrder, survey_orders};
pub use term::Term;
