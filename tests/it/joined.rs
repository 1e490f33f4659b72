//! Several devices joined by wires: published values of multiple connections, and a calculation of its own for any wiring.

use std::fmt::Write;
use std::fs;
use std::path::PathBuf;

use nalgebra::DMatrix;
use nalgebra::DVector;
use serde_json::Value;

use crate::program::fresh;
use crate::program::run;

/// h/e² with the exact h and e of the SI Brochure (9th edition, 2019).
const KLITZING_OHM: f64 = 6.626_070_15e-34 / (1.602_176_634e-19 * 1.602_176_634e-19);

/// A bar with contacts 1 to 8 clockwise from its left end and one operating point.
fn bar(id: &str, bulk: &str) -> String {
    let mut text = format!(
        "format = 1\n[device]\nid = \"{id}\"\n[mesa]\nshape = \"bar\"\nlength_um = 800\nwidth_um = 100\n\
         [[contact]]\nname = \"1\"\nedge = \"left\"\n"
    );
    let side = |name: usize, edge: &str, x: usize| {
        format!("[[contact]]\nname = \"{name}\"\nedge = \"{edge}\"\nx_um = {x}\nwidth_um = 20\n")
    };
    (2..5).for_each(|name| text += &side(name, "top", 200 * (name - 1)));
    text += "[[contact]]\nname = \"5\"\nedge = \"right\"\n";
    (6..9).for_each(|name| text += &side(name, "bottom", 200 * (9 - name)));
    text + &format!("[[point]]\nname = \"plateau\"\nbulk = {bulk}\n")
}

/// A bench of devices A, B, … from the same bar, with posts and wires (from, to, Ω).
fn bench(devices: usize, posts: &[&str], wires: &[(String, String, f64)]) -> String {
    let names: Vec<String> = (0..devices).map(|at| format!("\"{}\"", (b'A' + at as u8) as char)).collect();
    let files = vec!["\"bar.toml\""; devices].join(", ");
    let mut text =
        format!("format = 1\n[device]\nid = \"bench\"\n[bench]\ndevices = [{files}]\nnames = [{}]\n", names.join(", "));
    if !posts.is_empty() {
        let posts: Vec<String> = posts.iter().map(|post| format!("\"{post}\"")).collect();
        writeln!(text, "posts = [{}]", posts.join(", ")).unwrap();
    }
    for (from, to, ohm) in wires {
        writeln!(text, "[[link]]\nfrom = \"{from}\"\nto = \"{to}\"\nohm = {ohm}").unwrap();
    }
    text
}

fn wire(from: &str, to: &str, ohm: f64) -> (String, String, f64) {
    (from.to_owned(), to.to_owned(), ohm)
}

/// A folder with the bar and a bench file.
fn folder(name: &str, bench: &str) -> PathBuf {
    let folder = fresh(&format!("joined/{name}"));
    fs::write(folder.join("bar.toml"), bar("bar", "2")).unwrap();
    fs::write(folder.join("device.toml"), bench).unwrap();
    folder
}

/// One reading of a bench at both polarities, `+` first.
fn both(name: &str, bench: &str, reading: &str) -> [Value; 2] {
    let answer = run(&folder(name, bench), &format!("expect device.toml --json --reading {reading}")).json();
    [0, 1].map(|at| answer["points"][at]["readings"][0].clone())
}

fn h_per_e2(reading: &Value) -> f64 {
    reading["h_per_e2"].as_f64().unwrap()
}

/// Wires from the drain side of each device to the source side of the next, right for the field toward the reader.
fn series(devices: usize, wires: usize, ohm: f64) -> Vec<(String, String, f64)> {
    let name = |at: usize| (b'A' + at as u8) as char;
    let pair = |at: usize| (0..wires).map(move |n| (at, n));
    let joints = (0..devices - 1).flat_map(pair);
    joints.map(|(at, n)| (format!("{}:{}", name(at), 5 + n), format!("{}:{}", name(at + 1), 1 + n), ohm)).collect()
}

