//! The table of contents of a zip archive, and its entries (PKWARE, ".ZIP File Format Specification", APPNOTE 6.3).
//!
//! Nothing that an archive says of itself is believed: places are checked against its length, sizes are limits and not
//! promises, names are words for messages and never paths.

use std::io::Read;

use crate::log::input::decode;

/// One entry of the table of contents.
#[derive(Debug, Clone, PartialEq, Eq)]
pub(super) struct Entry {
    /// Its name, without control characters, shortened when long.
    pub name: String,
    encrypted: bool,
    method: u16,
    crc: u32,
    packed: u64,
    size: u64,
    /// Where its local header stands.
    offset: u64,
}

/// Why an entry gives no bytes.
#[derive(Debug, Clone, PartialEq, Eq)]
pub(super) enum Refusal {
    /// It inflates beyond the limit.
    TooLarge,
    /// Anything else, in words.
    Other(&'static str),
}

/// Characters of a name that are kept.
const NAME: usize = 200;

const END: [u8; 4] = *b"PK\x05\x06";
const END_64: [u8; 4] = *b"PK\x06\x06";
const LOCATOR_64: [u8; 4] = *b"PK\x06\x07";
const CENTRAL: [u8; 4] = *b"PK\x01\x02";
const LOCAL: [u8; 4] = *b"PK\x03\x04";

/// `N` bytes at `at`, lowest first, as a number.
fn number<const N: usize>(bytes: &[u8], at: usize) -> Option<u64> {
    let mut all = [0; 8];
    all.get_mut(..N)?.copy_from_slice(bytes.get(at..at.checked_add(N)?)?);
    Some(u64::from_le_bytes(all))
}

fn marked(bytes: &[u8], at: usize, mark: [u8; 4]) -> Option<()> {
    (bytes.get(at..at.checked_add(4)?)? == mark).then_some(())
}

/// The table of contents; `None` when it is not there or does not hold together.
pub(super) fn entries(bytes: &[u8]) -> Option<Vec<Entry>> {
    let end = end(bytes)?;
    let (mut count, mut at) = (number::<2>(bytes, end + 10)?, number::<4>(bytes, end + 16)?);
    if count == 0xffff || at == 0xffff_ffff {
        // The wide form of the end, when there is one.
        if let Some(wide) = end_64(bytes, end) {
            (count, at) = (number::<8>(bytes, wide + 32)?, number::<8>(bytes, wide + 48)?);
        }
    }
    let mut at = usize::try_from(at).ok()?;
    // The count is not trusted with memory.
    let mut entries = Vec::new();
    for _ in 0..count {
        let (entry, next) = entry(bytes, at)?;
        entries.push(entry);
        at = next;
    }
    Some(entries)
}

/// Where the end record stands: the last one whose comment reaches to the end of the file.
fn end(bytes: &[u8]) -> Option<usize> {
    const SIZE: usize = 22;
    let last = bytes.len().checked_sub(SIZE)?;
    let first = last.saturating_sub(0xffff);
    (first..=last).rev().find(|&at| {
        marked(bytes, at, END).is_some()
            && number::<2>(bytes, at + 20)
                .is_some_and(|comment| at as u64 + SIZE as u64 + comment <= bytes.len() as u64)
    })
}

fn end_64(bytes: &[u8], end: usize) -> Option<usize> {
    let locator = end.checked_sub(20)?;
    marked(bytes, locator, LOCATOR_64)?;
    let at = usize::try_from(number::<8>(bytes, locator + 8)?).ok()?;
    marked(bytes, at, END_64)?;
    Some(at)
}

/// The entry whose record stands at `at`, and where the next record stands.
fn entry(bytes: &[u8], at: usize) -> Option<(Entry, usize)> {
    marked(bytes, at, CENTRAL)?;
    let (name_length, extra_length, comment_length) = (
        number::<2>(bytes, at + 28)? as usize,
        number::<2>(bytes, at + 30)? as usize,
        number::<2>(bytes, at + 32)? as usize,
    );
    let name_at = at + 46;
    let extra_at = name_at + name_length;
    let name = decode(bytes.get(name_at..extra_at)?);
    let name = name.chars().take(NAME).map(|c| if c.is_control() { '\u{fffd}' } else { c }).collect();
    let extra = bytes.get(extra_at..extra_at + extra_length)?;
    let (packed, size, offset) =
        (number::<4>(bytes, at + 20)?, number::<4>(bytes, at + 24)?, number::<4>(bytes, at + 42)?);
    let mut wide = wide_numbers(extra);
    let mut widened =
        |narrow: u64| if narrow == 0xffff_ffff { wide.next().unwrap_or(narrow) } else { narrow };
    // Their order in the wide field is this one.
    let size = widened(size);
    let packed = widened(packed);
    let offset = widened(offset);
    let entry = Entry {
        name,
        encrypted: number::<2>(bytes, at + 8)? & 1 == 1,
        method: number::<2>(bytes, at + 10)? as u16,
        crc: number::<4>(bytes, at + 16)? as u32,
        packed,
        size,
        offset,
    };
    Some((entry, extra_at + extra_length + comment_length))
}

/// The numbers of the extra field 1, which hold what does not fit 32 bits.
fn wide_numbers(mut extra: &[u8]) -> impl Iterator<Item = u64> + '_ {
    let mut found: &[u8] = &[];
    while let (Some(id), Some(length)) = (number::<2>(extra, 0), number::<2>(extra, 2)) {
        let Some(field) = extra.get(4..4 + length as usize) else { break };
        if id == 1 {
            found = field;
        }
        extra = &extra[4 + length as usize..];
    }
    found.chunks_exact(8).filter_map(|chunk| number::<8>(chunk, 0))
}

