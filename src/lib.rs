//! seaplumb: from the log of a dive or a CTD cast to a depth with its uncertainty.
pub mod cast;
pub mod column;
pub mod constants;
pub mod depth;
pub mod gravity;
pub mod log;
pub mod seawater;
pub mod statistics;
pub mod warning;