/// F. Delahaye, J. Appl. Phys. 73, 7914 (1993): n wires of resistance ε R_H leave an error of order ε^n. From memory, the
/// fractions from exact algebra: ε/2, ε²/(4(1 + ε)), ε³/(8(1 + 3ε/2 + 3ε²/4)); with ε = 1/100 these are 1/200, 1/40400 and
/// 1/8120600 of 2 R_H.
#[test]
fn two_bars_in_series_err_as_published() {
    let ohm = 0.01 * KLITZING_OHM / 2.0;
    for (wires, one_over) in [(1, 200.0), (2, 40_400.0), (3, 8_120_600.0)] {
        let bench = bench(2, &[], &series(2, wires, ohm));
        let [toward, _] = both(&format!("series-{wires}"), &bench, "A:1-B:5,A:2-B:6");
        let error = h_per_e2(&toward) - 1.0;
        assert!((error * one_over - 1.0).abs() < 1e-7, "{wires} wires: 1/{}", 1.0 / error);
        assert!(toward["exact"].is_null(), "a resistance in Ω is no fraction of h/e²");
    }
}

/// The same source: each bar hangs with n wires on each of two rows of posts; the current enters and leaves at the first
/// posts, the voltage is taken at the last. Equal wires: 2ε for one, nothing at all for more. Wires of r to one bar and 2r to
/// the other: 0.0299029, 4.8522e-5, 7.1724e-7 at ε = 1/100 (exact algebra).
#[test]
fn two_bars_in_parallel_err_as_published() {
    let ohm = 0.01 * KLITZING_OHM / 2.0;
    for (wires, other, wanted, within) in [
        (1, 1.0, 0.02, 1e-12),
        (2, 1.0, 0.0, 1e-14),
        (3, 1.0, 0.0, 1e-14),
        (1, 2.0, 0.029_902_9, 1e-7),
        (2, 2.0, 4.8522e-5, 1e-9),
        (3, 2.0, 7.1724e-7, 1e-11),
    ] {
        let posts: Vec<String> =
            ["S", "D"].iter().flat_map(|row| (1..=wires).map(move |n| format!("{row}{n}"))).collect();
        let mut all = Vec::new();
        for (device, factor) in [("A", 1.0), ("B", other)] {
            for (at, post) in posts.iter().enumerate() {
                let contact = if at < wires { 1 + at } else { 5 + at - wires };
                all.push((format!("{device}:{contact}"), post.clone(), factor * ohm));
            }
        }
        let posts: Vec<&str> = posts.iter().map(String::as_str).collect();
        let reading = format!("S1-D1,S{wires}-D{wires}");
        let [toward, _] = both(&format!("parallel-{wires}-{other}"), &bench(2, &posts, &all), &reading);
        let error = 4.0 * h_per_e2(&toward) - 1.0;
        assert!((error - wanted).abs() < within, "{wires} wires, {other}: {error}");
    }
}

/// A second wire on the wrong side short-circuits: −0.24975 of 2 R_H at ε = 1/1000 (exact algebra). With the field away the
/// probes swap sides: what A:2 and B:6 show at `+`, A:8 and B:4 show at `−`, because both pairs then have the potentials of the
/// current contacts, and a two-terminal resistance is even in the field (H. B. G. Casimir, Rev. Mod. Phys. 17, 343 (1945)).
#[test]
fn a_wire_on_the_wrong_side_shorts_and_the_field_chooses_the_probes() {
    let ohm = 0.001 * KLITZING_OHM / 2.0;
    let right = 0.001 * 0.001 / (4.0 * 1.001);
    for (second, wanted, within) in [
        (("A:6", "B:8"), -0.24975, 5e-6),
        (("A:4", "B:2"), -0.24975, 5e-6),
        (("A:6", "B:2"), right, 1e-13),
        (("A:4", "B:8"), right, 1e-13),
    ] {
        let bench = bench(2, &[], &[wire("A:5", "B:1", ohm), wire(second.0, second.1, ohm)]);
        let name = |probes: &str| format!("second-{}{}-{}", &second.0[2..], &second.1[2..], &probes[2..3]);
        for (polarity, probes, wrong_probes) in [(0, "A:2-B:6", "A:8-B:4"), (1, "A:8-B:4", "A:2-B:6")] {
            let error = |probes: &str| {
                let found = both(&name(probes), &bench, &format!("A:1-B:5,{probes}"));
                h_per_e2(&found[polarity]) - 1.0
            };
            assert!((error(probes) - wanted).abs() < within, "{second:?} {probes}: {}", error(probes));
            assert!(error(wrong_probes).abs() > 0.4, "{second:?} {wrong_probes}: {}", error(wrong_probes));
        }
    }
}

