//! Device, cooldown and readings files of any size, made for measuring.

use std::fmt::Write;

/// What a bar has.
#[derive(Clone, Copy)]
pub struct Size {
    pub contacts: usize,
    pub gates: usize,
    pub points: usize,
    /// A line of `[edge]`.
    pub edge: &'static str,
}

/// A bar with contacts at both ends and evenly along both sides, and gates between the first pairs of probes; where there
/// are more gates than gaps, several share a gap.
pub fn device(size: Size) -> String {
    let pairs = (size.contacts - 2) / 2;
    let pitch_um = 200.0;
    let length_um = (pairs as f64 + 1.0) * pitch_um;
    let mut text = format!(
        "format = 1\n[device]\nid = \"bench\"\n[mesa]\nshape = \"bar\"\nlength_um = {length_um}\nwidth_um = 100\n\
         [edge]\n{}\n[[contact]]\nname = \"S\"\nedge = \"left\"\n[[contact]]\nname = \"D\"\nedge = \"right\"\n",
        size.edge
    );
    for (edge, letter) in [("top", 't'), ("bottom", 'b')] {
        for pair in 1..=pairs {
            let x_um = pair as f64 * pitch_um;
            let _ = write!(
                text,
                "[[contact]]\nname = \"{letter}{pair}\"\nedge = \"{edge}\"\nx_um = {x_um}\nwidth_um = 20\narm_um = 40\n"
            );
        }
    }
    gates(&mut text, size.gates, pairs + 1, pitch_um);
    for point in 0..size.points {
        let fillings: Vec<String> =
            (0..size.gates).map(|gate| format!("G{gate} = {}", 1 + (gate + point) % 3)).collect();
        let _ = write!(text, "[[point]]\nname = \"p{point}\"\nbulk = 4\nfillings = {{ {} }}\n", fillings.join(", "));
    }
    text
}

fn gates(text: &mut String, gates: usize, gaps: usize, pitch_um: f64) {
    let in_one_gap = gates.div_ceil(gaps).max(1);
    let width_um = 120.0 / (2 * in_one_gap) as f64;
    for gate in 0..gates {
        let (gap, place) = (gate / in_one_gap, gate % in_one_gap);
        let from_um = gap as f64 * pitch_um + 40.0 + 2.0 * width_um * place as f64;
        let _ =
            write!(text, "[[gate]]\nname = \"G{gate}\"\nfrom_um = {from_um:.2}\nto_um = {:.2}\n", from_um + width_um);
    }
}

/// A cooldown with lines and a meter for every device of [`device`].
pub fn cooldown(size: Size) -> String {
    let mut text =
        "format = 1\ndevice = \"bench\"\nreadings = \"readings.csv\"\n[cooldown]\nid = \"c1\"\ndate = 2026-01-05\n\
                    temperature_K = 0.3\n[source]\ncurrent_nA = 10\nfrequency_Hz = 13\n"
            .to_owned();
    let pairs = (size.contacts - 2) / 2;
    let sides = ['t', 'b'].into_iter().flat_map(|letter| (1..=pairs).map(move |pair| format!("{letter}{pair}")));
    for contact in ["S".to_owned(), "D".to_owned()].into_iter().chain(sides) {
        let _ = write!(text, "[[line]]\ncontact = \"{contact}\"\nohm = 130\nu_ohm = 2\ncapacitance_nF = 0.5\n");
    }
    text += "[[meter]]\nname = \"A\"\ninput_ohm = 1.0e8\ninput = \"ground\"\ngain = 1.0\nu_gain = 1.0e-4\n";
    text + "[magnet]\npositive = \"toward\"\nmax_field_T = 8\ncurrent_A = 80\ninductance_H = 12\n"
}

/// A table of measured readings: (point, polarity, contacts, Ω).
pub fn readings(rows: &[(String, &str, [String; 4], f64)]) -> String {
    let mut text = "point,polarity,i_in,i_out,v_plus,v_minus,value,unit,u\n".to_owned();
    for (point, polarity, contacts, ohm) in rows {
        let _ = writeln!(text, "{point},{polarity},{},{ohm:.4},ohm,1.5", contacts.join(","));
    }
    text
}
