//! The pages of many random devices along the whole path: nothing overlaps, is cut off, or is too small to read.

use edgesheet::figure::fonts;
use edgesheet::figure::scene::At;
use edgesheet::figure::scene::Mark;
use edgesheet::figure::scene::PathMark;
use edgesheet::figure::scene::Role;
use edgesheet::figure::scene::Scene;
use edgesheet::figure::scene::Segment;
use edgesheet::figure::scene::TextMark;
use edgesheet::sheet::Paper;

use crate::paper::Listed;
use crate::paper::Made;
use crate::paper::make;
use crate::random_bar::RandomBar;

/// Left, top, right, bottom in mm.
type Sides = [f64; 4];

fn text_of(mark: &TextMark) -> String {
    mark.runs.iter().map(|run| run.text.as_str()).collect()
}

/// The box that the letters of a text fill, from base line to capitals; tails hang below it.
fn sides(mark: &TextMark) -> Sides {
    let pieces = fonts::pieces(mark);
    let left = mark.at.0 + pieces.iter().map(|piece| piece.x_mm).fold(f64::INFINITY, f64::min);
    let rise = pieces.iter().map(|piece| piece.rise_mm + fonts::cap_height_mm(mark.face, piece.size_pt));
    let drop = pieces.iter().map(|piece| -piece.rise_mm).fold(0.0, f64::max);
    [left, mark.at.1 - rise.fold(0.0, f64::max), left + fonts::width_of(mark), mark.at.1 + drop]
}

fn share(a: &Sides, b: &Sides) -> bool {
    const HAIR_MM: f64 = 0.05;
    a[0] + HAIR_MM < b[2] && b[0] + HAIR_MM < a[2] && a[1] + HAIR_MM < b[3] && b[1] + HAIR_MM < a[3]
}

/// Straight parts of a stroked path; curves as eight chords.
fn chords(path: &PathMark) -> Vec<(At, At)> {
    let (mut here, mut found) = ((0.0, 0.0), Vec::new());
    for segment in &path.segments {
        match *segment {
            Segment::Move(at) => here = at,
            Segment::Line(at) => {
                found.push((here, at));
                here = at;
            }
            Segment::Cubic(a, b, end) => {
                let from = here;
                for step in 1..=8 {
                    let t = f64::from(step) / 8.0;
                    let at = |p0: f64, p1: f64, p2: f64, p3: f64| {
                        let s = 1.0 - t;
                        s * s * s * p0 + 3.0 * s * s * t * p1 + 3.0 * s * t * t * p2 + t * t * t * p3
                    };
                    let next = (at(from.0, a.0, b.0, end.0), at(from.1, a.1, b.1, end.1));
                    found.push((here, next));
                    here = next;
                }
            }
            Segment::Close => {}
        }
    }
    found
}

/// Whether a chord passes through the inside of a box (clipped against its four sides).
fn crosses((from, to): (At, At), sides: &Sides) -> bool {
    let (dx, dy) = (to.0 - from.0, to.1 - from.1);
    let (mut enter, mut leave) = (0.0_f64, 1.0_f64);
    for (speed, room) in
        [(-dx, from.0 - sides[0]), (dx, sides[2] - from.0), (-dy, from.1 - sides[1]), (dy, sides[3] - from.1)]
    {
        if speed == 0.0 {
            if room <= 0.0 {
                return false;
            }
        } else if speed < 0.0 {
            enter = enter.max(room / speed);
        } else {
            leave = leave.min(room / speed);
        }
    }
    enter < leave
}

