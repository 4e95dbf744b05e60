//! From bytes to a [`Log`]: columns with known units, each with a note of how it was recognised.
//!
//! One file per format. A reader knows nothing of physics: it turns bytes into a [`Log`], whose
//! channels are always in the units that [`Role::unit`] names, in the order of the file, with
//! missing values as NaN. Nothing is dropped and nothing is judged here.

mod archive;
mod axis;
mod cell;
mod choice;
mod columns;
mod delimited;
mod dialect;
mod error;
mod flags;
mod format;
mod header;
mod input;
mod mistake;
mod netcdf;
mod number;
mod position;
mod role;
mod rows;
mod time;
mod unit;
mod whp;

pub(crate) use error::picture;
pub use error::{LogError, Place};
pub use format::{read, read_bytes, read_each};

use crate::warning::Warning;

/// What a column of a log holds.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub enum Role {
    /// Time of the sample.
    Time,
    /// Pressure as the sensor gives it (see [`PressureKind`]).
    Pressure,
    /// Electrical conductivity of the water.
    Conductivity,
    /// In-situ temperature.
    Temperature,
    /// Practical Salinity.
    Salinity,
    /// Height above the seafloor by an altimeter.
    Altitude,
    /// Pitch of the vehicle.
    Pitch,
    /// Roll of the vehicle.
    Roll,
    /// Latitude of the sample.
    Latitude,
    /// Longitude of the sample.
    Longitude,
    /// Quality flag of the whole sample.
    Flag,
}

impl Role {
    /// The unit in which a [`Log`] holds this role.
    pub fn unit(self) -> &'static str {
        match self {
            Role::Time => "s",
            Role::Pressure => "dbar",
            Role::Conductivity => "mS/cm",
            Role::Temperature => "degC",
            Role::Salinity => "1",
            Role::Altitude => "m",
            Role::Pitch | Role::Roll | Role::Latitude | Role::Longitude => "degree",
            Role::Flag => "",
        }
    }
}

/// From where a pressure sensor counts.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum PressureKind {
    /// Absolute pressure: from vacuum.
    Absolute,
    /// Sea pressure: absolute pressure less 101 325 Pa.
    Sea,
    /// Gauge pressure: zeroed in the air of the day.
    Gauge,
}

/// Quality of one value, by the primary level of the IOC scheme (IOC Manuals and Guides 54,
/// volume 3, 2013).
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord, Hash)]
#[repr(u8)]
pub enum Flag {
    /// 1: passed every test.
    Good = 1,
    /// 2: not evaluated, not available or unknown.
    NotEvaluated = 2,
    /// 3: questionable or suspect.
    Questionable = 3,
    /// 4: bad.
    Bad = 4,
    /// 9: missing.
    Missing = 9,
}

impl Flag {
    /// The number of the IOC scheme.
    pub fn code(self) -> u8 {
        self as u8
    }

    /// Whether a value with this flag may be used (good, or not evaluated).
    pub fn usable(self) -> bool {
        self <= Flag::NotEvaluated
    }
}

/// One measured quantity along the log.
#[derive(Debug, Clone, PartialEq)]
pub struct Channel {
    /// One value per sample, in the unit of its [`Role`]; NaN where missing.
    pub values: Vec<f64>,
    /// One flag per sample, when the log carries flags for this quantity.
    pub flags: Option<Vec<Flag>>,
    /// Name of the column or variable in the log.
    pub name: String,
    /// Unit in the log, as it was understood (before conversion).
    pub unit: String,
    /// How name and unit were recognised, for people ("unit in brackets", "option --column", ...).
    pub recognised_by: String,
}

/// The times of the samples.
#[derive(Debug, Clone, PartialEq)]
pub struct TimeAxis {
    /// Seconds since the first sample that has a time; NaN where missing.
    pub elapsed_s: Vec<f64>,
    /// Absolute time of `elapsed_s == 0`, when the log tells.
    pub start: Option<jiff::Timestamp>,
    /// Name of the column or variable in the log.
    pub name: String,
    /// Unit in the log, or how its stamps are written, as it was understood.
    pub unit: String,
    /// How name and unit were recognised, for people.
    pub recognised_by: String,
}

/// Where a cast was taken, in degrees, north and east positive.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Position {
    /// Geodetic latitude, -90 to 90.
    pub latitude_deg: f64,
    /// Longitude, in the convention of the log.
    pub longitude_deg: Option<f64>,
}

/// How the rows of a text log map to lines, for messages about a sample.
#[derive(Debug, Clone, PartialEq, Eq)]
pub enum RowLines {
    /// The format has no lines.
    None,
    /// Sample `i` stands on line `first + i`.
    Contiguous {
        /// Line of the first sample, from 1.
        first: u64,
    },
    /// Each sample with its own line.
    Each(Vec<u64>),
}

/// One cast or dive as its log tells it.
#[derive(Debug, Clone, PartialEq)]
pub struct Log {
    /// The log, as the user named it (with the profile's number behind it where one file holds several).
    pub source: String,
    /// The format it was read as, for people ("delimited text, comma", "NetCDF classic").
    pub format: String,
    /// Station name or number, when the log tells.
    pub station: Option<String>,
    /// Position, when the log tells one for the whole cast.
    pub position: Option<Position>,
    /// Start of the cast, when the log tells it (also without a time for each sample).
    pub start: Option<jiff::Timestamp>,
    /// Times of the samples; none when the log has no time column.
    pub time: Option<TimeAxis>,
    /// Pressure in dbar, as the sensor gives it.
    pub pressure: Channel,
    /// From where the pressure counts, when the log tells.
    pub pressure_kind: Option<PressureKind>,
    /// Temperature in degC (ITS-90).
    pub temperature: Option<Channel>,
    /// Conductivity in mS/cm.
    pub conductivity: Option<Channel>,
    /// Practical Salinity.
    pub salinity: Option<Channel>,
    /// Height above the seafloor in m.
    pub altitude: Option<Channel>,
    /// Pitch in degrees.
    pub pitch: Option<Channel>,
    /// Roll in degrees.
    pub roll: Option<Channel>,
    /// Flag of the whole sample, when the log has such a column.
    pub flags: Option<Vec<Flag>>,
    /// Columns or variables that were left aside.
    pub unused: Vec<String>,
    /// Lines of the samples.
    pub lines: RowLines,
    /// What was noticed while reading.
    pub warnings: Vec<Warning>,
}

impl Log {
    /// Number of samples.
    pub fn len(&self) -> usize {
        self.pressure.values.len()
    }

    /// Whether the log holds no sample at all.
    pub fn is_empty(&self) -> bool {
        self.len() == 0
    }

    /// The line of sample `i`, where the format has lines.
    pub fn line_of(&self, i: usize) -> Option<u64> {
        match &self.lines {
            RowLines::None => None,
            RowLines::Contiguous { first } => Some(first + i as u64),
            RowLines::Each(lines) => lines.get(i).copied(),
        }
    }
}

/// `--column ROLE=NAME[:UNIT]`: the user's word for what a column is.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct ColumnChoice {
    /// What the column holds.
    pub role: Role,
    /// Its name in the log.
    pub name: String,
    /// Its unit, as typed; `None` leaves it to the log.
    pub unit: Option<String>,
}

/// What the user said about the logs to be read.
#[derive(Debug, Clone, Default, PartialEq, Eq)]
pub struct ReadOptions {
    /// Columns settled by the user.
    pub columns: Vec<ColumnChoice>,
    /// Marks that mean "missing", besides the usual ones (empty, NaN, -999, -9999, 1e35).
    pub missing: Vec<String>,
}
