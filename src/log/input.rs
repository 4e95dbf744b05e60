//! The bytes of a log: from a file or standard input, inflated when they are gzip.

use std::borrow::Cow;
use std::io::{ErrorKind, Read};
use std::path::Path;

use super::LogError;

/// Inflated logs larger than this are refused: 1 GiB is two weeks of 24 samples a second.
pub(super) const INFLATED_LIMIT: u64 = 1 << 30;

/// Beginnings of files that are no logs, and what to do with them.
const FOREIGN: &[(&[u8], &str, &str)] = &[
    (b"BZh", "a bzip2 archive", "unpack it with bunzip2 and give that file"),
    (b"\xfd7zXZ\x00", "an xz archive", "unpack it with xz -d and give that file"),
    (b"\x28\xb5\x2f\xfd", "a zstd archive", "unpack it with zstd -d and give that file"),
    (b"7z\xbc\xaf\x27\x1c", "a 7z archive", "unpack it and give the log inside"),
    (b"%PDF", "a PDF document", "give the log itself"),
    (b"\xd0\xcf\x11\xe0", "a spreadsheet workbook", "save the sheet as CSV and give that file"),
];

/// A log as bytes, under the name that messages use.
#[derive(Debug)]
pub(super) struct Input {
    pub name: String,
    pub bytes: Vec<u8>,
}

impl Input {
    /// Reads `source`: a path, or `-` for standard input.
    pub fn open(source: &str) -> Result<Self, LogError> {
        if source == "-" {
            let name = "standard input";
            let mut bytes = Vec::new();
            std::io::stdin().lock().read_to_end(&mut bytes).map_err(|e| unreadable(name, &e))?;
            return Self::from_bytes(name, bytes);
        }
        if Path::new(source).is_dir() {
            return Err(
                LogError::new(source, "this is a folder, not a log").remedy("name the files inside it")
            );
        }
        #[cfg(unix)]
        if std::fs::metadata(source)
            .is_ok_and(|m| std::os::unix::fs::FileTypeExt::is_char_device(&m.file_type()))
        {
            return Err(
                LogError::new(source, "this is a device without end, not a log").remedy("name a file")
            );
        }
        let bytes = std::fs::read(source).map_err(|e| unreadable(source, &e))?;
        Self::from_bytes(source, bytes)
    }

    /// Takes bytes that are already in memory; inflates them when they begin like gzip.
    pub fn from_bytes(name: &str, bytes: Vec<u8>) -> Result<Self, LogError> {
        Self::within(name, bytes, INFLATED_LIMIT)
    }

    /// The same, where gzip may inflate to `limit` bytes at most.
    pub fn within(name: &str, bytes: Vec<u8>, limit: u64) -> Result<Self, LogError> {
        let bytes = if bytes.starts_with(&[0x1f, 0x8b]) { inflate(name, &bytes, limit)? } else { bytes };
        if bytes.iter().all(u8::is_ascii_whitespace) {
            return Err(LogError::new(name, "the log is empty")
                .remedy("check that it was copied completely")
                .foreign());
        }
        if let Some((_, what, remedy)) = FOREIGN.iter().find(|(magic, ..)| bytes.starts_with(magic)) {
            return Err(LogError::new(name, format!("this is {what}, not a log")).remedy(*remedy).foreign());
        }
        Ok(Self { name: name.to_string(), bytes })
    }

    /// The bytes as UTF-8, ASCII or Latin-1 text without a byte order mark, with lines that end in a
    /// line feed. `None` when they are no text.
    pub fn text(&self) -> Option<Cow<'_, [u8]>> {
        let bytes = self.bytes.as_slice();
        if let Some((encoding, _)) = encoding_rs::Encoding::for_bom(bytes)
            && encoding != encoding_rs::UTF_8
        {
            return Some(Cow::Owned(encoding.decode(bytes).0.into_owned().into_bytes()));
        }
        let bytes = bytes.strip_prefix(b"\xef\xbb\xbf").unwrap_or(bytes);
        let head = &bytes[..bytes.len().min(64 * 1024)];
        // A log holds tabs and line ends; other control characters mean that it is no text.
        let control = head.iter().filter(|b| b.is_ascii_control() && !b"\t\r\n\x0c\x1a".contains(b)).count();
        if head.contains(&0) || control * 100 > head.len() {
            return None;
        }
        if !head.contains(&b'\n') && head.contains(&b'\r') {
            return Some(Cow::Owned(bytes.iter().map(|&b| if b == b'\r' { b'\n' } else { b }).collect()));
        }
        Some(Cow::Borrowed(bytes))
    }
}

/// A piece of a text log for people: UTF-8 where it is valid, else Latin-1 (as Windows extends it).
pub(super) fn decode(bytes: &[u8]) -> Cow<'_, str> {
    match std::str::from_utf8(bytes) {
        Ok(text) => Cow::Borrowed(text),
        Err(_) => encoding_rs::WINDOWS_1252.decode_without_bom_handling(bytes).0,
    }
}

fn inflate(name: &str, bytes: &[u8], limit: u64) -> Result<Vec<u8>, LogError> {
    let mut inflated = Vec::new();
    let read =
        flate2::read::MultiGzDecoder::new(bytes).take(limit.saturating_add(1)).read_to_end(&mut inflated);
    match read {
        Ok(length) if length as u64 > limit => {
            let limit = limit >> 20;
            Err(LogError::new(name, format!("the gzip file inflates to more than {limit} MiB"))
                .remedy("inflate it with gunzip and give the file that comes out"))
        }
        Ok(_) => Ok(inflated),
        Err(error) => {
            let what = if error.kind() == ErrorKind::UnexpectedEof { "cut short" } else { "damaged" };
            Err(LogError::new(name, format!("the gzip file is {what}"))
                .remedy("copy it again, or check it with gzip -t"))
        }
    }
}

fn unreadable(name: &str, error: &std::io::Error) -> LogError {
    match error.kind() {
        ErrorKind::NotFound => LogError::new(name, "there is no such file").remedy("check the path"),
        ErrorKind::PermissionDenied => {
            LogError::new(name, "the file may not be read").remedy("check its access rights")
        }
        _ => LogError::new(name, format!("the file cannot be read: {error}")),
    }
}
