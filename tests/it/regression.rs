//! Faults that were found in use, one case each.

use std::fs;

use crate::program::bar;
use crate::program::fresh;
use crate::program::run;

/// A readings file that is not there is named in the cooldown file: the finding points at that line.
#[test]
fn a_missing_readings_file_is_found_where_it_is_named() {
    let folder = fresh("missing-readings");
    fs::write(folder.join("device.toml"), bar("4", "2", "")).unwrap();
    fs::write(folder.join("cooldown.toml"), "format = 1\ndevice = \"bar\"\nreadings = \"none.csv\"\n").unwrap();
    let ran = run(&folder, "expect device.toml cooldown.toml");
    assert_eq!(ran.code, 2, "{}", ran.err);
    assert!(ran.err.contains("cooldown.toml:3:12") && ran.err.contains("none.csv"), "{}", ran.err);
}

/// Sides just below 100 mm on a grid of 1 nm, with crossings between pixels: the answer is that of a small bar, because
/// ideal readings hold no length. Six-terminal values of 4 over 2: 1/2, and 1/4 along both edges (Landauer–Büttiker,
/// own algebra).
#[test]
fn a_device_of_a_hundred_millimetres_on_a_grid_of_one_nanometre_is_solved() {
    let folder = fresh("hundred-millimetres");
    let small = bar("4", "2", "");
    let (head, _) = small.split_once("[[gate]]").unwrap();
    let head = head
        .replace("length_um = 600", "length_um = 99999.999")
        .replace("_um = 100\n", "_um = 99999.998\nsnap_nm = 1\n");
    let gates = "[[gate]]\nname = \"TG\"\noutline_um = [[249.999, -5], [350.001, -5.001], [360.003, 99999.999], [250, \
                 99999.999]]\n[[gate]]\nname = \"BG\"\noutline_um = [[200.001, 49999.999], [50000.003, 30000.777], \
                 [49000.123, 60000.001]]\n";
    let point = "[[point]]\nname = \"p\"\nbulk = 4\nfillings = { TG = 2, BG = 3, \"TG+BG\" = 1 }\n";
    fs::write(folder.join("device.toml"), format!("{head}{gates}{point}")).unwrap();
    let shown = run(&folder, "expect device.toml").answer();
    for (reading, value) in [("R_14,14", "1/2"), ("R_14,23", "1/4"), ("R_14,65", "1/4"), ("R_14,26", "1/4")] {
        let line = shown.lines().find(|line| line.starts_with(reading)).unwrap();
        assert_eq!(line.split_whitespace().nth(1), Some(value), "{shown}");
    }
}

/// Nothing conducts in the bulk, or every lead is broken: a sheet is still made, and it holds no number for a reading.
#[test]
fn a_device_without_a_path_gets_an_honest_sheet() {
    let folder = fresh("no-path");
    fs::write(folder.join("empty.toml"), bar("0", "2", "")).unwrap();
    fs::write(folder.join("full.toml"), bar("4", "2", "")).unwrap();
    let open: String = (1..=6).map(|contact| format!("\"{contact}\" = \"open\"\n")).collect();
    fs::write(folder.join("open.toml"), format!("format = 1\ndevice = \"bar\"\n[contacts]\n{open}")).unwrap();
    for (files, stem) in [("empty.toml", "bar_expected_r1"), ("full.toml open.toml", "bar_cooldown_r1")] {
        run(&folder, &format!("sheet {files} -o out")).answer();
        let record = fs::read_to_string(folder.join(format!("out/{stem}.json"))).unwrap();
        let record: serde_json::Value = serde_json::from_str(&record).unwrap();
        let rows = record["printed"]["points"][0]["rows"].as_array().unwrap();
        assert_eq!(rows.len(), 7, "{files}");
        for cell in rows.iter().flat_map(|row| [&row["toward"], &row["away"]]) {
            assert_eq!(cell["state"], "no path", "{files}");
            assert!(cell["exact"].is_null() && cell["device"].is_null() && cell["expected"].is_null(), "{files}");
        }
        let shown = run(&folder, &format!("expect {files}")).answer();
        assert!(!shown.lines().filter(|line| line.starts_with("R_14,")).any(|line| line.contains('.')), "{shown}");
    }
}

/// Two contacts have one current pair and one voltage pair: a single reading, h/e² over the filling under the gate.
#[test]
fn two_contacts_have_one_reading() {
    let folder = fresh("two-contacts");
    let six = bar("4", "2", "");
    let (head, contacts) = six.split_once("[[contact]]").unwrap();
    let (_, gate) = contacts.split_once("[[gate]]").unwrap();
    let two = "[[contact]]\nname = \"1\"\nedge = \"left\"\n[[contact]]\nname = \"2\"\nedge = \"right\"\n";
    fs::write(folder.join("device.toml"), format!("{head}{two}[[gate]]{gate}")).unwrap();
    let shown = run(&folder, "expect device.toml --all").answer();
    let rows: Vec<&str> = shown.lines().filter(|line| line.starts_with("R_")).collect();
    assert_eq!(rows, ["R_12,12   1/2  12.9064   1/2  12.9064   1/ν(TG)"]);
    run(&folder, "sheet device.toml -o out").answer();
}

