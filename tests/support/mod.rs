//! Reads the committed tables of reference numbers.
#![allow(dead_code)] // each test file uses its own part

pub mod logs;
pub mod water;

use std::io::Write;
use std::path::{Path, PathBuf};

/// A table with named columns.
pub struct Table {
    header: Vec<String>,
    rows: Vec<Vec<String>>,
    name: String,
}

impl Table {
    /// Reads `tests/reference/NAME`, passing over comment lines.
    pub fn reference(name: &str) -> Self {
        let path = Path::new(env!("CARGO_MANIFEST_DIR")).join("tests/reference").join(name);
        Self::read(&path)
    }

    pub fn read(path: &Path) -> Self {
        let text = std::fs::read_to_string(path).unwrap_or_else(|e| panic!("{}: {e}", path.display()));
        let mut lines = text.lines().filter(|l| !l.starts_with('#') && !l.is_empty());
        let split = |l: &str| l.split(',').map(str::to_string).collect::<Vec<_>>();
        let header = split(lines.next().expect("a header"));
        let rows: Vec<_> = lines.map(split).collect();
        assert!(!rows.is_empty(), "{} holds no rows", path.display());
        Self { header, rows, name: path.display().to_string() }
    }

    pub fn len(&self) -> usize {
        self.rows.len()
    }

    fn column(&self, name: &str) -> usize {
        self.header
            .iter()
            .position(|h| h == name)
            .unwrap_or_else(|| panic!("{} has no column {name}", self.name))
    }

    pub fn text(&self, name: &str) -> Vec<&str> {
        let c = self.column(name);
        self.rows.iter().map(|r| r[c].as_str()).collect()
    }

    /// Numbers of a column; NaN where a cell is empty.
    pub fn numbers(&self, name: &str) -> Vec<f64> {
        self.text(name)
            .into_iter()
            .map(|cell| if cell.is_empty() { f64::NAN } else { cell.parse().expect("a number") })
            .collect()
    }
}

/// Residuals, their maximum and quantiles: written out, and held against tolerances.
pub struct Residuals {
    name: String,
    values: Vec<f64>,
}

impl Residuals {
    pub fn new(name: &str, values: impl Iterator<Item = f64>) -> Self {
        let mut values: Vec<f64> = values.map(f64::abs).collect();
        assert!(!values.is_empty(), "{name}: nothing compared");
        assert!(values.iter().all(|v| !v.is_nan()), "{name}: a residual is not a number");
        values.sort_by(f64::total_cmp);
        Self { name: name.to_string(), values }
    }

    /// Prints count, median and maximum (seen with `--nocapture`), then fails when the
    /// maximum is above `tolerance`.
    pub fn within(&self, tolerance: f64, unit: &str) {
        let n = self.values.len();
        let (median, max) = (self.values[n / 2], self.values[n - 1]);
        // Seen with `--nocapture`; docs/refresh.sh collects these lines.
        #[allow(clippy::print_stdout)]
        {
            println!(
                "VALIDATION | {} | {n} | {median:.1e} {unit} | {max:.1e} {unit} | {tolerance:.0e} {unit} |",
                self.name
            );
        }
        assert!(max <= tolerance, "{}: largest residual {max:e} {unit}, allowed {tolerance:e}", self.name);
    }
}

/// The folder of shared data, when there is one; says loudly when not.
pub fn shared_data(part: &str) -> Option<PathBuf> {
    let root = std::env::var_os("SEAPLUMB_SHARED")
        .map(PathBuf::from)
        .unwrap_or_else(|| Path::new(env!("CARGO_MANIFEST_DIR")).join("../shared"));
    let path = root.join(part);
    if path.exists() {
        Some(path)
    } else {
        // Not eprintln!, whose text the test harness keeps to itself.
        let text = format!(
            "SKIPPED: {} is absent (SEAPLUMB_SHARED names the folder that holds it); nothing was checked",
            path.display()
        );
        writeln!(std::io::stderr(), "\n{text}").expect("standard error");
        None
    }
}

/// The folder of demo data.
pub fn demo(name: &str) -> PathBuf {
    Path::new(env!("CARGO_MANIFEST_DIR")).join("demo-data").join(name)
}
