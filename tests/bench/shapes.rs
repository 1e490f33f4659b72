//! Layouts of many sides: how long they take beside their budgets.

use std::fmt::Write;
use std::time::Duration;

use edgesheet::device::Device;

/// A device with a name for the table and its budget.
pub struct Case {
    pub name: String,
    pub budget: &'static str,
    pub device: Device,
}

/// Bars under oblique gates, an outline with 64 contacts and 20 gates, and a ring of the most corners.
pub fn cases() -> Vec<Case> {
    let gated = |sides: usize, budget| case(format!("{sides} sides, oblique gates"), budget, &gates(sides));
    vec![
        gated(100, "0.1 ms"),
        gated(1_000, "3 ms"),
        case("outline, 64 contacts, 20 gates".to_owned(), "none", &outline(64, 20)),
        case("ring of 2 × 720 corners, 12 contacts".to_owned(), "none", &ring(12)),
    ]
}

/// The line of one case.
pub fn line(case: &Case, time: Duration) -> String {
    let micros = time.as_secs_f64() * 1e6;
    format!("  {:<40} {micros:>9.0} µs   (budget {})", case.name, case.budget)
}

fn case(name: String, budget: &'static str, text: &str) -> Case {
    let noted = edgesheet::device::from_bytes("bench.toml", text.as_bytes()).expect("a device");
    Case { name, budget, device: noted.value }
}

const HEAD: &str = "format = 1\n[device]\nid = \"bench\"\n[mesa]\n";

/// A bar with two contacts and as many oblique gates apart from one another as make up the number of sides.
fn gates(sides: usize) -> String {
    let gates = (sides - 12) / 4;
    let length = 40 * (gates + 1);
    let mut text = format!(
        "{HEAD}shape = \"bar\"\nlength_um = {length}\nwidth_um = 100\n[[contact]]\nname = \"1\"\nedge = \"left\"\n\
         [[contact]]\nname = \"2\"\nedge = \"right\"\n"
    );
    for gate in 0..gates {
        let x = 40 * gate + 10;
        let corners = format!("[[{x}, -7], [{}, -3], [{}, 109], [{}, 103]]", x + 15, x + 27, x + 11);
        let _ = write!(text, "[[gate]]\nname = \"G{gate}\"\noutline_um = {corners}\n");
    }
    text + "[[point]]\nname = \"p\"\nbulk = 2\n"
}

/// A many-cornered mesa with a contact on every side and strips across.
fn outline(contacts: usize, gates: usize) -> String {
    let corner = |n: f64| {
        let angle = std::f64::consts::TAU * n / contacts as f64;
        (2_000.0 * angle.cos(), 2_000.0 * angle.sin())
    };
    let corners: Vec<String> =
        (0..contacts).map(|n| corner(n as f64)).map(|(x, y)| format!("[{x:.2}, {y:.2}]")).collect();
    let mut text = format!("{HEAD}shape = \"outline\"\noutline_um = [{}]\n", corners.join(", "));
    for contact in 0..contacts {
        let (one, other) = (corner(contact as f64), corner(contact as f64 + 1.0));
        let (x, y) = ((one.0 + other.0) / 2.0, (one.1 + other.1) / 2.0);
        let _ = write!(text, "[[contact]]\nname = \"{contact}\"\nat_um = [{x:.2}, {y:.2}]\nwidth_um = 60\n");
    }
    for gate in 0..gates {
        let from = -1_900 + 190 * gate as i64;
        let _ = write!(text, "[[gate]]\nname = \"G{gate}\"\nfrom_um = {from}\nto_um = {}\n", from + 60);
    }
    text + "[[point]]\nname = \"p\"\nbulk = 2\n"
}

fn ring(contacts: usize) -> String {
    let mut text = format!("{HEAD}shape = \"ring\"\nouter_diameter_um = 6000\ninner_diameter_um = 3000\n");
    for contact in 0..contacts {
        let edge = if contact % 2 == 0 { "outer" } else { "inner" };
        let angle = 360 * contact / contacts;
        let _ =
            write!(text, "[[contact]]\nname = \"{contact}\"\nedge = \"{edge}\"\nangle_deg = {angle}\nwidth_um = 200\n");
    }
    text + "[[point]]\nname = \"p\"\nbulk = 2\n"
}
