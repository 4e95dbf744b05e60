//! Depth at every sample, as comma separated text.

use super::Report;
use super::extra::{Extra, Extras};
use super::number::{push_fixed, push_trimmed};
use crate::reduction::Reduction;
use std::io::{self, Write};

/// One row per sample of the log, in its order.
///
/// Columns: `time_s`, `time` (only when the log tells absolute time), `pressure_dbar`, `depth_m`, `u_depth_m`,
/// `density_kg_m3`, `leg`, `flag`, and the further columns asked for. What is not known is empty.
#[derive(Debug, Default)]
pub struct SeriesCsv {
    /// Further columns.
    pub with: Vec<Extra>,
}

/// Rows are handed on in pieces of about this many bytes.
const PIECE: usize = 1 << 16;

impl Report for SeriesCsv {
    fn extension(&self) -> &'static str {
        "csv"
    }

    fn begin(&mut self, _out: &mut dyn Write) -> io::Result<()> {
        Ok(())
    }

    fn cast(&mut self, out: &mut dyn Write, reduction: &Reduction) -> io::Result<()> {
        let start = reduction.log.time.as_ref().and_then(|t| t.start);
        out.write_all(b"time_s,")?;
        if start.is_some() {
            out.write_all(b"time,")?;
        }
        out.write_all(b"pressure_dbar,depth_m,u_depth_m,density_kg_m3,leg,flag")?;
        let extras = Extras::new(&self.with, reduction);
        for column in extras.columns() {
            write!(out, ",{}", column.name())?;
        }
        out.write_all(b"\n")?;
        let mut piece = Vec::with_capacity(PIECE + 200);
        for i in 0..reduction.len() {
            let sample = reduction.sample(i);
            push_trimmed(&mut piece, sample.time_s, 4);
            piece.push(b',');
            if let Some(start) = start {
                piece.extend_from_slice(absolute(start, sample.time_s).as_bytes());
                piece.push(b',');
            }
            for (value, decimals) in [
                (sample.pressure_dbar, 3),
                (sample.depth_m, 3),
                (sample.u_depth_m, 3),
                (sample.density_kg_m3, 4),
            ] {
                push_fixed(&mut piece, value, decimals);
                piece.push(b',');
            }
            piece.extend_from_slice(sample.leg.name().as_bytes());
            piece.extend_from_slice(&[b',', b'0' + sample.flag.code()]);
            for column in extras.columns() {
                piece.push(b',');
                push_fixed(&mut piece, extras.value(column, i), column.decimals());
            }
            piece.push(b'\n');
            if piece.len() > PIECE {
                out.write_all(&piece)?;
                piece.clear();
            }
        }
        out.write_all(&piece)
    }

    fn end(&mut self, _out: &mut dyn Write) -> io::Result<()> {
        Ok(())
    }

    fn holds_many(&self) -> bool {
        false
    }
}

/// ISO 8601 in UTC, to the millisecond where that is not zero; empty where the time is missing.
pub(super) fn absolute(start: jiff::Timestamp, elapsed_s: f64) -> String {
    if !elapsed_s.is_finite() {
        return String::new();
    }
    let elapsed = jiff::SignedDuration::from_millis((elapsed_s * 1e3).round() as i64);
    start.checked_add(elapsed).map_or(String::new(), |t| t.to_string())
}
