//! Where results go: standard output, or whole files in a folder.

use crate::log::LogError;
use crate::reduction::Reduction;
use crate::report::{DeepestCsv, Report};
use std::collections::BTreeSet;
use std::fs;
use std::io::{self, BufWriter, Write};
use std::path::{Path, PathBuf};
use tempfile::NamedTempFile;

/// Name of the table of all casts.
pub(super) const CRUISE: &str = "cruise.csv";

/// Results in a folder: one file per cast and the table of the cruise. A file appears whole or not at all.
pub(super) struct Folder {
    dir: PathBuf,
    replace: bool,
    names: BTreeSet<String>,
    cruise: Vec<u8>,
    /// The logs, which no result may replace.
    logs: BTreeSet<PathBuf>,
}

impl Folder {
    /// Makes the folder where it is not there, and refuses one whose table would be overwritten.
    pub fn open(dir: &Path, replace: bool, logs: &[String]) -> io::Result<Self> {
        let named = |e: io::Error| io::Error::new(e.kind(), format!("{}: {e}", dir.display()));
        if dir.exists() && !dir.is_dir() {
            let text = format!("{} is a file; --into takes a folder", dir.display());
            return Err(io::Error::new(io::ErrorKind::AlreadyExists, text));
        }
        fs::create_dir_all(dir).map_err(named)?;
        let mut folder = Self {
            dir: dir.to_path_buf(),
            replace,
            names: BTreeSet::from([CRUISE.to_string()]),
            cruise: Vec::new(),
            logs: logs.iter().filter_map(|log| fs::canonicalize(log).ok()).collect(),
        };
        folder.refuse_existing(CRUISE)?;
        DeepestCsv.begin(&mut folder.cruise)?;
        // A folder that cannot be written to is better known before the work.
        drop(NamedTempFile::new_in(dir).map_err(|e| {
            io::Error::new(e.kind(), format!("{} cannot be written to ({})", dir.display(), e.kind()))
        })?);
        Ok(folder)
    }

    /// Refuses, before the work, what would be refused after it: a result of one of `logs` that is there already.
    pub fn refuse_known(&self, logs: &[String], extension: &str) -> io::Result<()> {
        logs.iter().try_for_each(|log| self.refuse_existing(&format!("{}.{extension}", stem(log))))
    }

    /// Writes one cast and notes its row for the table.
    pub fn cast(&mut self, report: &mut dyn Report, reduction: &Reduction) -> io::Result<()> {
        let name = self.free_name(&reduction.log.source, report.extension());
        self.whole_file(&name, |out| {
            report.begin(out)?;
            report.cast(out, reduction)?;
            report.end(out)
        })?;
        DeepestCsv.cast(&mut self.cruise, reduction)
    }

    /// Writes the table.
    pub fn close(self) -> io::Result<()> {
        self.whole_file(CRUISE, |out| out.write_all(&self.cruise))
    }

    /// A name that no other result of this call has: the log's, with a number where two logs have the same.
    fn free_name(&mut self, source: &str, extension: &str) -> String {
        let stem = stem(source);
        let name = (1..)
            .map(|n| if n == 1 { format!("{stem}.{extension}") } else { format!("{stem}-{n}.{extension}") })
            .find(|name| !self.names.contains(name))
            .unwrap_or_default();
        self.names.insert(name.clone());
        name
    }

    fn refuse_existing(&self, name: &str) -> io::Result<()> {
        let path = self.dir.join(name);
        if fs::canonicalize(&path).is_ok_and(|path| self.logs.contains(&path)) {
            let text = format!("{} is one of the logs; give another folder for the results", path.display());
            return Err(io::Error::new(io::ErrorKind::AlreadyExists, text));
        }
        if !self.replace && path.exists() {
            let text = format!("{} is there already; --replace overwrites it", path.display());
            return Err(io::Error::new(io::ErrorKind::AlreadyExists, text));
        }
        Ok(())
    }

