//! Mistakes in delimited text logs: each has its message, and no row is lost silently.

mod support;

use seaplumb::log::{Flag, RowLines};
use support::logs::{one, options, read, read_with, values};

// --- mistakes ------------------------------------------------------------------------------------

struct Mistake {
    text: &'static str,
    columns: &'static [&'static str],
    line: Option<u64>,
    column: Option<usize>,
    problem: &'static [&'static str],
    remedy: &'static [&'static str],
}

const MISTAKES: &[Mistake] = &[
    Mistake { text: "", columns: &[], line: None, column: None, problem: &["empty"], remedy: &["copied"] },
    Mistake {
        text: " \n\n",
        columns: &[],
        line: None,
        column: None,
        problem: &["empty"],
        remedy: &["copied"],
    },
    Mistake {
        text: "just some words\nand more of them\n",
        columns: &[],
        line: None,
        column: None,
        problem: &["no row of numbers"],
        remedy: &["one sample per line"],
    },
    Mistake {
        text: "PK\x03\x04rest",
        columns: &[],
        line: None,
        column: None,
        problem: &["zip archive"],
        remedy: &["unpack"],
    },
    Mistake {
        text: "\0\x01\x02\x03binary\0\0",
        columns: &[],
        line: None,
        column: None,
        problem: &["neither text nor NetCDF"],
        remedy: &["delimited text"],
    },
    Mistake {
        text: "time_s,pressure\n0,1\n1,2\n",
        columns: &[],
        line: None,
        column: None,
        problem: &["unit of the pressure column 'pressure' cannot be told"],
        remedy: &["dbar, bar, mbar, hPa, kPa, MPa, Pa, psi, atm", "--column pressure=pressure:dbar"],
    },
    Mistake {
        text: "pressure [counts]\n1\n2\n",
        columns: &[],
        line: None,
        column: None,
        problem: &["'counts' is not a known unit of pressure"],
        remedy: &["--column pressure=pressure:dbar"],
    },
    Mistake {
        text: "pressure_dbar,cond\n1,2\n2,3\n",
        columns: &[],
        line: None,
        column: None,
        problem: &["unit of the conductivity column 'cond'"],
        remedy: &["mS/cm, S/m, uS/cm", "--column conductivity=cond:mS/cm"],
    },
    Mistake {
        text: "pressure_dbar,temp\n1,2\n2,3\n",
        columns: &[],
        line: None,
        column: None,
        problem: &["unit of the temperature column 'temp'"],
        remedy: &["degC, IPTS-68, K, degF", "--column temperature=temp:degC"],
    },
    Mistake {
        text: "time,pressure_dbar\n1,2\n2,3\n",
        columns: &[],
        line: None,
        column: None,
        problem: &["unit of the time column 'time'"],
        remedy: &["s, min, h, day", "--column time=time:s"],
    },
    Mistake {
        text: "pressure_dbar,salinity [g/kg]\n1,2\n2,3\n",
        columns: &[],
        line: None,
        column: None,
        problem: &["'g/kg' is not a known unit of salinity"],
        remedy: &["--column salinity=salinity:1"],
    },
    Mistake {
        text: "0,0.5,15.5\n1,10.25,14.25\n",
        columns: &[],
        line: Some(1),
        column: None,
        problem: &["no header line names the 3 columns"],
        remedy: &["--column pressure=2:dbar"],
    },
    Mistake {
        text: "a;b\n1;2\n2;3\n",
        columns: &[],
        line: None,
        column: None,
        problem: &["no column looks like pressure", "'a', 'b'"],
        remedy: &["--column pressure=a:dbar"],
    },
    Mistake {
        text: "prs [dbar],pressure [MPa]\n1,2\n2,3\n",
        columns: &[],
        line: None,
        column: None,
        problem: &["2 columns look like pressure", "'prs [dbar]', 'pressure [MPa]'"],
        remedy: &["--column pressure=prs"],
    },
    Mistake {
        text: "prs,tmp\n1,2\n2,3\n",
        columns: &["pressure=press:dbar"],
        line: None,
        column: None,
        problem: &["'press'", "no such column"],
        remedy: &["'prs', 'tmp'"],
    },
    Mistake {
        text: "time_s,pressure_dbar\n0,1\n1,x2\n2,3\n",
        columns: &[],
        line: Some(3),
        column: Some(3),
        problem: &["'x2' in the column 'pressure_dbar' is not a number"],
        remedy: &["--missing x2"],
    },
    Mistake {
        text: "time_s,pressure_dbar\n0,abc\n1,2\n2,3\n",
        columns: &[],
        line: Some(2),
        column: Some(3),
        problem: &["'abc'"],
        remedy: &["--missing abc"],
    },
    Mistake {
        text: "time_s,pressure_dbar\n0,1\n1,inf\n2,3\n",
        columns: &[],
        line: Some(3),
        column: Some(3),
        problem: &["'inf'", "not a finite number"],
        remedy: &["--missing inf"],
    },
    Mistake {
        text: "time_s,pressure_dbar\n0,1\n1,1e400\n2,3\n",
        columns: &[],
        line: Some(3),
        column: Some(3),
        problem: &["'1e400'", "not a finite number"],
        remedy: &["correct it"],
    },
    Mistake {
        text: "time_s,pressure_dbar,note\n0,1,a\n1\n2,3,b\n",
        columns: &[],
        line: Some(3),
        column: None,
        problem: &["1 of the 3 cells that the header names"],
        remedy: &["complete the row"],
    },
    Mistake {
        text: "time_s,pressure_dbar\n0,1\n1,2,7\n2,3\n",
        columns: &[],
        line: Some(3),
        column: Some(5),
        problem: &["more than the 2 cells that the header names"],
        remedy: &["comma", "quotes"],
    },
    Mistake {
        text: "time_s,pressure_dbar,note\n0,1,\"a\n1,2,b\n2,3,c\n",
        columns: &[],
        line: Some(2),
        column: Some(5),
        problem: &["quote is not closed"],
        remedy: &["close it"],
    },
    Mistake {
        text: "time,pressure_dbar\n2026-03-01T10:00:00Z,1\n2026-02-30T10:00:01Z,2\n2026-03-01T10:00:02Z,2\n",
        columns: &[],
        line: Some(3),
        column: Some(1),
        problem: &["'2026-02-30T10:00:01Z'", "ISO 8601"],
        remedy: &["correct it"],
    },
    Mistake {
        text: "time,pressure_dbar\n01/03/2026 10:00:00,1\n01/03/2026 10:00:01,2\n",
        columns: &[],
        line: Some(2),
        column: Some(1),
        problem: &["'01/03/2026 10:00:00' in the column 'time'", "ISO 8601"],
        remedy: &["correct it"],
    },
    Mistake {
        text: "pressure_dbar,qc\n1,1\n2,12\n3,1\n",
        columns: &[],
        line: Some(3),
        column: Some(3),
        problem: &["'12' in the column 'qc' is not a flag from 0 to 9"],
        remedy: &["correct it"],
    },
    Mistake {
        text: "time_s;pressure_dbar\n0,5;1,5\n1,5;1.234\n2,5;2,5\n",
        columns: &[],
        line: Some(3),
        column: Some(5),
        problem: &["'1.234'", "not a number"],
        remedy: &["correct it"],
    },
    Mistake {
        text: "time,pressure_dbar\n2026-03-01,1\n2026-03-01,2\n",
        columns: &[],
        line: None,
        column: None,
        problem: &["'time' holds dates without a time of day"],
        remedy: &["--column time=NAME"],
    },
];

