//! What can be typed. One definition makes the parser and the help.

use super::invocation::Invocation;
use clap::{Args, Parser, Subcommand, ValueEnum};
use std::path::PathBuf;

/// Depth, deepest depth and their uncertainty from the log of a dive or of a CTD cast.
#[derive(Debug, Parser)]
#[command(name = "seaplumb", version, max_term_width = 100, after_help = AFTER_HELP)]
pub struct Cli {
    /// What to do.
    #[command(subcommand)]
    pub command: Command,
    /// How the program was called.
    #[arg(skip)]
    pub invocation: Invocation,
}

const AFTER_HELP: &str = "\
A log holds pressure and, best, conductivity (or Practical Salinity) and temperature: delimited text, also .gz, or NetCDF. \
'-' reads standard input. Results go to standard output, notes to standard error.

Not for navigation, not for life support, not for deciding how deep a hull may go: there the vehicle's certificate, the class \
rules, the pilot and the hydrographic office decide.

Exit status: 0 done; 2 the call is wrong; 3 one or more logs could not be reduced.";

const REDUCE_EXAMPLES: &str = "\
Examples:
  seaplumb reduce dive.csv --lat -31.52 --lon -176.18 > depth.csv
  seaplumb reduce dive.csv.gz --lat -31.52 --pressure absolute --air-pressure 1009.3 --format json
  seaplumb reduce dive.csv --lat -31.52 --lon -176.18 --format netcdf > depth.nc
  seaplumb reduce cruise/*.nc --into depths";

const DEEPEST_EXAMPLES: &str = "\
Examples:
  seaplumb deepest dive.csv --lat -31.52 --lon -176.18
  seaplumb deepest dive.csv --lat -31.52 --gravity-anomaly -182 --uncertainty surface_gravity=8
  seaplumb deepest pressure-only.csv --lat -31.52 --profile nearby.csv --format json
  seaplumb deepest cruise/*.nc --format csv > cruise.csv";

/// The commands.
#[derive(Debug, Subcommand)]
pub enum Command {
    /// Depth at every sample, with its standard uncertainty, leg and flag
    #[command(after_help = REDUCE_EXAMPLES)]
    Reduce(ReduceArgs),
    /// The deepest depth and its uncertainty budget, term by term
    #[command(after_help = DEEPEST_EXAMPLES)]
    Deepest(DeepestArgs),
}

/// `seaplumb reduce`.
#[derive(Debug, Args)]
pub struct ReduceArgs {
    /// Form of the result
    #[arg(long, value_enum, default_value_t = SeriesFormat::Csv, help_heading = "Output")]
    pub format: SeriesFormat,
    /// All else.
    #[command(flatten)]
    pub shared: SharedArgs,
}

/// `seaplumb deepest`.
#[derive(Debug, Args)]
pub struct DeepestArgs {
    /// Form of the result
    #[arg(long, value_enum, default_value_t = DeepestFormat::Text, help_heading = "Output")]
    pub format: DeepestFormat,
    /// All else.
    #[command(flatten)]
    pub shared: SharedArgs,
}

/// Forms of a depth series.
#[derive(Debug, Clone, Copy, PartialEq, Eq, ValueEnum)]
pub enum SeriesFormat {
    /// One row per sample
    Csv,
    /// One array per column
    Json,
    /// CF-1.11 NetCDF, one file per cast: with --into DIR, or standard output into a file or pipe
    Netcdf,
}

/// Forms of a deepest depth.
#[derive(Debug, Clone, Copy, PartialEq, Eq, ValueEnum)]
pub enum DeepestFormat {
    /// For people
    Text,
    /// All figures
    Json,
    /// One row per cast
    Csv,
}

/// From where the pressure of the log counts.
#[derive(Debug, Clone, Copy, PartialEq, Eq, ValueEnum)]
pub enum PressureArg {
    /// From vacuum
    Absolute,
    /// Absolute less 101 325 Pa
    Sea,
    /// Zeroed in the air of the day
    Gauge,
}

/// Which leg the water is taken from.
#[derive(Debug, Clone, Copy, PartialEq, Eq, ValueEnum)]
pub enum LegArg {
    /// The down leg
    Down,
    /// The up leg
    Up,
    /// The mean of both
    Both,
}

/// What the salt is made of.
#[derive(Debug, Clone, Copy, PartialEq, Eq, ValueEnum)]
pub enum CompositionArg {
    /// Reference-composition seawater
    Reference,
}

/// Options of every command that reduces logs.
#[derive(Debug, Args)]
pub struct SharedArgs {
    /// Logs to read; '-' is standard input
    #[arg(required = true, value_name = "LOG")]
    pub logs: Vec<String>,

    /// Latitude of the cast, north positive; else the log's
    #[arg(long, value_name = "DEGREES", allow_negative_numbers = true, help_heading = "Place")]
    pub lat: Option<f64>,
    /// Longitude of the cast, east positive; else the log's
    #[arg(long, value_name = "DEGREES", allow_negative_numbers = true, help_heading = "Place")]
    pub lon: Option<f64>,

    /// What a column is: ROLE=NAME or ROLE=NAME:UNIT, NAME also a column number (repeatable)
    #[arg(long, value_name = "ROLE=NAME[:UNIT]", help_heading = "Log")]
    pub column: Vec<String>,
    /// A mark for missing values, besides the usual ones (repeatable)
    #[arg(long, value_name = "TEXT", allow_hyphen_values = true, help_heading = "Log")]
    pub missing: Vec<String>,
    /// From where the pressure counts [default: what the log says, else sea]
    #[arg(long, value_enum, value_name = "KIND", help_heading = "Log")]
    pub pressure: Option<PressureArg>,
    /// Zero offset: 'auto' takes it from the deck, 'none' leaves readings as they are, or dbar to subtract
    #[arg(
        long,
        value_name = "auto|none|DBAR",
        default_value = "auto",
        allow_negative_numbers = true,
        help_heading = "Log"
    )]
    pub tare: String,

    /// Leg that the water column is taken from
    #[arg(long, value_enum, default_value_t = LegArg::Down, help_heading = "Water")]
    pub leg: LegArg,
    /// Water of a nearby cast (pressure, temperature, salinity or conductivity) in place of the log's
    #[arg(long, value_name = "FILE", help_heading = "Water")]
    pub profile: Option<String>,

    /// What the salt is made of
    #[arg(long, value_enum, default_value_t = CompositionArg::Reference, help_heading = "Water")]
    pub composition: CompositionArg,

    /// Air pressure at the sea surface [default: 1013.25]
    #[arg(long, value_name = "HPA", help_heading = "Surface and datum")]
    pub air_pressure: Option<f64>,
    /// Height of the water above the datum [default: 0]
    #[arg(long, value_name = "M", allow_negative_numbers = true, help_heading = "Surface and datum")]
    pub water_level: Option<f64>,
    /// Name of the datum that the water level counts from
    #[arg(long, value_name = "NAME", requires = "water_level", help_heading = "Surface and datum")]
    pub datum: Option<String>,
    /// How far the reference point lies below the pressure sensor [default: 0]
    #[arg(long, value_name = "M", allow_negative_numbers = true, help_heading = "Surface and datum")]
    pub reference_below: Option<f64>,

    /// Free-air gravity anomaly at the sea surface
    #[arg(
        long,
        value_name = "MGAL",
        allow_negative_numbers = true,
        conflicts_with = "gravity_disturbance",
        help_heading = "Gravity"
    )]
    pub gravity_anomaly: Option<f64>,
    /// Gravity disturbance at the sea surface [default: 0]
    #[arg(long, value_name = "MGAL", allow_negative_numbers = true, help_heading = "Gravity")]
    pub gravity_disturbance: Option<f64>,
    /// Gradient anomaly, positive where gravity grows faster with depth than normal [default: 0]
    #[arg(long, value_name = "EOTVOS", allow_negative_numbers = true, help_heading = "Gravity")]
    pub gravity_gradient: Option<f64>,
    /// Height of the geoid above the WGS 84 ellipsoid [default: 0]
    #[arg(long, value_name = "M", allow_negative_numbers = true, help_heading = "Gravity")]
    pub geoid_height: Option<f64>,

    /// Standard uncertainty of a term of the budget, in its unit (repeatable)
    #[arg(long, value_name = "TERM=U", help_heading = "Uncertainty")]
    pub uncertainty: Vec<String>,
    /// Probability that expanded uncertainties cover
    #[arg(long, value_name = "P", default_value_t = 0.95, help_heading = "Uncertainty")]
    pub coverage: f64,

    /// Write one result per log into this folder, and cruise.csv
    #[arg(long, value_name = "DIR", help_heading = "Output")]
    pub into: Option<PathBuf>,
    /// Replace results that are there already
    #[arg(long, requires = "into", help_heading = "Output")]
    pub replace: bool,
    /// No notes on standard error; errors still show
    #[arg(long, short, help_heading = "Output")]
    pub quiet: bool,
}