/// What is wrong with a page, in words.
fn faults(page: &Scene) -> Vec<String> {
    let texts = page.marks.iter().filter_map(|mark| match mark {
        Mark::Text(text) if !text.runs.is_empty() => Some((text, sides(text))),
        _ => None,
    });
    let texts: Vec<(&TextMark, Sides)> = texts.collect();
    let mut found = Vec::new();
    for (at, (text, sides)) in texts.iter().enumerate() {
        if sides[0] < 14.0 || sides[1] < 10.0 || sides[2] > page.width_mm - 14.0 || sides[3] > page.height_mm - 10.0 {
            found.push(format!("“{}” leaves the page", text_of(text)));
        }
        if text.size_pt < 7.0 - 1e-9 {
            found.push(format!("“{}” has {} pt", text_of(text), text.size_pt));
        }
        let others = texts[at + 1..].iter().filter(|(_, other)| share(sides, other));
        found.extend(others.map(|(other, _)| format!("“{}” overlaps “{}”", text_of(text), text_of(other))));
        let inner = [sides[0] + 0.15, sides[1] + 0.15, sides[2] - 0.15, sides[3] - 0.15];
        let crossed = page.marks.iter().any(|mark| match mark {
            Mark::Path(path) if path.stroke.is_some() && matches!(path.role, Role::Plain | Role::Channel { .. }) => {
                chords(path).into_iter().any(|chord| crosses(chord, &inner))
            }
            _ => false,
        });
        if crossed {
            found.push(format!("a line runs through “{}”", text_of(text)));
        }
    }
    found
}

fn check(made: &Made, paper: Paper, what: &str, wrong: &mut Vec<String>) {
    let pages = made.pages_on(paper);
    for (number, page) in pages.iter().enumerate() {
        wrong.extend(faults(page).into_iter().map(|fault| format!("{what}, page {}: {fault}", number + 1)));
    }
}

fn verdict(wrong: &[String]) {
    assert!(
        wrong.is_empty(),
        "{} faults\n{}",
        wrong.len(),
        wrong.iter().take(60).cloned().collect::<Vec<_>>().join("\n")
    );
}

/// Two hundred random bars; every third with names of many letters, every fifth on Letter.
#[test]
fn pages_of_random_bars_are_clean() {
    let mut wrong = Vec::new();
    for seed in 0..200 {
        let bar = RandomBar::new(seed);
        let long = (0..bar.contacts.len()).map(|at| format!("contact-number-{at:05}")).collect();
        let names = if seed % 3 == 0 { long } else { bar.names() };
        let paper = if seed % 5 == 0 { Paper::Letter } else { Paper::A4 };
        let text = bar.text(&names);
        check(&make(&text, None, Listed::Standard), paper, &format!("seed {seed}"), &mut wrong);
    }
    verdict(&wrong);
}

/// A bar with so many contacts in two rows, names of twenty letters, and six points, one with a gate at 0, one bipolar.
fn crowded(contacts: usize) -> String {
    let length = 100 * contacts;
    let mut text = format!(
        "format = 1\n[device]\nid = \"crowded\"\n[mesa]\nshape = \"bar\"\nlength_um = {length}\nwidth_um = 200\n\
         [[contact]]\nname = \"source-end-of-the-bar\"\nedge = \"left\"\n[[contact]]\nname = \"drain-end-of-the-bar-\"\nedge = \"right\"\n"
    );
    for at in 0..contacts - 2 {
        let (edge, x) = (if at % 2 == 0 { "top" } else { "bottom" }, 100 + 200 * (at / 2));
        text += &format!(
            "[[contact]]\nname = \"probe-on-the-side-{at:02}\"\nedge = \"{edge}\"\nx_um = {x}\nwidth_um = 40\narm_um = 40\n"
        );
    }
    text += &format!("[[gate]]\nname = \"TG\"\nfrom_um = {}\nto_um = {}\n", length / 2 + 20, length / 2 + 60);
    for [bulk, gate] in [[3, 1], [4, 2], [2, 0], [2, -2], [-3, -1], [2, 6]] {
        text += &format!("[[point]]\nname = \"{bulk} over {gate}\"\nbulk = {bulk}\nfillings = {{ TG = {gate} }}\n");
    }
    text
}