#[test]
fn every_mistake_has_its_message() {
    for mistake in MISTAKES {
        let Err(error) = read_with(mistake.text, &options(mistake.columns)) else {
            panic!("{:?} was read", mistake.text);
        };
        assert_eq!(error.file, "dive.csv");
        let place = error.place.as_deref();
        assert_eq!(place.map(|p| p.line), mistake.line, "{error}");
        assert_eq!(place.and_then(|p| p.column), mistake.column, "{error}");
        for part in mistake.problem {
            assert!(error.problem.contains(part), "no {part:?} in: {error}");
        }
        for part in mistake.remedy {
            assert!(error.remedy.as_deref().unwrap_or("").contains(part), "no {part:?} in: {error}");
        }
    }
}

#[test]
fn the_caret_stands_under_the_cell() {
    let error =
        read("time_s,pressure_dbar,depth\n0,1,2\n°,12x,4\n1,1,1\n").expect_err("a bad cell").to_string();
    // The first bad cell of the line is the time.
    assert!(error.starts_with("dive.csv:3:1: '°' in the column 'time_s' is not a number"), "{error}");
    let error = read("note,pressure_dbar\n°,1\n°,12x\n°,3\n").expect_err("a bad cell").to_string();
    assert!(error.contains("dive.csv:3:3: ") && error.contains("\n  | °,12x\n  |   ^^^\n"), "{error}");
}

#[test]
fn a_header_without_rows_is_an_error() {
    let error = read("time_s,pressure_dbar\n").expect_err("no rows").to_string();
    assert!(error.contains("no row of numbers was found"), "{error}");
}

