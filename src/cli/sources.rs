//! Which logs a call names: files, folders, patterns.

use super::request::CallError;
use crate::sheet::pattern;
use std::path::Path;

/// Endings of files that a folder stands for; a log with another one is named itself.
const ENDINGS: [&str; 11] = ["csv", "tsv", "txt", "dat", "asc", "log", "nc", "nc4", "cdf", "gz", "zip"];

/// The logs that the arguments of a call name, in their order: a folder stands for the files in it whose ending is that of a log
/// ([`ENDINGS`]), sorted by name, without hidden ones and tables that an earlier call wrote (`cruise.csv`); a pattern (`*`, `?`) that the shell has left alone for the files that
/// match.
///
/// # Errors
/// [`CallError`] for a folder without files and a pattern that matches nothing.
pub(super) fn expand(arguments: &[String]) -> Result<Vec<String>, CallError> {
    let mut logs = Vec::with_capacity(arguments.len());
    for argument in arguments {
        let path = Path::new(argument);
        if path.is_dir() {
            let files = folder(path).map_err(|e| CallError(format!("{argument}: {e}")))?;
            if files.is_empty() {
                return Err(CallError(format!("{argument}: there is no log in this folder")));
            }
            logs.extend(files);
        } else if !path.exists() && pattern::is_pattern(argument) {
            let files = pattern::files(Path::new(""), argument);
            if files.is_empty() {
                return Err(CallError(format!("no file matches '{argument}'")));
            }
            logs.extend(files.into_iter().map(|file| file.display().to_string()));
        } else {
            logs.push(argument.clone());
        }
    }
    Ok(logs)
}

fn folder(path: &Path) -> std::io::Result<Vec<String>> {
    let mut files = Vec::new();
    for entry in std::fs::read_dir(path)? {
        let entry = entry?;
        let name = entry.file_name();
        let hidden = name.to_string_lossy().starts_with('.');
        let ending = entry.path().extension().map(|e| e.to_string_lossy().to_lowercase()).unwrap_or_default();
        let log = ENDINGS.contains(&ending.as_str());
        if log && !hidden && name != super::output::CRUISE && entry.path().is_file() {
            files.push(entry.path().display().to_string());
        }
    }
    files.sort();
    Ok(files)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn folders_and_patterns_become_files() {
        let dir = tempfile::tempdir().unwrap();
        for name in ["b.csv", "a.csv", "c.nc", ".hidden", "cruise.csv", "README.md"] {
            std::fs::write(dir.path().join(name), "x").unwrap();
        }
        std::fs::create_dir(dir.path().join("deeper")).unwrap();
        let at = |name: &str| dir.path().join(name).display().to_string();
        assert_eq!(expand(&[at("")]).unwrap(), [at("a.csv"), at("b.csv"), at("c.nc")]);
        assert_eq!(expand(&[at("c.nc"), at("?.csv")]).unwrap(), [at("c.nc"), at("a.csv"), at("b.csv")]);
        assert!(expand(&[at("*.txt")]).is_err());
        assert!(expand(&[at("deeper")]).is_err());
        // A file that is not there is for the reader to say.
        assert_eq!(expand(&["nowhere.csv".to_string()]).unwrap(), ["nowhere.csv"]);
    }
}
