//! Which files a pattern names.

use std::path::{Component, Path, PathBuf};

/// Whether a path holds `*` (any characters of one name) or `?` (one character).
pub(crate) fn is_pattern(path: &str) -> bool {
    path.contains(['*', '?'])
}

/// The files that `pattern` names, counted from `folder`, sorted. A path without `*` and `?`, or one that is there as
/// it is written, names itself.
pub(crate) fn files(folder: &Path, pattern: &str) -> Vec<PathBuf> {
    let plain = folder.join(pattern);
    if !is_pattern(pattern) || plain.exists() {
        return vec![plain];
    }
    let mut found = vec![folder.to_path_buf()];
    for component in Path::new(pattern).components() {
        found = match component {
            Component::CurDir => found,
            Component::Normal(name) if name.to_str().is_some_and(is_pattern) => {
                let name: Vec<char> = name.to_string_lossy().chars().collect();
                found.iter().flat_map(|dir| entries(dir, &name)).collect()
            }
            other => found.into_iter().map(|dir| dir.join(other)).collect(),
        };
    }
    found.retain(|path| path.is_file());
    found.sort();
    found
}

/// The entries of a folder whose names match; a name that begins with a dot only when the pattern does too.
fn entries(dir: &Path, pattern: &[char]) -> Vec<PathBuf> {
    let listed = if dir.as_os_str().is_empty() { Path::new(".") } else { dir };
    let Ok(entries) = std::fs::read_dir(listed) else { return Vec::new() };
    entries
        .filter_map(Result::ok)
        .map(|entry| entry.file_name())
        .filter(|name| {
            let name: Vec<char> = name.to_string_lossy().chars().collect();
            (name.first() != Some(&'.') || pattern.first() == Some(&'.')) && matches(pattern, &name)
        })
        .map(|name| dir.join(name))
        .collect()
}

/// Whether a whole name matches. On a mismatch the last `*` takes one character more, so that the work is at most the
/// product of both lengths.
fn matches(pattern: &[char], name: &[char]) -> bool {
    let (mut p, mut n) = (0, 0);
    let mut star: Option<(usize, usize)> = None;
    while n < name.len() {
        match pattern.get(p) {
            Some('*') => {
                star = Some((p, n));
                p += 1;
            }
            Some(&c) if c == '?' || c == name[n] => {
                p += 1;
                n += 1;
            }
            _ => match &mut star {
                Some((at, taken)) => {
                    *taken += 1;
                    (p, n) = (*at + 1, *taken);
                }
                None => return false,
            },
        }
    }
    pattern[p..].iter().all(|c| *c == '*')
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn names_and_patterns() {
        let fits = |pattern: &str, name: &str| {
            matches(&pattern.chars().collect::<Vec<_>>(), &name.chars().collect::<Vec<_>>())
        };
        for (pattern, name) in [
            ("*", ""),
            ("*", "K07.csv"),
            ("K*.csv", "K07.csv"),
            ("K0?.csv", "K07.csv"),
            ("*0*7*", "K0x7.csv"),
            ("a*b*b", "abbb"),
            ("*ü?", "xüy"),
        ] {
            assert!(fits(pattern, name), "{pattern} {name}");
        }
        for (pattern, name) in [
            ("K?.csv", "K07.csv"),
            ("*.csv", "K07.csv.gz"),
            ("", "x"),
            ("?", ""),
            ("k*", "K07"),
            ("a*b", "abc"),
        ] {
            assert!(!fits(pattern, name), "{pattern} {name}");
        }
        // Many stars against a name that nearly fits must not take for ever.
        assert!(!fits(&"*a".repeat(50), &("a".repeat(2000) + "b")));
    }

    #[test]
    fn files_of_a_folder() {
        let dir = tempfile::tempdir().unwrap();
        for name in
            ["one/K2.csv", "one/K1.csv", "one/.K3.csv", "two/K1.csv", "two/K1.txt", "odd*.csv", "oddx.csv"]
        {
            let path = dir.path().join(name);
            std::fs::create_dir_all(path.parent().unwrap()).unwrap();
            std::fs::write(path, "").unwrap();
        }
        std::fs::create_dir(dir.path().join("one/K9.csv")).unwrap();
        let found = |pattern: &str| -> Vec<String> {
            files(dir.path(), pattern)
                .iter()
                .map(|p| p.strip_prefix(dir.path()).unwrap().to_str().unwrap().replace('\\', "/"))
                .collect()
        };
        assert_eq!(found("*/K*.csv"), ["one/K1.csv", "one/K2.csv", "two/K1.csv"]);
        assert_eq!(found("./one/K?.csv"), ["one/K1.csv", "one/K2.csv"]);
        assert_eq!(found("one/.K*"), ["one/.K3.csv"]);
        assert_eq!(found("three/*"), [""; 0]);
        assert_eq!(found("three/K1.csv"), ["three/K1.csv"]);
        // A file whose own name holds a star.
        assert_eq!(found("odd*.csv"), ["odd*.csv"]);
    }
}
