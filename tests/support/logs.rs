//! Reading text logs in the tests.
#![allow(dead_code)] // each test file uses a part

use seaplumb::log::{Log, LogError, ReadOptions, read_bytes};

pub fn options(columns: &[&str]) -> ReadOptions {
    ReadOptions { columns: columns.iter().map(|c| c.parse().expect("a choice")).collect(), missing: vec![] }
}

pub fn read(text: impl AsRef<[u8]>) -> Result<Vec<Log>, LogError> {
    read_with(text, &options(&[]))
}

pub fn read_with(text: impl AsRef<[u8]>, options: &ReadOptions) -> Result<Vec<Log>, LogError> {
    read_bytes("dive.csv", text.as_ref().to_vec(), options)
}

pub fn one(text: impl AsRef<[u8]>) -> Log {
    let text = text.as_ref();
    let mut logs = read(text).unwrap_or_else(|e| panic!("{e}\nin\n{}", String::from_utf8_lossy(text)));
    assert_eq!(logs.len(), 1);
    logs.remove(0)
}

pub fn values(channel: &Option<seaplumb::log::Channel>) -> &[f64] {
    channel.as_ref().map_or(&[], |channel| &channel.values)
}
