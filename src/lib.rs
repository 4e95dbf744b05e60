#![doc = include_str!("../README.md")]

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
pub mod sheet;
pub mod statistics;
pub mod uncertainty;
pub mod warning;
mod words;
