//! A chip drawing tells the truth: the conductance matrix is rebuilt from the finished scene alone and compared with the
//! solver's, and the scene is checked for what must never happen on paper.

use edgesheet::device::ContactIdx;
use edgesheet::figure::ChipDrawing;
use edgesheet::figure::draw_chip;
use edgesheet::figure::scene::Mark;
use edgesheet::figure::scene::Role;
use edgesheet::figure::scene::Scene;
use edgesheet::quantity::Polarity;

use crate::bar::BOTH;
use crate::bar::Made;
use crate::bar::make;
use crate::bar::six;
use crate::random_bar::RandomBar;
use crate::reading_back::Picture;

const BARS: u64 = 500;

/// Half of a page that is 174 mm wide.
const HALF_PAGE_MM: (f64, f64) = (84.0, 70.0);

/// A drawing with the current from the first to the last contact, and the solver's matrix.
fn drawn(made: &Made, polarity: Polarity, size_mm: (f64, f64)) -> (Scene, Vec<Vec<f64>>) {
    let point = &made.device.points[0];
    let operating = edgesheet::network::operating(&made.network, &made.device, point, polarity);
    let prediction = made.predict(0, polarity, &[]);
    let current = [ContactIdx(0), ContactIdx(made.device.contacts.len() - 1)];
    let potentials = prediction.bundle_potentials(current);
    let scene = draw_chip(&ChipDrawing {
        names: &edgesheet::report::chip_names(&made.device),
        layout: &made.layout,
        channels: &prediction.channels,
        fillings: &operating.fillings,
        polarity,
        potentials: potentials.as_deref(),
        size_mm,
    });
    let matrix = &prediction.conductance;
    let rows = (0..matrix.contacts())
        .map(|row| (0..matrix.contacts()).map(|column| matrix.entry(row, column).to_f64()).collect());
    (scene, rows.collect())
}

fn assert_true(scene: &Scene, matrix: &[Vec<f64>], what: &str) {
    let picture = Picture::of(scene, matrix.len());
    let rebuilt = picture.conductance().unwrap_or_else(|fault| panic!("{fault} in {what}"));
    for (row, (rebuilt, solved)) in rebuilt.iter().zip(matrix).enumerate() {
        for (column, (rebuilt, solved)) in rebuilt.iter().zip(solved).enumerate() {
            assert!((rebuilt - solved).abs() < 1e-6, "G[{row}][{column}]: drawn {rebuilt}, solved {solved}, in {what}");
        }
    }
}

/// Landauer–Büttiker on what is drawn: each line carries its weight times the potential at which it begins (M. Büttiker,
/// Phys. Rev. B 38, 9375 (1988)); lines inside one soft area leave it with the weighted mean.
#[test]
fn the_matrix_can_be_read_back_from_the_drawing() {
    for seed in 0..BARS {
        let bar = RandomBar::new(seed);
        let made = make(&bar.text(&bar.names()));
        for polarity in BOTH {
            let (scene, matrix) = drawn(&made, polarity, HALF_PAGE_MM);
            assert_true(&scene, &matrix, &format!("{seed} {polarity:?} {bar:?}"));
        }
    }
}

#[test]
fn nothing_overlaps_and_nothing_is_too_small() {
    let mut faults = Vec::new();
    for seed in 0..BARS {
        let bar = RandomBar::new(seed);
        let made = make(&bar.text(&bar.names()));
        for polarity in BOTH {
            let (scene, matrix) = drawn(&made, polarity, HALF_PAGE_MM);
            let picture = Picture::of(&scene, matrix.len());
            faults.extend(picture.faults().into_iter().map(|fault| format!("{seed} {polarity:?}: {fault}")));
        }
    }
    assert!(faults.is_empty(), "{} faults, the first: {:#?}", faults.len(), &faults[..faults.len().min(12)]);
}

/// The picture must be able to fail: a line that is led to the wrong contact changes the matrix.
#[test]
fn a_wrong_picture_is_noticed() {
    let made = six("3", &[("TG", "gate", 250, 350, "1")], "");
    let (scene, matrix) = drawn(&made, Polarity::Toward, HALF_PAGE_MM);
    assert_true(&scene, &matrix, "3 over 1");
    let (_, other) = drawn(&made, Polarity::Away, HALF_PAGE_MM);
    let rebuilt = Picture::of(&scene, 6).conductance().unwrap();
    assert!(rebuilt.iter().flatten().zip(other.iter().flatten()).any(|(a, b)| (a - b).abs() > 0.5));
}

/// Partial transmission of a level: the gate passes half of the third channel (rule 2 of the model), so two bands of one
/// ladder step run side by side and share their potential.
#[test]
fn partly_transmitted_levels_are_drawn_as_they_are_solved() {
    for gate in ["5/2", "1/2", "7/3"] {
        let made = six("3", &[("TG", "gate", 250, 350, &format!("\"{gate}\""))], "");
        for polarity in BOTH {
            let (scene, matrix) = drawn(&made, polarity, HALF_PAGE_MM);
            assert_true(&scene, &matrix, gate);
        }
    }
}