    /// Written aside, then renamed: nobody ever sees half a file.
    fn whole_file(&self, name: &str, write: impl FnOnce(&mut dyn Write) -> io::Result<()>) -> io::Result<()> {
        self.refuse_existing(name)?;
        let path = self.dir.join(name);
        // A link is followed, so that the file it points to is replaced and not the link.
        let target = fs::canonicalize(&path).unwrap_or(path);
        let folder = target.parent().unwrap_or(&self.dir);
        let mut builder = tempfile::Builder::new();
        #[cfg(unix)]
        {
            use std::os::unix::fs::PermissionsExt;
            // As any other program's file would have it: the umask takes off its part.
            builder.permissions(fs::Permissions::from_mode(0o666));
        }
        let file = builder.prefix(".seaplumb-").tempfile_in(folder)?;
        let mut out = BufWriter::new(file);
        write(&mut out)?;
        let file = out.into_inner().map_err(io::IntoInnerError::into_error)?;
        file.as_file().sync_all()?;
        file.persist(&target)?;
        Ok(())
    }
}

/// The name of a log without folders and endings, fit for a file.
fn stem(source: &str) -> String {
    let name = source.rsplit(['/', '\\']).next().unwrap_or(source);
    let name = name.strip_suffix(".gz").unwrap_or(name);
    let name = name.rsplit_once('.').map_or(name, |(stem, _)| if stem.is_empty() { name } else { stem });
    let clean: String =
        name.chars().map(|c| if c.is_alphanumeric() || "-_.+".contains(c) { c } else { '_' }).collect();
    match clean.trim_start_matches('.') {
        "" | "-" => "log".to_string(),
        clean => clean.to_string(),
    }
}

/// The words for a log that failed.
pub(super) fn failure(error: &LogError) -> String {
    format!("seaplumb: {error}")
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn stems() {
        assert_eq!(stem("casts/K07.csv"), "K07");
        assert_eq!(stem("K07.csv.gz"), "K07");
        assert_eq!(stem("-"), "log");
        assert_eq!(stem("a b?.nc"), "a_b_");
        assert_eq!(stem(".hidden"), "hidden");
    }

    #[test]
    fn names_never_collide() {
        let dir = tempfile::tempdir().unwrap();
        let mut folder = Folder::open(dir.path(), false, &[]).unwrap();
        assert_eq!(folder.free_name("a/one.csv", "csv"), "one.csv");
        assert_eq!(folder.free_name("b/one.csv", "csv"), "one-2.csv");
        assert_eq!(folder.free_name("cruise.nc", "csv"), "cruise-2.csv");
    }

    #[test]
    fn nothing_is_left_of_a_file_that_failed() {
        let dir = tempfile::tempdir().unwrap();
        let folder = Folder::open(dir.path(), false, &[]).unwrap();
        let failed = folder.whole_file("x.csv", |out| {
            out.write_all(b"half")?;
            Err(io::Error::other("no more room"))
        });
        assert!(failed.is_err());
        assert_eq!(fs::read_dir(dir.path()).unwrap().count(), 0);
    }

    #[test]
    fn no_result_replaces_a_log() {
        let dir = tempfile::tempdir().unwrap();
        let log = dir.path().join("x.csv");
        fs::write(&log, "the only copy").unwrap();
        let folder = Folder::open(dir.path(), true, &[log.display().to_string()]).unwrap();
        let error = folder.whole_file("x.csv", |out| out.write_all(b"new")).unwrap_err();
        assert!(error.to_string().contains("one of the logs"), "{error}");
        assert_eq!(fs::read_to_string(&log).unwrap(), "the only copy");
    }

    #[test]
    fn existing_results_stay_unless_told() {
        let dir = tempfile::tempdir().unwrap();
        fs::write(dir.path().join("x.csv"), "old").unwrap();
        let folder = Folder::open(dir.path(), false, &[]).unwrap();
        let error = folder.whole_file("x.csv", |out| out.write_all(b"new")).unwrap_err();
        assert!(error.to_string().contains("--replace"));
        let folder = Folder::open(dir.path(), true, &[]).unwrap();
        folder.whole_file("x.csv", |out| out.write_all(b"new")).unwrap();
        assert_eq!(fs::read_to_string(dir.path().join("x.csv")).unwrap(), "new");
    }
}
