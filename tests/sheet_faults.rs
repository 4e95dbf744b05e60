//! What is said of a sheet that is wrong: where, what, and what would be right.

#[path = "support/cruise.rs"]
mod cruise;

use cruise::Cruise;

/// Each kind of fault, in full.
#[test]
fn faults_say_where_and_what_would_be_right() {
    let cases: &[(&str, &str)] = &[
        (
            "[surface]\n\nair_presure_hpa = 1009.3\n",
            "s.toml:3:1: [surface] has no key 'air_presure_hpa'
  | air_presure_hpa = 1009.3
  | ^^^^^^^^^^^^^^^
  the nearest is 'air_pressure_hpa'; known are air_pressure_hpa, u_air_pressure_hpa, water_level_m, u_water_level_m, datum, geoid_height_m, u_geoid_height_m",
        ),
        (
            "[statoin]\nlatitude = 3\n",
            "s.toml:1:2: a sheet has no section 'statoin'
  | [statoin]
  |  ^^^^^^^
  the nearest is 'station'; known are station, log, pressure_sensor, surface, gravity, vehicle, water, uncertainty, cast",
        ),
        (
            "latitude = 3\n",
            "s.toml:1:1: a sheet has no section 'latitude'
  | latitude = 3
  | ^^^^^^^^
  it belongs in [station]",
        ),
        (
            "[surface]\nu_anomaly_mgal = 3\n",
            "s.toml:2:1: [surface] has no key 'u_anomaly_mgal'
  | u_anomaly_mgal = 3
  | ^^^^^^^^^^^^^^
  it belongs in [gravity]",
        ),
        (
            "[uncertainty]\nsurface_gravty = 8\n",
            "s.toml:2:1: [uncertainty] has no key 'surface_gravty'
  | surface_gravty = 8
  | ^^^^^^^^^^^^^^
  the nearest is 'surface_gravity'; known are pressure_calibration, pressure_noise, tare, air_pressure, temperature_calibration, \
conductivity_calibration, salinity_calibration, salinity_composition, equation_of_state, profile_representativeness, surface_gap, \
surface_gravity, gravity_gradient, geoid_height, position, water_level, reference_offset, peak_estimate, integration",
        ),
        (
            "[station]\nlatitude = 91.5\n",
            "s.toml:2:12: 'latitude': expected a number, -90 to 90 degrees, found 91.5
  | latitude = 91.5
  |            ^^^^",
        ),
        (
            "[station]\nlatitude = nan\n",
            "s.toml:2:12: 'latitude': expected a number, -90 to 90 degrees, found nan
  | latitude = nan
  |            ^^^",
        ),
        (
            "[surface]\nair_pressure_hpa = 101_325 # Pa\n",
            "s.toml:2:20: 'air_pressure_hpa': expected a number, 500 to 1100 hPa, found 101325
  | air_pressure_hpa = 101_325 # Pa
  |                    ^^^^^^^",
        ),
        (
            "[gravity]\nu_anomaly_mgal = -8\n",
            "s.toml:2:18: 'u_anomaly_mgal': expected a number, 0 mGal or more, found -8
  | u_anomaly_mgal = -8
  |                  ^^",
        ),
        (
            "[station]\nlongitude = \"-176.18\"\n",
            "s.toml:2:13: 'longitude': expected a number, -180 to 360 degrees, found the text \"-176.18\"
  | longitude = \"-176.18\"
  |             ^^^^^^^^^
  numbers stand without quotes",
        ),
        (
            "[station]\nname = 7\n",
            "s.toml:2:8: 'name': expected a text in quotes, found 7
  | name = 7
  |        ^",
        ),
        (
            "[log]\npressure = \"absolut\"\n",
            "s.toml:2:12: 'pressure': expected \"absolute\", \"sea\" or \"gauge\", found the text \"absolut\"
  | pressure = \"absolut\"
  |            ^^^^^^^^^
  the nearest is \"absolute\"",
        ),
        (
            "[log]\ncolumns = { presure = \"prs:MPa\" }\n",
            "s.toml:2:13: 'columns': no role of a column is called 'presure'
  | columns = { presure = \"prs:MPa\" }
  |             ^^^^^^^
  the nearest is 'pressure'; known are time, pressure, conductivity, temperature, salinity, altitude, pitch, roll, latitude, longitude, flag",
        ),
        (
            "[log]\ncolumns = { pressure = 2 }\n",
            "s.toml:2:24: 'columns': expected the name or number of the column in quotes, with its unit after a colon or without, found 2
  | columns = { pressure = 2 }
  |                        ^",
        ),
        (
            "[log]\nmissing = -99\n",
            "s.toml:2:11: 'missing': expected a list of texts such as [\"-99\", \"x\"], found -99
  | missing = -99
  |           ^^^",
        ),
        (
            "[log]\nstart_time = 2026-03-01T10:20:30\n",
            "s.toml:2:14: 'start_time': expected a time by ISO 8601 with its offset from UTC, such as 2026-03-01T10:20:30Z, \
found the time 2026-03-01T10:20:30
  | start_time = 2026-03-01T10:20:30
  |              ^^^^^^^^^^^^^^^^^^^",
        ),
        (
            "[pressure_sensor]\ntare = \"deck\"\n",
            "s.toml:2:8: 'tare': expected \"auto\", \"none\" or a number, -200 to 200 dbar, found the text \"deck\"
  | tare = \"deck\"
  |        ^^^^^^",
        ),
        (
            "[surface]\nwater_level_m = \"tide.csv\"\n",
            "s.toml:2:17: 'water_level_m': series of water level are not read yet
  | water_level_m = \"tide.csv\"
  |                 ^^^^^^^^^^
  give one number in m for the time of the deepest depth",
        ),
        (
            "[water]\nprofile = \"near.csv\"\n",
            "s.toml:2:11: 'profile': there is no file near.csv
  | profile = \"near.csv\"
  |           ^^^^^^^^^^
  the name is counted from the folder of the sheet",
        ),
        (
            "[gravity]\nanomaly_mgal = -182\nu_anomaly_mgal = 8\ndisturbance_mgal = -170\n",
            "s.toml:4:1: 'disturbance_mgal' cannot stand beside 'anomaly_mgal' of line 2: both settle surface gravity
  | disturbance_mgal = -170
  | ^^^^^^^^^^^^^^^^
  keep one of them",
        ),
        (
            "[pressure_sensor]\nu_relative = 5e-5\n[uncertainty]\npressure_calibration = 1\n",
            "s.toml:4:1: 'pressure_calibration' cannot stand beside 'u_relative' of line 2: both settle the uncertainty 'pressure_calibration'
  | pressure_calibration = 1
  | ^^^^^^^^^^^^^^^^^^^^
  keep one of them",
        ),
        (
            "station = 3\n",
            "s.toml:1:11: 'station': expected a section [station], found 3
  | station = 3
  |           ^",
        ),
        (
            "[cast]\nlog = \"K.csv\"\n",
            "s.toml:1:1: a cast is a table of its own: [[cast]], with two brackets
  | [cast]
  | ^^^^^^",
        ),
        (
            "[[cast]]\nlatitude = 3\n",
            "s.toml:1:1: this cast does not say which log it is about
  | [[cast]]
  | ^^^^^^^^
  add its file, or a pattern for several: log = \"casts/*.csv\"",
        ),
        (
            "[[cast]]\nlog = \"K.csv\"\nair_pressure_hpa = 1000\n",
            "s.toml:3:1: [[cast]] has no key 'air_pressure_hpa'
  | air_pressure_hpa = 1000
  | ^^^^^^^^^^^^^^^^
  it belongs in [cast.surface]",
        ),
        (
            "[[cast]]\n[cast.log]\npressure = \"sea\"\n",
            "s.toml:2:1: 'log': expected the file of the cast, or a pattern for several, in quotes, found a table
  | [cast.log]
  | ^^^^^^^^^^
  the keys of [log] stand directly in [[cast]]",
        ),
        (
            "[[cast]]\nlog = \"*.nc\"\n",
            "s.toml:2:7: no file matches '*.nc'
  | log = \"*.nc\"
  |       ^^^^^^
  patterns are counted from the folder of the sheet; '*' stands for any part of one name, '?' for one character",
        ),
        (
            "[station]\nlatitude = 3\n",
            "s.toml: the sheet names no log
  add [[cast]] with log = \"FILE\", or name the logs in the call",
        ),
        // Two faults, from the top.
        (
            "[water]\nleg = \"dawn\"\n[station]\nlatitude = true\n",
            "s.toml:2:7: 'leg': expected \"down\", \"up\" or \"both\", found the text \"dawn\"
  | leg = \"dawn\"
  |       ^^^^^^
  the nearest is \"down\"
s.toml:4:12: 'latitude': expected a number, -90 to 90 degrees, found true
  | latitude = true
  |            ^^^^",
        ),
    ];
    for (sheet, expected) in cases {
        let cruise = Cruise::new(&[("s.toml", sheet)]);
        let message = cruise.refused(&["deepest", "--sheet", "s.toml"]);
        assert_eq!(message, format!("seaplumb: {expected}\n"), "{sheet}");
    }
}

/// The words after the colon are those of the TOML parser; place, picture and hint are ours.
#[test]
fn what_is_no_toml_is_shown() {
    for (sheet, place, picture) in [
        ("[station]\nlatitude = -31,52\n", "2:", "  | latitude = -31,52\n"),
        ("[station]\nlatitude = -31.5\nlatitude = 2\n", "3:1", "  | latitude = 2\n  | ^^^^^^^^\n"),
        ("[station\n", "1:", "  | [station\n"),
        ("[station]\r\nname = K07\r\n", "2:8", "  | name = K07\n  |        ^^^\n"),
    ] {
        let cruise = Cruise::new(&[("s.toml", sheet)]);
        let message = cruise.refused(&["reduce", "--sheet", "s.toml"]);
        assert!(message.starts_with(&format!("seaplumb: s.toml:{place}")), "{message}");
        for part in ["this is not TOML: ", picture, "numbers have a decimal point"] {
            assert!(message.contains(part), "expected '{part}' in:\n{message}");
        }
    }
}

#[test]
fn a_sheet_that_is_not_there_or_no_text() {
    let cruise = Cruise::new(&[]);
    let message = cruise.refused(&["deepest", "--sheet", "nowhere.toml"]);
    assert!(message.starts_with("seaplumb: nowhere.toml: the sheet cannot be read: "), "{message}");
    std::fs::write(cruise.path("latin.toml"), b"[station]\nname = \"K\xf6\"\n").expect("a file");
    assert_eq!(
        cruise.refused(&["deepest", "--sheet", "latin.toml"]),
        "seaplumb: latin.toml: line 2 is not UTF-8 text\n  save the sheet as UTF-8\n"
    );
}