#[test]
fn a_last_row_that_was_cut_off_is_left_out_with_a_warning() {
    for tail in ["1", "1,", "1,-", "\"1"] {
        let log = one(format!("time_s,pressure_dbar\n0,1\n0.5,2\n{tail}"));
        assert_eq!(log.pressure.values, [1.0, 2.0], "{tail}");
        assert_eq!(log.time.as_ref().expect("a time").elapsed_s, [0.0, 0.5], "{tail}");
        assert_eq!(log.lines, RowLines::Contiguous { first: 2 }, "{tail}");
        assert_eq!(log.warnings[0].key, "last_row_incomplete", "{tail}");
        assert!(log.warnings[0].cause.contains("(4)"), "{}", log.warnings[0]);
    }
    // With a line end the same row is a mistake.
    assert!(read("time_s,pressure_dbar\n0,1\n0.5,2\n1\n").is_err());
    // A missing value at the end of the last line is no cut where the lines above end so, too.
    assert_eq!(one("pressure_dbar,temp_degC\n1,\n2,").len(), 2);
    // Only the last cell can be cut.
    assert!(read("time_s,pressure_dbar\n0,1\n0.5,2\nx,3").is_err());
}

// --- nothing is lost silently --------------------------------------------------------------------

/// A long log with a mistake far from its beginning and its end.
fn long(lines: usize, at: usize, broken: &str) -> String {
    let mut text = String::from("time_s,pressure_dbar\n");
    for i in 0..lines {
        text += &if i == at { format!("{broken}\n") } else { format!("{i},{}.5\n", i * 2) };
    }
    text
}

#[test]
fn a_mistake_is_found_wherever_it_stands() {
    for lines in [5, 100, 40_000] {
        for at in [0, 1, lines / 2, lines - 2] {
            for broken in ["7", "7,8,9", "7,x", "*7,8", "time_s,pressure_dbar", "7;8", "\"7,8"] {
                // The header twice in a row hides nothing.
                if at == 0 && broken.starts_with("time_s") {
                    assert_eq!(one(long(lines, at, broken)).len(), lines - 1);
                    continue;
                }
                let error = read(long(lines, at, broken)).expect_err("a mistake");
                let line = error.place.as_ref().map(|place| place.line);
                assert_eq!(line, Some(at as u64 + 2), "{broken:?} in row {at} of {lines}: {error}");
            }
        }
        assert_eq!(one(long(lines, usize::MAX, "")).len(), lines);
    }
}

#[test]
fn rows_above_the_header_are_left_out_with_a_warning() {
    let log = one("0,1.5\n1,2.5\ntime_s,pressure_dbar\n2,3.5\n3,4.5\n");
    assert_eq!(log.pressure.values, [3.5, 4.5]);
    assert_eq!(log.warnings[0].key, "rows_above_header");
    assert!(log.warnings[0].cause.starts_with("2 lines"), "{}", log.warnings[0]);
}

#[test]
fn a_log_without_a_header_is_read_from_its_first_row() {
    let mut text = String::new();
    for i in 0..30 {
        text += &if i == 12 { "12\n".to_string() } else { format!("{i} {}\n", i * 2) };
    }
    let error = read_with(&text, &options(&["pressure=2:dbar"])).expect_err("a short row");
    assert_eq!(error.place.as_ref().map(|place| place.line), Some(13), "{error}");
}

#[test]
fn preambles_of_all_kinds_are_passed_over() {
    let rows = "0 1.5 10\n1 2.5 11\n2 3.5 12\n";
    for preamble in [
        "Serial 1234\nDate 2026-03-01\nCast 5 of 7\n\ntime_s pressure_dbar temp_degC\n",
        "* header\n* t = 1 s\n# time_s pressure_dbar temp_degC\n",
        "pressure sensor 7\n% time_s pressure_dbar temp_degC\n",
        "calibration: 1 2 3 4 5 6\nthe pressure and temperature of the dive\ntime_s pressure_dbar temp_degC\n",
        "time pressure temp\n[s] [dbar] [deg C]\n",
    ] {
        let log = one(format!("{preamble}{rows}"));
        assert_eq!(log.pressure.values, [1.5, 2.5, 3.5], "{preamble}");
        assert_eq!(values(&log.temperature), [10.0, 11.0, 12.0], "{preamble}");
        assert!(log.warnings.is_empty(), "{preamble}: {:?}", log.warnings);
    }
}

#[test]
fn cells_with_decimal_commas_in_quotes() {
    let log = one("\"time_s\",\"pressure_dbar\"\n\"0,5\",\"1,25\"\n\"1,5\",\"2,25\"\n");
    assert_eq!(log.pressure.values, [1.25, 2.25]);
    assert_eq!(log.format, "delimited text, comma, decimal comma");
}

#[test]
fn flags_with_names_of_woce_follow_the_woce_scheme() {
    let log = one("CTDPRS [dbar],CTDPRS_FLAG_W\n1,2\n2,1\n3,7\n4,5\n");
    use Flag::*;
    assert_eq!(log.pressure.flags, Some(vec![Good, NotEvaluated, Good, Missing]));
    assert!(log.warnings.is_empty(), "{:?}", log.warnings);
}