impl Entry {
    /// What the entry holds, at most `limit` bytes.
    pub fn bytes(&self, archive: &[u8], limit: u64) -> Result<Vec<u8>, Refusal> {
        const STORED: u16 = 0;
        const DEFLATED: u16 = 8;
        if self.encrypted {
            return Err(Refusal::Other("this entry of the archive is encrypted"));
        }
        let damaged = Refusal::Other("this entry of the archive is damaged");
        let packed = self.packed(archive).ok_or(damaged.clone())?;
        let mut bytes = Vec::new();
        let source: &mut dyn Read = match self.method {
            STORED => &mut { packed },
            DEFLATED => &mut flate2::read::DeflateDecoder::new(packed),
            _ => {
                return Err(Refusal::Other(
                    "this entry of the archive is packed in a way other than deflate",
                ));
            }
        };
        source.take(limit.saturating_add(1)).read_to_end(&mut bytes).map_err(|_| damaged.clone())?;
        if bytes.len() as u64 > limit {
            return Err(Refusal::TooLarge);
        }
        let mut crc = flate2::Crc::new();
        crc.update(&bytes);
        if bytes.len() as u64 != self.size || crc.sum() != self.crc {
            return Err(damaged);
        }
        Ok(bytes)
    }

    fn packed<'a>(&self, archive: &'a [u8]) -> Option<&'a [u8]> {
        let at = usize::try_from(self.offset).ok()?;
        marked(archive, at, LOCAL)?;
        // The local header repeats name and extra field, the latter with a length of its own.
        let begin =
            at + 30 + number::<2>(archive, at + 26)? as usize + number::<2>(archive, at + 28)? as usize;
        archive.get(begin..begin.checked_add(usize::try_from(self.packed).ok()?)?)
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn what_is_cut_or_empty_has_no_contents() {
        assert_eq!(entries(b""), None);
        assert_eq!(entries(b"PK\x03\x04rest"), None);
        let empty = [b"PK\x05\x06".as_slice(), &[0; 18]].concat();
        assert_eq!(entries(&empty), Some(vec![]));
        assert_eq!(entries(&empty[..21]), None);
    }

    #[test]
    fn a_wide_field_is_read_past_others() {
        let extra =
            [&[9, 0, 2, 0, 7, 7, 1, 0, 16, 0][..], &5_u64.to_le_bytes(), &6_u64.to_le_bytes()].concat();
        assert_eq!(wide_numbers(&extra).collect::<Vec<_>>(), [5, 6]);
        assert_eq!(wide_numbers(&extra[..12]).count(), 0);
    }

    #[test]
    fn numbers_beyond_the_end_are_none() {
        assert_eq!(number::<4>(&[1, 0, 0, 0, 2], 0), Some(1));
        assert_eq!(number::<4>(&[1, 0, 0, 0, 2], 2), None);
        assert_eq!(number::<2>(&[1], usize::MAX), None);
    }
}