/// A small drawing as text: whatever moves in a drawing shows here line by line. Written by the program, looked at by a
/// person; a new one is written when the variable UPDATE_GOLDEN is set.
#[test]
fn a_small_drawing_stays_as_it_was() {
    let made = make(SMALL);
    let (scene, _) = drawn(&made, Polarity::Away, (50.0, 30.0));
    let svg = edgesheet::figure::to_svg(&scene);
    let path = std::path::Path::new(env!("CARGO_MANIFEST_DIR")).join("tests/golden/two-contact-bar.svg");
    if std::env::var_os("UPDATE_GOLDEN").is_some() {
        std::fs::write(&path, &svg).unwrap();
    }
    let golden = std::fs::read_to_string(&path).unwrap();
    for (line, (now, before)) in svg.lines().zip(golden.lines()).enumerate() {
        assert_eq!(now, before, "line {}", line + 1);
    }
    assert_eq!(svg.lines().count(), golden.lines().count());
}

const SMALL: &str = "format = 1
[device]
id = \"S\"
[mesa]
shape = \"bar\"
length_um = 200
width_um = 80
[[contact]]
name = \"1\"
edge = \"left\"
pin = \"A1\"
[[contact]]
name = \"<2>\"
edge = \"right\"
[[gate]]
name = \"TG\"
from_um = 80
to_um = 120
[[point]]
name = \"p\"
bulk = 2
fillings = { TG = -1 }
";

/// Every mark of a drawing as SVG is well formed: elements open and close in order, attributes are quoted, references
/// are known, and nothing but numbers stands in paths.
#[test]
fn drawings_are_well_formed() {
    for made in [make(SMALL), six("3", &[("TG", "gate", 250, 350, "1")], "")] {
        let (scene, _) = drawn(&made, Polarity::Toward, HALF_PAGE_MM);
        let svg = edgesheet::figure::to_svg(&scene);
        assert_well_formed(&svg);
        assert!(!svg.contains("NaN") && !svg.contains("inf"), "a coordinate is no number");
    }
}

fn assert_well_formed(svg: &str) {
    let mut open: Vec<&str> = Vec::new();
    let body = svg.strip_prefix("<?xml version=\"1.0\" encoding=\"UTF-8\"?>\n").unwrap();
    for piece in body.split('<').skip(1) {
        let (tag, text) = piece.split_once('>').unwrap();
        if let Some(name) = tag.strip_prefix('/') {
            assert_eq!(open.pop(), Some(name));
        } else {
            assert_eq!(tag.matches('"').count() % 2, 0, "{tag}");
            let name = tag.split([' ', '/']).next().unwrap();
            open.extend((!tag.ends_with('/')).then_some(name));
        }
        for reference in text.split('&').skip(1) {
            assert!(["amp;", "lt;", "gt;", "quot;"].iter().any(|known| reference.starts_with(known)), "{text}");
        }
    }
    assert!(open.is_empty(), "{open:?}");
}

/// A hair-thin gate of the other carrier across a corner of a gate: lines would cross there, and a drawing without channels
/// that says so stands in place of a wrong one.
#[test]
fn lines_that_would_cross_are_not_drawn() {
    let made = make(HAIR);
    let told = BOTH.map(|polarity| {
        let (scene, _) = drawn(&made, polarity, HALF_PAGE_MM);
        let channel = |mark: &Mark| matches!(mark, Mark::Path(path) if matches!(path.role, Role::Channel { .. }));
        let note = |mark: &Mark| match mark {
            Mark::Text(text) => text.runs.iter().any(|run| run.text.contains("too near to be drawn")),
            Mark::Path(_) => false,
        };
        let told = scene.marks.iter().any(note);
        assert_ne!(told, scene.marks.iter().any(channel), "{polarity:?}");
        told
    });
    assert!(told.contains(&true), "{told:?}");
}

const HAIR: &str = r#"format = 1
[device]
id = "X"
[mesa]
shape = "outline"
outline_um = [[0, 0], [300, 0], [300, 100], [0, 100]]
[[contact]]
name = "1"
at_um = [0, 50]
width_um = 40
[[contact]]
name = "2"
at_um = [300, 50]
width_um = 40
[[contact]]
name = "3"
at_um = [150, 100]
width_um = 10
[[gate]]
name = "A"
outline_um = [[267, 1], [196, 92], [54, 42]]
[[gate]]
name = "B"
outline_um = [[97, -8], [170, 44], [232, 101]]
[[point]]
name = "p"
field_T = 1
bulk = 12
fillings = { A = 7, B = -5, "A+B" = 3 }
"#;
