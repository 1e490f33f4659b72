//! Names of readings, contacts and fillings as a sheet prints them.

use crate::device::ContactIdx;
use crate::device::Device;
use crate::device::Drive;
use crate::device::Modes;
use crate::device::OperatingPoint;
use crate::quantity::Polarity;
use crate::quantity::printed::as_given;
use crate::report::marks::CLOSED;
use crate::report::marks::LOWERED;
use crate::report::marks::plain;
use crate::report::printed::filling;
use crate::resistance::Reading;

/// R with 14,25 lowered where every contact's name has one character, else `R(S–D, T1–B2)`: letters run together are ambiguous.
pub fn reading_name(device: &Device, reading: &Reading) -> String {
    let [i, j] = reading.current.map(|contact| contact_name(device, contact));
    let [k, l] = reading.voltage.map(|contact| contact_name(device, contact));
    if device.contacts.iter().all(|contact| contact.name.chars().count() == 1) {
        format!("R{LOWERED}{i}{j},{k}{l}{CLOSED}")
    } else {
        format!("R({i}–{j}, {k}–{l})")
    }
}

/// The same without marks, for a terminal: `R_14,25` or `R(S–D, T1–B2)`.
pub fn plain_name(device: &Device, reading: &Reading) -> String {
    plain(&reading_name(device, reading))
}

/// The name of a contact; empty for an index that the device has not.
pub fn contact_name(device: &Device, contact: ContactIdx) -> &str {
    device.contacts.get(contact.0).map_or("", |contact| contact.name.as_str())
}

/// `I 1→4, V 2−5`.
pub fn leads(device: &Device, reading: &Reading) -> String {
    let [i, j] = reading.current.map(|contact| contact_name(device, contact));
    let [k, l] = reading.voltage.map(|contact| contact_name(device, contact));
    format!("I {i}→{j}, V {k}−{l}")
}

/// Contacts in the order of the file; three or more that count on as `1 to 6`, all others by name: a range of letters
/// would leave the reader to guess what lies between.
pub fn contact_list(device: &Device, contacts: &[ContactIdx]) -> String {
    let mut sorted: Vec<usize> = contacts.iter().map(|contact| contact.0).collect();
    sorted.sort_unstable();
    sorted.dedup();
    let name = |index: &usize| contact_name(device, ContactIdx(*index)).to_string();
    let runs = sorted.chunk_by(|left, right| left + 1 == *right && counts_on(&name(left), &name(right)));
    let parts = runs.flat_map(|run| match run {
        [first, _, .., last] => vec![format!("{} to {}", name(first), name(last))],
        few => few.iter().map(name).collect(),
    });
    parts.collect::<Vec<_>>().join(", ")
}

/// Whether a name is another one with its number raised by one, as `T2` after `T1`.
fn counts_on(before: &str, after: &str) -> bool {
    let parts = |name: &str| {
        let stem = name.trim_end_matches(|letter: char| letter.is_ascii_digit()).len();
        Some((name[..stem].to_owned(), name[stem..].parse::<u64>().ok()?))
    };
    match (parts(before), parts(after)) {
        (Some((one, number)), Some((other, next))) => one == other && number.checked_add(1) == Some(next),
        _ => false,
    }
}

/// What turns the channels, in a word.
pub fn driver(device: &Device) -> &'static str {
    match device.driven_by {
        Drive::Field => "field",
        Drive::Magnetisation => "magnetisation",
    }
}

/// `field toward you`, `magnetisation away`.
pub fn side(device: &Device, polarity: Polarity) -> String {
    let way = match polarity {
        Polarity::Toward => "toward you",
        Polarity::Away => "away",
    };
    format!("{} {way}", driver(device))
}

/// `1 forward and 1 backward edge mode, backscattering over 20 µm`.
fn modes(modes: &Modes) -> String {
    let Modes { forward, backward, backscatter } = modes;
    let plural = if forward + backward == 1 { "mode" } else { "modes" };
    let over = backscatter.map(|length| format!(", backscattering over {} µm", as_given(length.to_um())));
    format!("edge {plural}: {forward} forward, {backward} backward{}", over.unwrap_or_default())
}