#[test]
fn pages_of_crowded_bars_are_clean() {
    let mut wrong = Vec::new();
    for (contacts, listed) in [(64, Listed::Standard), (10, Listed::First(400)), (4, Listed::Standard)] {
        for paper in [Paper::A4, Paper::Letter] {
            let made = make(&crowded(contacts), None, listed);
            check(&made, paper, &format!("{contacts} contacts on {paper:?}"), &mut wrong);
        }
    }
    verdict(&wrong);
}

/// Lines, meters, states and measured values: the demo, and a bar of which every reading was measured.
#[test]
fn pages_of_measured_bars_are_clean() {
    let mut wrong = Vec::new();
    let tables = "[source]\nvoltage_V = 0.1\nseries_ohm = 1.0e7\nfrequency_Hz = 17\nammeter_ohm = 1000\n\
                  [[meter]]\nname = \"A\"\ninput_ohm = 1.0e7\ninput = \"ground\"\nu_gain = 0.001\n\
                  [[meter]]\nname = \"long-name-of-a-meter\"\ngain = 1.01\nphase_deg = 0.3\n";
    for seed in 0..20 {
        let bar = RandomBar::new(seed);
        let names = bar.names();
        let mut cooldown =
            format!("format = 1\ndevice = \"R\"\nreadings = \"readings.csv\"\n[cooldown]\nid = \"c\"\n{tables}");
        for name in &names {
            cooldown += &format!("[[line]]\ncontact = \"{name}\"\nohm = 2200\nu_ohm = 5\ncapacitance_nF = 2.2\n");
        }
        let mut readings = "point,polarity,i_in,i_out,v_plus,v_minus,value,unit,u,meter,set,note\n".to_string();
        for (at, name) in names.iter().enumerate().skip(1) {
            for polarity in ["+", "-"] {
                let (first, before) = (&names[0], &names[at - 1]);
                readings += &format!("p,{polarity},{first},{name},{name},{before},{},ohm,1.5,A,,\n", 1000 * at);
                readings += &format!(
                    "p,{polarity},{first},{name},{first},{before},{},ohm,12.5,long-name-of-a-meter,,\n",
                    -2000 * at as i64
                );
            }
        }
        // The voltage pair of one contact with itself is no reading.
        let readings: Vec<&str> =
            readings.lines().filter(|line| !line.contains(&format!(",{0},{0},", names[0]))).collect();
        let made = make(&bar.text(&names), Some((&cooldown, &(readings.join("\n") + "\n"))), Listed::Standard);
        assert!(made.report.points[0].measured && !made.report.instruments.is_empty());
        check(&made, Paper::A4, &format!("seed {seed}"), &mut wrong);
    }
    verdict(&wrong);
}

/// The helper itself: a line through a text and a small text are found.
#[test]
fn faults_are_found() {
    let made = make(&RandomBar::new(1).text(&RandomBar::new(1).names()), None, Listed::Standard);
    let mut page = made.pages().remove(0);
    let at = page.marks.iter().find_map(|mark| match mark {
        Mark::Text(text) => Some(text.at),
        Mark::Path(_) => None,
    });
    let (x, y) = at.unwrap();
    let stroke = edgesheet::figure::scene::Stroke {
        colour: edgesheet::figure::scene::Colour(0, 0, 0),
        width_mm: 0.2,
        dash_mm: Vec::new(),
    };
    let segments = vec![Segment::Move((x - 5.0, y - 1.0)), Segment::Line((x + 30.0, y - 1.0))];
    page.marks.push(Mark::Path(PathMark { segments, stroke: Some(stroke), fill: None, role: Role::Plain }));
    for mark in &mut page.marks {
        if let Mark::Text(text) = mark {
            text.size_pt = 6.0;
        }
    }
    let found = faults(&page).join("\n");
    assert!(found.contains("a line runs through") && found.contains("has 6 pt"), "{found}");
}