/// Wires of 0 Ω leave fractions. Ten bars in triple series are 10 R_K/2 = 129 064.037 Ω (F. Piquemal et al., IEEE Trans.
/// Instrum. Meas. 48, 296 (1999)); thirteen in parallel R_K/26 = 992.80029 Ω, near 1 kΩ (A. R. Panna et al., Phys. Rev. B 103,
/// 075408 (2021)).
#[test]
fn arrays_without_resistance_are_exact() {
    let [toward, _] = both("ten", &bench(10, &[], &series(10, 3, 0.0)), "A:1-J:5,A:2-J:6");
    assert_eq!(toward["exact"], "5");
    assert!((toward["ohm"].as_f64().unwrap() - 129_064.037_3).abs() < 1e-4);
    let letters = ('A'..='M').map(String::from);
    let wires: Vec<_> =
        letters.flat_map(|bar| [wire(&format!("{bar}:1"), "S", 0.0), wire(&format!("{bar}:5"), "D", 0.0)]).collect();
    for reading in both("thirteen", &bench(13, &["S", "D"], &wires), "S-D,S-D") {
        assert_eq!(reading["exact"], "1/26");
        assert!((reading["ohm"].as_f64().unwrap() - 992.800_29).abs() < 1e-5);
    }
}

/// Two bars in series are 1/ν + 1/ν'; B. I. Halperin's rule for ideal Hall conductors in a row, common practice.
#[test]
fn a_series_has_its_closed_form() {
    let [toward, away] = both("form", &bench(2, &[], &series(2, 1, 0.0)), "A:1-B:5,A:1-B:5");
    for reading in [toward, away] {
        assert_eq!((&reading["exact"], &reading["formula"]), (&"1".into(), &"1/ν(A:bulk) + 1/ν(B:bulk)".into()));
    }
}

/// Kirchhoff's laws with M. Büttiker's currents for the devices: potentials V from G V + Σ g (V − V') = I, the wires with
/// g = R_K/r, solved here with a dense matrix from the devices' own conductances. One node is ground.
fn potentials(point: &Value, wires: &[(usize, usize, f64)], [inlet, outlet]: [usize; 2]) -> DVector<f64> {
    let rows = point["conductance"].as_array().unwrap();
    let entry = |row: usize, column: usize| rows[row][column].as_str().unwrap().parse::<f64>().unwrap();
    let mut matrix = DMatrix::from_fn(rows.len(), rows.len(), entry);
    for &(a, b, ohm) in wires {
        let g = KLITZING_OHM / ohm;
        for (at, other) in [(a, b), (b, a)] {
            matrix[(at, at)] += g;
            matrix[(at, other)] -= g;
        }
    }
    let mut current = DVector::zeros(rows.len());
    current[inlet] = 1.0;
    matrix.row_mut(outlet).fill(0.0);
    matrix[(outlet, outlet)] = 1.0;
    matrix.lu().solve(&current).unwrap()
}