/// `filling 3 with 1 under TG`; overlaps as `TG+BG`; `edge modes: 1 forward, 1 backward`. On a bench `A: filling 3; B, C: filling 2`.
pub fn fillings(device: &Device, point: &OperatingPoint) -> String {
    let mut alike: Vec<(Vec<&str>, String)> = Vec::new();
    for (name, device, point) in device.singles(point) {
        let words = fillings_of_one(device, point);
        match alike.iter_mut().find(|(_, known)| *known == words) {
            Some((names, _)) => names.extend(name),
            None => alike.push((name.into_iter().collect(), words)),
        }
    }
    let parts = alike.into_iter().map(|(names, words)| match names.as_slice() {
        [] => words,
        names => format!("{}: {words}", names.join(", ")),
    });
    parts.collect::<Vec<_>>().join("; ")
}

fn fillings_of_one(device: &Device, point: &OperatingPoint) -> String {
    if let Some(of_point) = &point.modes {
        return modes(of_point);
    }
    let under = point.fillings.iter().map(|(cover, value)| {
        let names: Vec<&str> =
            cover.iter().filter_map(|overlay| device.overlays.get(overlay.0)).map(|o| o.name.as_str()).collect();
        format!("{} under {}", filling(value), names.join("+"))
    });
    let bulk = format!("filling {}", filling(&point.bulk));
    let under: Vec<String> = under.collect();
    if under.is_empty() { bulk } else { format!("{bulk} with {}", under.join(", ")) }
}

/// The wires of a bench, `A:5–B:1, A:6–B:2 each 1.2 Ω; A:7–B:3 0 Ω`; none where there are none.
pub fn wires(device: &Device) -> Option<String> {
    let mut alike: Vec<(f64, Vec<String>)> = Vec::new();
    for link in device.bench.iter().flat_map(|bench| &bench.links) {
        let words = link.ends.map(|end| contact_name(device, end)).join("–");
        match alike.iter_mut().find(|(ohm, _)| *ohm == link.ohm) {
            Some((_, wires)) => wires.push(words),
            None => alike.push((link.ohm, vec![words])),
        }
    }
    let parts = alike.into_iter().map(|(ohm, wires)| {
        let each = if wires.len() > 1 { "each " } else { "" };
        format!("{} {each}{} Ω", wires.join(", "), as_given(ohm))
    });
    let words = parts.collect::<Vec<_>>().join("; ");
    (!words.is_empty()).then_some(words)
}

/// The field of a point, `4.14 T`; none where the file gives none.
pub fn field(point: &OperatingPoint) -> Option<String> {
    point.field_t.map(|tesla| format!("{} T", as_given(tesla)))
}

/// Closed forms in type: in `1/ν(TG)` the name is lowered.
pub fn formula(text: &str) -> String {
    let mut shown = String::new();
    let mut rest = text;
    while let Some((before, after)) = rest.split_once("ν(") {
        let Some(end) = closing_bracket(after) else { break };
        shown.push_str(&format!("{before}ν{LOWERED}{}{CLOSED}", &after[..end]));
        rest = &after[end + 1..];
    }
    shown + rest
}

/// Where the bracket closes that was open before the text; names may hold pairs of their own.
fn closing_bracket(text: &str) -> Option<usize> {
    let mut open = 1;
    let depth = |(at, sign)| {
        open += match sign {
            '(' => 1,
            ')' => -1,
            _ => 0,
        };
        (open == 0).then_some(at)
    };
    text.char_indices().find_map(depth)
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::report::marks::spelled;

    #[test]
    fn closed_forms_are_lowered() {
        assert_eq!(spelled(&formula("2/ν(bulk) − 1/ν(TG)")), "2/ν_{bulk} − 1/ν_{TG}");
        assert_eq!(formula("1/2"), "1/2");
        assert_eq!(spelled(&formula("1/|ν(TG (left))| − 2/ν(bulk)")), "1/|ν_{TG (left)}| − 2/ν_{bulk}");
    }

    #[test]
    fn only_names_with_rising_numbers_count_on() {
        assert!(counts_on("1", "2") && counts_on("T9", "T10"));
        assert!(!counts_on("S", "D") && !counts_on("T1", "B2") && !counts_on("T2", "T1") && !counts_on("T1", "T1"));
    }
}
