//! Damaged logs of every kind: a reader answers with a log or an error, never with a panic.

use std::path::Path;

use seaplumb::log::{ReadOptions, read_bytes};

/// Linear congruential generator with the constants of Knuth's MMIX: the same damage every time.
struct Random(u64);

impl Random {
    fn below(&mut self, limit: usize) -> usize {
        self.0 = self.0.wrapping_mul(6_364_136_223_846_793_005).wrapping_add(1_442_695_040_888_963_407);
        ((self.0 >> 33) as usize) % limit.max(1)
    }
}

const TEXT: &str = "# dive 7\n# at sea\ntime;pressure;cond;temp;qc;\"note\"\nISO 8601;dbar;mS/cm;degC;;\n\
    2026-03-01T10:00:00Z;0,5;42,5;15,5;1;\"a;b\"\n2026-03-01T10:00:01Z;10,25;42,25;NaN;2;x\n\
    2026-03-01T10:00:02Z;20,125;-999;14,25;4;\n2026-03-01T10:00:03Z;10,5;42,75;14,5;9;\"y\"\n";

/// Reads `rounds` damaged copies; gives how many were read and how many refused.
fn damage(name: &str, bytes: &[u8], rounds: usize, random: &mut Random) -> (usize, usize) {
    let interesting = [0, 1, 0x7f, 0x80, 0xff, b'\n', b'"', b',', b';', b'\t', b'-', b'.', b'9', b'#', b'['];
    let (mut read, mut refused) = (0, 0);
    for _ in 0..rounds {
        let mut copy = bytes.to_vec();
        for _ in 0..=random.below(4) {
            let at = random.below(copy.len());
            match random.below(5) {
                0 => copy.truncate(at),
                1 => copy[at] ^= 1 << random.below(8),
                2 => copy[at] = interesting[random.below(interesting.len())],
                3 => drop(copy.drain(at..(at + 1 + random.below(8)).min(copy.len()))),
                _ => copy.insert(at, interesting[random.below(interesting.len())]),
            }
            if copy.is_empty() {
                break;
            }
        }
        match read_bytes(name, copy, &ReadOptions::default()) {
            Ok(logs) => {
                for log in &logs {
                    let n = log.len();
                    assert!(log.time.as_ref().is_none_or(|time| time.elapsed_s.len() == n));
                    assert!(log.pressure.values.iter().all(|value| !value.is_infinite()));
                    for channel in [&log.temperature, &log.conductivity, &log.salinity].into_iter().flatten()
                    {
                        assert_eq!(channel.values.len(), n);
                        assert!(channel.flags.as_ref().is_none_or(|flags| flags.len() == n));
                    }
                }
                read += 1;
            }
            Err(error) => {
                assert!(!error.problem.is_empty() && error.to_string().starts_with(name));
                refused += 1;
            }
        }
    }
    (read, refused)
}

#[test]
fn damaged_text_is_read_or_refused() {
    let mut random = Random(1);
    assert!(read_bytes("whole", TEXT.as_bytes().to_vec(), &ReadOptions::default()).is_ok());
    let (read, refused) = damage("dive.csv", TEXT.as_bytes(), 20_000, &mut random);
    // The damage is neither harmless nor always fatal.
    assert!(read > 1000 && refused > 1000, "{read} read, {refused} refused");
    let fixed = TEXT.replace(';', "\t").replace(',', ".");
    let (read, refused) = damage("dive.txt", fixed.as_bytes(), 10_000, &mut random);
    assert!(read > 500 && refused > 500, "{read} read, {refused} refused");
}

#[test]
fn damaged_netcdf_is_read_or_refused() {
    let folder = Path::new(env!("CARGO_MANIFEST_DIR")).join("tests/golden");
    let mut random = Random(2);
    let mut files = 0;
    for entry in std::fs::read_dir(folder).expect("the folder") {
        let path = entry.expect("an entry").path();
        if path.extension().is_none_or(|e| e != "nc") {
            continue;
        }
        let bytes = std::fs::read(&path).expect("the file");
        let (read, refused) = damage("cast.nc", &bytes, 3000, &mut random);
        assert!(read > 0 && refused > 100, "{}: {read} read, {refused} refused", path.display());
        files += 1;
    }
    assert_eq!(files, 7);
}

#[test]
fn damaged_whp_exchange_is_read_or_refused() {
    let folder = Path::new(env!("CARGO_MANIFEST_DIR")).join("tests/golden");
    let mut random = Random(4);
    for name in ["whp_cast.csv", "whp_old.csv"] {
        let bytes = std::fs::read(folder.join(name)).expect("the file");
        let (read, refused) = damage("cast.csv", &bytes, 10_000, &mut random);
        assert!(read > 1000 && refused > 1000, "{name}: {read} read, {refused} refused");
    }
}

#[test]
fn damaged_archives_are_read_or_refused() {
    let folder = Path::new(env!("CARGO_MANIFEST_DIR")).join("tests/golden");
    let mut random = Random(5);
    for name in ["casts.zip", "casts_streamed.zip"] {
        let bytes = std::fs::read(folder.join(name)).expect("the file");
        let (read, refused) = damage("casts.zip", &bytes, 10_000, &mut random);
        assert!(read > 100 && refused > 1000, "{name}: {read} read, {refused} refused");
    }
}

#[test]
fn damaged_gzip_is_read_or_refused() {
    let mut gz = flate2::write::GzEncoder::new(Vec::new(), flate2::Compression::default());
    std::io::Write::write_all(&mut gz, TEXT.as_bytes()).expect("in memory");
    let (_, refused) = damage("dive.gz", &gz.finish().expect("in memory"), 5000, &mut Random(3));
    assert!(refused > 1000);
}
