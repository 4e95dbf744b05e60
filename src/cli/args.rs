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
A log holds pressure and, best, conductivity (or Practical Salinity) and temperature: delimited text, also .gz, \
WHP-Exchange CTD files, NetCDF, or a .zip of any of these. \
'-' reads standard input. Results go to standard output, notes to standard error.

Not for navigation, not for life support, not for deciding how deep a hull may go: there the vehicle's certificate, the class \
rules, the pilot and the hydrographic office decide.

Exit status: 0 done; 2 the call or the sheet is wrong; 3 one or more logs could not be reduced.";

const REDUCE_EXAMPLES: &str = "\
Examples:
  seaplumb reduce dive.csv --lat -31.52 --lon -176.18 > depth.csv
  seaplumb reduce dive.csv.gz --lat -31.52 --pressure absolute --air-pressure 1009.3 --format json
  seaplumb reduce dive.csv --lat -31.52 --lon -176.18 --format netcdf > depth.nc
  seaplumb reduce cruise/*.nc --into depths

Not for navigation, not for life support, not for deciding how deep a hull may go (see seaplumb --help).";

const DEEPEST_EXAMPLES: &str = "\
Examples:
  seaplumb deepest dive.csv --lat -31.52 --lon -176.18
  seaplumb deepest dive.csv --lat -31.52 --gravity-anomaly -182 --uncertainty surface_gravity=8
  seaplumb deepest pressure-only.csv --lat -31.52 --profile nearby.csv --format json
  seaplumb deepest cruise/*.nc --format csv > cruise.csv
  seaplumb deepest --sheet cruise.toml --format json

Not for navigation, not for life support, not for deciding how deep a hull may go (see seaplumb --help).";

const SHEET_EXAMPLES: &str = "\
Examples:
  seaplumb sheet cruise/*.nc > cruise.toml
  seaplumb deepest --sheet cruise.toml";

const INSPECT_EXAMPLES: &str = "\
Examples:
  seaplumb inspect dive.csv
  seaplumb inspect casts.zip --format json
  seaplumb inspect dive.csv --pressure absolute --air-pressure 1009.3 --samples

Not for navigation, not for life support, not for deciding how deep a hull may go (see seaplumb --help).";

fn degrees(text: &str) -> Result<f64, String> {
    let number = text.parse().ok().filter(|degrees: &f64| degrees.is_finite());
    number.ok_or_else(|| "expected degrees with a decimal point, south and west negative: -19.4".to_string())
}

/// The commands.
#[derive(Debug, Subcommand)]
pub enum Command {
    /// Depth at every sample, with its standard uncertainty, leg and flag
    #[command(after_help = REDUCE_EXAMPLES)]
    Reduce(ReduceArgs),
    /// The deepest depth and its uncertainty budget, term by term
    #[command(after_help = DEEPEST_EXAMPLES)]
    Deepest(DeepestArgs),
    /// What was understood of a log: columns, units, legs, gaps, deck, suspect samples
    #[command(after_help = INSPECT_EXAMPLES)]
    Inspect(InspectArgs),
    /// A cast sheet to fill in, prefilled from the logs
    #[command(after_help = SHEET_EXAMPLES)]
    Sheet(SheetArgs),
}

/// `seaplumb reduce`.
#[derive(Debug, Args)]
pub struct ReduceArgs {
    /// Further columns, by name, with commas between them
    #[arg(long, value_enum, value_name = "LIST", value_delimiter = ',', help_heading = "Output")]
    pub with: Vec<ExtraArg>,
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

/// `seaplumb sheet`.
#[derive(Debug, Args)]
pub struct SheetArgs {
    /// Logs that the sheet is to name; none prints a blank sheet
    #[arg(value_name = "LOG")]
    pub logs: Vec<String>,
    /// How to read them.
    #[command(flatten)]
    pub reading: ReadingArgs,
}

/// `seaplumb inspect`.
#[derive(Debug, Args)]
pub struct InspectArgs {
    /// Logs to read; '-' is standard input
    #[arg(required = true, value_name = "LOG")]
    pub logs: Vec<String>,
    /// Form of the result
    #[arg(long, value_enum, default_value_t = InspectFormat::Text, help_heading = "Output")]
    pub format: InspectFormat,
    /// List every suspect sample
    #[arg(long, help_heading = "Output")]
    pub samples: bool,
    /// No notes on standard error; errors still show
    #[arg(long, short, help_heading = "Output")]
    pub quiet: bool,
    /// How to read them.
    #[command(flatten)]
    pub reading: ReadingArgs,
    /// Their pressure.
    #[command(flatten)]
    pub sensor: SensorArgs,
}

/// Forms of what was understood.
#[derive(Debug, Clone, Copy, PartialEq, Eq, ValueEnum)]
pub enum InspectFormat {
    /// For people
    Text,
    /// All figures
    Json,
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

/// Further columns of a depth series.
#[derive(Debug, Clone, Copy, PartialEq, Eq, ValueEnum)]
#[value(rename_all = "snake_case")]
pub enum ExtraArg {
    /// Practical Salinity
    PracticalSalinity,
    /// Absolute Salinity
    #[value(name = "absolute_salinity_g_kg")]
    AbsoluteSalinity,
    /// Conservative Temperature
    #[value(name = "conservative_temperature_degC")]
    ConservativeTemperature,
    /// Sound speed at the sample
    #[value(name = "sound_speed_m_s")]
    SoundSpeed,
    /// Its travel-time mean from the sea surface down, what an echo sounder needs
    #[value(name = "mean_sound_speed_m_s")]
    MeanSoundSpeed,
    /// Gravity at the sample
    #[value(name = "gravity_m_s2")]
    Gravity,
    /// Depth of the seafloor: that of the sample and the altitude of the log, as logged
    #[value(name = "seafloor_depth_m")]
    SeafloorDepth,
}

/// Formulas of specific volume.
#[derive(Debug, Clone, Copy, PartialEq, Eq, ValueEnum)]
pub enum EosArg {
    /// The full Gibbs function, IAPWS-09 with IAPWS-08
    Gibbs,
    /// The 75-term polynomial fitted to it
    Polynomial,
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
    /// That of the place, by the global atlas (needs the longitude)
    Atlas,
    /// Reference-composition seawater
    Reference,
}

/// What must be said to read a log.
#[derive(Debug, Args)]
pub struct ReadingArgs {
    /// What a column is: ROLE=NAME or ROLE=NAME:UNIT, NAME also a column number (repeatable)
    #[arg(long, value_name = "ROLE=NAME[:UNIT]", help_heading = "Log")]
    pub column: Vec<String>,
    /// A mark for missing values, besides the usual ones (repeatable)
    #[arg(long, value_name = "TEXT", allow_hyphen_values = true, help_heading = "Log")]
    pub missing: Vec<String>,
}

/// What must be said of the pressure sensor and the air above it.
#[derive(Debug, Args)]
pub struct SensorArgs {
    /// From where the pressure counts [default: what the log says, else sea]
    #[arg(long, value_enum, value_name = "KIND", help_heading = "Log")]
    pub pressure: Option<PressureArg>,
    /// Zero offset: 'auto' takes it from the deck, 'none' leaves readings as they are, or dbar to subtract [default: auto]
    #[arg(long, value_name = "auto|none|DBAR", allow_negative_numbers = true, help_heading = "Log")]
    pub tare: Option<String>,
    /// Air pressure at the sea surface [default: 1013.25]
    #[arg(long, value_name = "HPA", help_heading = "Surface and datum")]
    pub air_pressure: Option<f64>,
}

/// Options of every command that reduces logs.
#[derive(Debug, Args)]
pub struct SharedArgs {
    /// Logs to read; '-' is standard input; none reads all that the sheet names
    #[arg(required_unless_present = "sheet", value_name = "LOG")]
    pub logs: Vec<String>,

    /// Cast sheet: what is known of casts besides their logs; an option beats it ('seaplumb sheet' prints one to fill in)
    #[arg(long, value_name = "FILE")]
    pub sheet: Option<PathBuf>,

    /// How to read the logs.
    #[command(flatten)]
    pub reading: ReadingArgs,
    /// Their pressure.
    #[command(flatten)]
    pub sensor: SensorArgs,

    /// Latitude of the cast, north positive; else the log's
    #[arg(long, value_name = "DEGREES", value_parser = degrees, allow_negative_numbers = true, help_heading = "Place")]
    pub lat: Option<f64>,
    /// Longitude of the cast, east positive; else the log's
    #[arg(long, value_name = "DEGREES", value_parser = degrees, allow_negative_numbers = true, help_heading = "Place")]
    pub lon: Option<f64>,

    /// Leg that the water column is taken from [default: down]
    #[arg(long, value_enum, help_heading = "Water")]
    pub leg: Option<LegArg>,
    /// Water of a nearby cast (pressure, temperature, salinity or conductivity) in place of the log's
    #[arg(long, value_name = "FILE", help_heading = "Water")]
    pub profile: Option<String>,

    /// What the salt is made of [default: atlas]
    #[arg(long, value_enum, help_heading = "Water")]
    pub composition: Option<CompositionArg>,

    /// Formula of specific volume [default: gibbs]
    #[arg(long, value_enum, help_heading = "Water")]
    pub eos: Option<EosArg>,

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
    /// Probability that expanded uncertainties cover [default: 0.95]
    #[arg(long, value_name = "P", help_heading = "Uncertainty")]
    pub coverage: Option<f64>,

    /// Write one result per log into this folder, and cruise.csv
    #[arg(long, value_name = "DIR", help_heading = "Output")]
    pub into: Option<PathBuf>,
    /// Logs reduced at a time [default: the number of cores]
    #[arg(long, value_name = "N", help_heading = "Output")]
    pub jobs: Option<usize>,
    /// Replace results that are there already
    #[arg(long, requires = "into", help_heading = "Output")]
    pub replace: bool,
    /// No notes on standard error; errors still show
    #[arg(long, short, help_heading = "Output")]
    pub quiet: bool,
}