/// A mark for the order of bytes and line ends of another system change nothing.
#[test]
fn line_ends_and_byte_order_marks_change_no_answer() {
    let folder = fresh("line-ends");
    let text = bar("3", "1", "");
    fs::write(folder.join("plain.toml"), &text).unwrap();
    fs::write(folder.join("other.toml"), format!("\u{feff}{}", text.replace('\n', "\r\n"))).unwrap();
    let [plain, other] = ["plain", "other"].map(|name| run(&folder, &format!("expect {name}.toml --json")).answer());
    assert_eq!(plain, other);
}

/// A name in letters that the fonts of a sheet lack is printed by numbers, and the user is told.
#[test]
fn characters_that_a_sheet_cannot_print_are_told() {
    let folder = fresh("letters");
    fs::write(folder.join("other.toml"), bar("4", "2", "").replace("TG", "\"门\"").replace("\"\"门\"\"", "\"门\""))
        .unwrap();
    fs::write(folder.join("greek.toml"), bar("4", "2", "").replace("TG", "\"Ω\"").replace("\"\"Ω\"\"", "\"Ω\""))
        .unwrap();
    let told = |file: &str| run(&folder, &format!("sheet {file} -o out --replace")).err;
    assert!(told("other.toml").contains("门 (U+95E8)"), "{}", told("other.toml"));
    assert_eq!(told("greek.toml"), "");
}

/// Uncertainties written with another coverage factor are printed as standard ones, those of lines as those of the source
/// and of meters: 130 Ω with 4 Ω (k = 2) is 130.0(2.0) Ω.
#[test]
fn instruments_are_listed_with_standard_uncertainties() {
    let folder = fresh("coverage");
    fs::write(folder.join("device.toml"), bar("4", "2", "")).unwrap();
    let cooldown = "format = 1\ndevice = \"bar\"\n[cooldown]\ncoverage_factor = 2\n[source]\ncurrent_nA = 10\nu_current_nA = \
                    0.4\n[[line]]\ncontact = \"1\"\nohm = 130\nu_ohm = 4\n[[meter]]\nname = \"A\"\nu_gain = 0.002\n";
    fs::write(folder.join("cooldown.toml"), cooldown).unwrap();
    run(&folder, "sheet device.toml cooldown.toml -o out").answer();
    let record = fs::read_to_string(folder.join("out/bar_cooldown_r1.json")).unwrap();
    let record: serde_json::Value = serde_json::from_str(&record).unwrap();
    let stated: Vec<f64> = cells(&record["printed"]["instruments"]).filter_map(|cell| cell["u"].as_f64()).collect();
    assert_eq!(stated, [2.0, 0.2, 0.001]);
}

/// Every cell of a list of tables.
fn cells(tables: &serde_json::Value) -> impl Iterator<Item = &serde_json::Value> {
    let rows = tables.as_array().unwrap().iter().flat_map(|table| table["rows"].as_array().unwrap());
    rows.flat_map(|row| row.as_array().unwrap())
}

/// What a meter would show at the polarity that was not measured stood for the first meter, though the row names the one of
/// the other polarity. Meter B shows twice the voltage: filling 4 over 2, R_14,25 at `+` is 1/2, R_14,25 at `−` is 0
/// and R_14,26 is 1/4 and −1/4 (M. Büttiker, Phys. Rev. B 38, 9375 (1988), own algebra): −6.4532 kΩ, shown as −12.9064 kΩ.
#[test]
fn the_meter_of_a_row_is_that_of_both_polarities() {
    let folder = fresh("other-meter");
    fs::write(folder.join("device.toml"), bar("4", "2", "")).unwrap();
    let cooldown = "format = 1\ndevice = \"bar\"\nreadings = \"readings.csv\"\n[[meter]]\nname = \"A\"\n[[meter]]\nname = \
                    \"B\"\ngain = 2\n";
    fs::write(folder.join("cooldown.toml"), cooldown).unwrap();
    let readings = "polarity,i_in,i_out,v_plus,v_minus,value,unit,u,meter\n+,1,4,2,6,12.9064(3),kΩ,,B\n+,1,4,3,5,6.4532(3),kΩ,,A\n";
    fs::write(folder.join("readings.csv"), readings).unwrap();
    run(&folder, "sheet device.toml cooldown.toml -o out").answer();
    let record = fs::read_to_string(folder.join("out/bar_cooldown_r1.json")).unwrap();
    let record: serde_json::Value = serde_json::from_str(&record).unwrap();
    let rows = record["printed"]["points"][0]["rows"].as_array().unwrap();
    let away = |name: &str| {
        let row = rows.iter().find(|row| row["name"] == name).unwrap();
        row["away"]["expected"]["text"].as_str().unwrap().to_owned()
    };
    assert_eq!(away("R_{14,26}"), "−12.90640");
    assert_eq!(away("R_{14,35}"), "−6.45320");
    let taken = &record["points"][0]["polarities"][1]["as_taken"];
    assert_eq!(taken[0]["meter"], "B");
    assert!((taken[0]["shown_ohm"].as_f64().unwrap() + 25812.807459 / 2.0).abs() < 1e-3, "{taken}");
    assert_eq!(record["points"][0]["polarities"][0]["as_taken"].as_array().unwrap().len(), 0);
}
