//! seaplumb: from the log of a dive or a CTD cast to a depth with its uncertainty.
pub mod log;
pub mod warning;
