//! A folder of a cruise, and the program run in it.
#![allow(dead_code)] // each test file uses its own part

use assert_cmd::Command;
use serde_json::Value;
use std::path::PathBuf;
use tempfile::TempDir;

/// A folder with files, and the program run in it.
pub struct Cruise(TempDir);

impl Cruise {
    pub fn new(files: &[(&str, &str)]) -> Self {
        let dir = tempfile::tempdir().expect("a folder");
        for (name, text) in files {
            let path = dir.path().join(name);
            std::fs::create_dir_all(path.parent().expect("a parent")).expect("a folder");
            std::fs::write(path, text).expect("a file");
        }
        Self(dir)
    }

    pub fn path(&self, name: &str) -> PathBuf {
        self.0.path().join(name)
    }

    pub fn run(&self, args: &[&str]) -> std::process::Output {
        let mut command = Command::cargo_bin("seaplumb").expect("the program");
        command.current_dir(self.0.path()).args(args).output().expect("a run")
    }

    /// The casts of `deepest --format json`.
    pub fn casts(&self, args: &[&str]) -> Vec<Value> {
        let mut all = vec!["deepest", "--format", "json"];
        all.extend(args);
        let output = self.run(&all);
        assert!(output.status.success(), "{args:?}: {}", text(&output.stderr));
        let json: Value = serde_json::from_slice(&output.stdout).expect("JSON");
        json["casts"].as_array().expect("casts").clone()
    }

    /// Standard error of a call that must fail with 2 and print nothing.
    pub fn refused(&self, args: &[&str]) -> String {
        let output = self.run(args);
        assert_eq!(output.status.code(), Some(2), "{args:?}: {}", text(&output.stderr));
        assert_eq!(text(&output.stdout), "", "{args:?}");
        text(&output.stderr)
    }
}

pub fn text(bytes: &[u8]) -> String {
    String::from_utf8(bytes.to_vec()).expect("UTF-8")
}
