//! seaplumb: from the log of a dive or a CTD cast to a depth with its uncertainty.
pub mod cast;
pub mod cli;
pub mod column;
pub mod constants;
pub mod depth;
pub mod gravity;
pub mod inspection;
pub mod log;
pub mod reduction;
pub mod report;
pub mod seawater;
pub mod settings;
pub mod statistics;
pub mod uncertainty;
pub mod warning;