/// Every reading of a bench of three different devices with wires here and there.
#[test]
fn any_wiring_follows_kirchhoff() {
    let folder = fresh("joined/any");
    let files = [("a", "2"), ("b", "4"), ("c", "6")];
    for (id, bulk) in files {
        fs::write(folder.join(format!("{id}.toml")), bar(id, bulk)).unwrap();
    }
    let wires =
        [("a:5", "b:1", 900.0), ("a:6", "c:3", 40.0), ("b:4", "c:1", 7000.0), ("b:7", "P", 2.5), ("c:6", "P", 310.0)];
    let mut text =
        "format = 1\n[device]\nid = \"three\"\n[bench]\ndevices = [\"a.toml\", \"b.toml\", \"c.toml\"]\nposts = \
                    [\"P\"]\n"
            .to_owned();
    for (from, to, ohm) in wires {
        writeln!(text, "[[link]]\nfrom = \"{from}\"\nto = \"{to}\"\nohm = {ohm}").unwrap();
    }
    fs::write(folder.join("device.toml"), text).unwrap();
    for pair in ["a:2-c:8", "b:2-P", "c:5-a:7"] {
        let (from, to) = pair.split_once('-').unwrap();
        let line = format!(
            "expect device.toml --json --reading {pair},a:1-b:6 --reading {pair},c:2-a:3 --reading {pair},P-b:3"
        );
        let answer = run(&folder, &line).json();
        for point in answer["points"].as_array().unwrap() {
            let contacts: Vec<&str> =
                point["contacts"].as_array().unwrap().iter().map(|name| name.as_str().unwrap()).collect();
            let index = |name: &str| contacts.iter().position(|known| *known == name).unwrap();
            let placed: Vec<_> = wires.iter().map(|(a, b, ohm)| (index(a), index(b), *ohm)).collect();
            let found = potentials(point, &placed, [index(from), index(to)]);
            for reading in point["readings"].as_array().unwrap() {
                let [k, l] = [0, 1].map(|at| index(reading["voltage"][at].as_str().unwrap()));
                let wanted = found[k] - found[l];
                assert!((h_per_e2(reading) - wanted).abs() < 1e-12, "{pair} {reading}: {wanted}");
            }
        }
    }
}

/// A cooldown names contacts as the bench does: a line in the current path adds to a two-terminal reading and to no
/// four-terminal one, and a broken lead holds no voltage.
#[test]
fn lines_and_states_belong_to_contacts_of_the_bench() {
    let folder = folder("cooled", &bench(2, &[], &series(2, 2, 3.0)));
    let cooldown = "format = 1\ndevice = \"bench\"\n[cooldown]\nid = \"c\"\n[[line]]\ncontact = \"A:1\"\nohm = 100\n\
                    [[line]]\ncontact = \"A:2\"\nohm = 5000\n[contacts]\n\"B:3\" = \"open\"\n";
    fs::write(folder.join("cooldown.toml"), cooldown).unwrap();
    let line = "expect device.toml cooldown.toml --json --reading A:1-B:5,A:1-B:5 --reading A:1-B:5,A:2-B:6 --reading \
                A:1-B:5,A:2-B:3";
    let answer = run(&folder, line).json();
    let readings = &answer["points"][0]["readings"];
    let added = |at: usize| readings[at]["shown_ohm"].as_f64().unwrap() - readings[at]["ohm"].as_f64().unwrap();
    assert!((added(0) - 100.0).abs() < 1e-8 && added(1).abs() < 1e-8, "{readings}");
    assert_eq!(readings[2]["state"], "floating");
}

/// The conductance matrix is that of the devices; the wires stand beside it.
#[test]
fn machine_output_lists_the_wires() {
    let answer = run(
        &folder("listed", &bench(2, &["P"], &[wire("A:5", "P", 2.5), wire("P", "B:1", 0.0)])),
        "expect device.toml --json",
    )
    .json();
    assert_eq!(
        answer["links"],
        serde_json::json!([{"from": "A:5", "to": "P", "ohm": 2.5}, {"from": "P", "to": "B:1", "ohm": 0.0}])
    );
    let point = &answer["points"][0];
    assert_eq!(point["contacts"].as_array().unwrap().len(), 17);
    assert_eq!(point["conductance"][16], serde_json::json!(vec!["0"; 17]));
}

/// Without named readings the current runs from end to end, or from the first post to the last.
#[test]
fn a_bench_without_named_readings_has_a_usual_set() {
    let first = |name: &str, bench: &str| {
        let answer = run(&folder(name, bench), "expect device.toml --json").json();
        let readings = answer["points"][0]["readings"].as_array().unwrap().clone();
        (readings[0]["current"].clone(), readings.len())
    };
    let series = first("usual", &bench(2, &[], &series(2, 1, 0.0)));
    // The two ends; for each bar its ends, 2 + 2 along, 3 across and 2 + 2 diagonal.
    assert_eq!(series, (serde_json::json!(["A:1", "B:5"]), 1 + 2 * 12));
    let wires = [wire("A:1", "S", 0.0), wire("A:5", "D", 0.0)];
    assert_eq!(first("usual-posts", &bench(1, &["S", "D"], &wires)).0, serde_json::json!(["S", "D"]));
}

/// A sheet of a bench shows every device, its wires, and keeps every file once.
#[test]
fn a_sheet_shows_all_devices_and_wires() {
    let folder = folder("sheet", &bench(2, &[], &series(2, 2, 1.5)));
    run(&folder, "sheet device.toml -o out").answer();
    let record: Value = serde_json::from_slice(&fs::read(folder.join("out/bench_expected_r1.json")).unwrap()).unwrap();
    let page = fs::read_to_string(folder.join("out/bench_expected_r1.html")).unwrap();
    for contact in ["A:1", "A:5", "B:1", "B:5", "B:8"] {
        assert!(page.matches(&format!(">{contact}<")).count() >= 2, "{contact} is not in both drawings");
    }
    assert!(page.contains("Wires: A:5–B:1, A:6–B:2 each 1.5 Ω."));
    assert!(page.contains("No closed form: the resistance of wires is in the reading"));
    let inputs: Vec<&Value> = record["inputs"].as_array().unwrap().iter().map(|input| &input["name"]).collect();
    assert_eq!(inputs, ["device.toml", "bar.toml"]);
    assert!(!run(&folder, "verify out/bench_expected_r1.pdf").answer().is_empty());
}

/// Files are looked up beside the bench; what cannot be read is said where it is named, and two files of one name are told.
#[test]
fn files_of_a_bench_that_cannot_serve_are_named() {
    let folder =
        folder("files", &bench(1, &[], &[]).replace("\"bar.toml\"", "\"bar.toml\", \"sub/bar.toml\", \"no.toml\""));
    let said = run(&folder, "expect device.toml");
    assert_eq!(said.code, 2);
    assert!(said.err.contains("cannot read no.toml") && said.err.contains("device.toml:5"), "{}", said.err);
    fs::create_dir_all(folder.join("a")).unwrap();
    fs::write(folder.join("a/bar.toml"), bar("other", "2")).unwrap();
    fs::write(folder.join("a-bar.toml"), bar("another", "2")).unwrap();
    let text = bench(2, &[], &[]).replace("\"bar.toml\", \"bar.toml\"", "\"a/bar.toml\", \"a-bar.toml\"");
    fs::write(folder.join("device.toml"), text).unwrap();
    let said = run(&folder, "expect device.toml");
    assert!(said.code == 2 && said.err.contains("another file goes onto the sheet as a-bar.toml"), "{}", said.err);
}

/// Steps that follow channels would be wrong at a contact with a wire.
#[test]
fn why_is_not_told_across_wires() {
    let said = run(&folder("why", &bench(2, &[], &series(2, 1, 1.0))), "expect device.toml --why");
    assert!(said.code == 2 && said.err.contains("wires join the devices"), "{}", said.err);
}
