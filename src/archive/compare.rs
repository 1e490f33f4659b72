//! Archived numbers beside those that were computed again, one by one.

use std::collections::BTreeMap;

use serde_json::Map;
use serde_json::Value;

/// Beyond this a number of another version of the program differs: relative, or of h/e² where it is a resistance.
const TOLERANCE: f64 = 1e-12;
/// h/e² in Ω, as a size.
const SIZE_OHM: f64 = 25_812.8;
/// What a newer version may say otherwise while the numbers are the same: sentences, closed forms, what is noticed.
const PROSE: &[&str] = &[
    "format", "about", "program", "inputs", "options", "printed", "notices", "formula", "source", "title", "material",
];

/// What a record may leave out of an input: its SHA-256 stands for it.
const CONTENT: &[&str] = &["text", "base64"];

/// By whom the archived values were computed.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Writer {
    /// By this version: every value is compared, and none may differ at all.
    SameVersion,
    /// By another one: numbers and the words that follow from them, not prose.
    OtherVersion,
}

/// What came of it.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Compared {
    /// Values that were compared.
    pub count: usize,
    /// Those that differ.
    pub differences: Vec<Difference>,
    /// What the archived record holds and this version does not compute.
    pub unchecked: Vec<String>,
}

/// One value that differs.
#[derive(Clone, Debug, PartialEq)]
pub struct Difference {
    /// Where, in words of the sheet.
    pub place: String,
    /// As it was archived.
    pub archived: String,
    /// As it was computed again.
    pub again: String,
}

/// Compares two records.
pub fn compare(archived: &Value, again: &Value, writer: Writer) -> Compared {
    let mut walk = Walk { writer, found: Compared::default(), place: Vec::new() };
    walk.value(archived, again);
    walk.found
}

struct Walk {
    writer: Writer,
    found: Compared,
    /// Words of the way to the present value.
    place: Vec<String>,
}

impl Walk {
    fn value(&mut self, archived: &Value, again: &Value) {
        match (archived, again) {
            (Value::Object(archived), Value::Object(again)) => self.object(archived, again),
            (Value::Array(archived), Value::Array(again)) => self.array(archived, again),
            _ => self.plain((archived, again), 0.0),
        }
    }

    fn object(&mut self, archived: &Map<String, Value>, again: &Map<String, Value>) {
        let writer = self.writer;
        for (key, value) in archived.iter().filter(|(key, _)| counts(key, writer)) {
            self.place.push(key.clone());
            match again.get(key) {
                Some(other) if is_plain(value) && is_plain(other) => self.plain((value, other), floor(key, again)),
                Some(other) => self.value(value, other),
                None if self.writer == Writer::SameVersion => self.differ(value, &Value::Null),
                None => self.found.unchecked.push(self.words()),
            }
            self.place.pop();
        }
        if self.writer == Writer::SameVersion {
            let missing = |key: &str| !archived.contains_key(key) && !CONTENT.contains(&key);
            for (key, value) in again.iter().filter(|(key, _)| missing(key)) {
                self.place.push(key.clone());
                self.differ(&Value::Null, value);
                self.place.pop();
            }
        }
    }

    /// The items of one version stand in one order. Another version may have more of them, or others: each is looked up by
    /// what it is of.
    fn array(&mut self, archived: &[Value], again: &[Value]) {
        let mut by_identity: BTreeMap<String, Vec<&Value>> = BTreeMap::new();
        for item in again.iter().rev() {
            by_identity.entry(identity(item)).or_default().push(item);
        }
        let in_order = self.writer == Writer::SameVersion || archived.iter().any(is_plain);
        for (at, item) in archived.iter().enumerate() {
            let found = match in_order {
                true => again.get(at),
                false => by_identity.get_mut(&identity(item)).and_then(Vec::pop),
            };
            self.place.push(named(item, at));
            match found {
                Some(other) => self.value(item, other),
                None if in_order => self.differ(item, &Value::Null),
                None => self.found.unchecked.push(self.words()),
            }
            self.place.pop();
        }
        if in_order {
            for (at, item) in again.iter().enumerate().skip(archived.len()) {
                self.place.push(named(item, at));
                self.differ(&Value::Null, item);
                self.place.pop();
            }
        }
    }

    fn plain(&mut self, (archived, again): (&Value, &Value), floor: f64) {
        self.found.count += 1;
        let same = match (archived.as_f64(), again.as_f64()) {
            (Some(one), Some(other)) if self.writer == Writer::OtherVersion => is_close(one, other, floor),
            // 0 and 0.0 are one number.
            (Some(one), Some(other)) => one == other,
            _ => archived == again || self.is_close_text(archived, again),
        };
        if !same {
            self.found.count -= 1;
            self.differ(archived, again);
        }
    }

    /// An entry of a matrix that is no fraction is a float in a text.
    fn is_close_text(&self, archived: &Value, again: &Value) -> bool {
        let number = |value: &Value| value.as_str().and_then(|text| text.parse::<f64>().ok());
        let both = number(archived).zip(number(again));
        self.writer == Writer::OtherVersion && both.is_some_and(|(one, other)| is_close(one, other, TOLERANCE))
    }

    fn differ(&mut self, archived: &Value, again: &Value) {
        self.found.count += 1;
        let place = self.words();
        self.found.differences.push(Difference { place, archived: short(archived), again: short(again) });
    }

    /// The way to the value, without the names of lists whose items speak for themselves.
    fn words(&self) -> String {
        let lists =
            ["points", "polarities", "readings", "measured", "parts", "terms", "constants", "closure", "inputs"];
        let said = self.place.iter().filter(|step| !lists.contains(&step.as_str()));
        said.cloned().collect::<Vec<_>>().join(", ")
    }
}

fn counts(key: &str, writer: Writer) -> bool {
    writer == Writer::SameVersion || !PROSE.contains(&key)
}

fn is_plain(value: &Value) -> bool {
    !value.is_object() && !value.is_array()
}

fn is_close(one: f64, other: f64, floor: f64) -> bool {
    (one - other).abs() <= (TOLERANCE * one.abs().max(other.abs())).max(floor)
}

/// How much a number may differ whatever its size: a difference of two numbers cannot be known better than they are.
fn floor(key: &str, around: &Map<String, Value>) -> f64 {
    let number = |key: &str| around.get(key).and_then(Value::as_f64);
    match key {
        "difference_1e6" => 1e6 * TOLERANCE * SIZE_OHM / number("expected_ohm").map_or(SIZE_OHM, f64::abs).max(1e-9),
        "difference_in_u" => {
            let size = number("expected_ohm").map_or(SIZE_OHM, f64::abs).max(SIZE_OHM);
            TOLERANCE * size / number("u_difference_ohm").unwrap_or(size).max(1e-15)
        }
        _ if key.ends_with("ohm") => TOLERANCE * SIZE_OHM,
        _ => 0.0,
    }
}

/// What an item of a list is of.
fn identity(item: &Value) -> String {
    let keys = [
        "name", "polarity", "region", "part", "cause", "of", "symbol", "current", "voltage", "meter", "set", "contacts",
    ];
    let own = keys.iter().filter_map(|key| item.get(*key)).map(Value::to_string);
    let leads = ["/reading/current", "/reading/voltage"]
        .iter()
        .filter_map(|pointer| item.pointer(pointer))
        .map(Value::to_string);
    own.chain(leads).collect::<Vec<_>>().join(" ")
}

/// What an item of a list is called in words of the sheet.
fn named(item: &Value, at: usize) -> String {
    let text = |key: &str| item.get(key).and_then(Value::as_str);
    let side = |sign| if sign == "+" { "toward you" } else { "away" };
    let leads = pair(item, "current", "→").zip(pair(item, "voltage", "−"));
    let leads = leads.map(|(current, voltage)| format!("I {current}, V {voltage}"));
    let loops = item.get("contacts").map(|contacts| format!("loop {}", short(contacts)));
    let measured = item.get("judgement").map(|_| "measured".to_owned());
    let name = ["region", "part", "cause", "symbol"].iter().find_map(|key| text(key));
    let name = name.or_else(|| text("name").filter(|_| leads.is_none())).map(str::to_owned);
    let parts: Vec<String> = [text("polarity").map(|sign| side(sign).to_owned()), measured, loops, leads, name]
        .into_iter()
        .flatten()
        .collect();
    if parts.is_empty() { (at + 1).to_string() } else { short_text(&parts.join(", ")) }
}

fn pair(item: &Value, key: &str, between: &str) -> Option<String> {
    let list = item.get(key)?.as_array()?;
    let names: Vec<&str> = list.iter().filter_map(Value::as_str).collect();
    (names.len() == 2).then(|| names.join(between))
}

/// A value in few words; nothing where there is none.
fn short(value: &Value) -> String {
    match value {
        Value::Null => "nothing".to_owned(),
        Value::String(text) => format!("“{}”", short_text(text)),
        other => short_text(&other.to_string()),
    }
}

/// Strangers' texts may be long and hold anything.
fn short_text(text: &str) -> String {
    const LONGEST: usize = 80;
    let plain: String =
        text.chars().map(|letter| if letter.is_control() { ' ' } else { letter }).take(LONGEST).collect();
    if text.chars().count() > LONGEST { format!("{plain}…") } else { plain }
}

#[cfg(test)]
mod tests {
    use super::*;
    use serde_json::json;

    fn differences(archived: &Value, again: &Value, writer: Writer) -> Vec<String> {
        let said = |one: &Difference| format!("{}: {} | {}", one.place, one.archived, one.again);
        compare(archived, again, writer).differences.iter().map(said).collect()
    }

    #[test]
    fn a_difference_is_named_in_words_of_the_sheet() {
        let record = |ohm: f64| {
            let reading = json!({"name": null, "current": ["1", "4"], "voltage": ["2", "5"], "ohm": ohm});
            json!({"points": [{"name": "3 over 1", "polarities": [{"polarity": "+", "readings": [reading]}]}]})
        };
        let found = differences(&record(1.0), &record(2.0), Writer::SameVersion);
        assert_eq!(found, ["3 over 1, toward you, I 1→4, V 2−5, ohm: 1.0 | 2.0"]);
    }

    #[test]
    fn another_version_may_compute_in_another_order() {
        let (one, other) = (json!({"ohm": 25_812.807_459_304_506}), json!({"ohm": 25_812.807_459_304_52}));
        assert!(differences(&one, &other, Writer::OtherVersion).is_empty());
        assert_eq!(differences(&one, &other, Writer::SameVersion).len(), 1);
        let far = json!({"ohm": 25_812.807_459_4});
        assert_eq!(differences(&one, &far, Writer::OtherVersion).len(), 1);
        assert!(
            differences(&json!({"expected_ohm": 1e-12}), &json!({"expected_ohm": 0.0}), Writer::OtherVersion)
                .is_empty()
        );
    }

    #[test]
    fn keys_may_be_added_and_prose_may_change() {
        let old = json!({"verdict": {"result": "agrees"}, "printed": {"sentence": "All agree."}});
        let new = json!({"verdict": {"result": "agrees", "judged": 3}, "printed": {"sentence": "All 3 agree."}});
        assert!(differences(&old, &new, Writer::OtherVersion).is_empty());
        assert_eq!(differences(&old, &new, Writer::SameVersion).len(), 2);
        let turned = compare(&new, &old, Writer::OtherVersion);
        assert_eq!((turned.differences.len(), turned.unchecked), (0, vec!["verdict, judged".to_owned()]));
        let disagrees = json!({"verdict": {"result": "disagrees"}});
        assert_eq!(differences(&disagrees, &new, Writer::OtherVersion), ["verdict, result: “disagrees” | “agrees”"]);
    }

    #[test]
    fn items_of_another_version_are_looked_up_by_what_they_are() {
        let reading =
            |voltage: &str, exact: &str| json!({"current": ["1", "4"], "voltage": ["2", voltage], "exact": exact});
        let old = json!({"readings": [reading("5", "1"), reading("6", "1/3")]});
        let new = json!({"readings": [reading("3", "2/3"), reading("6", "1/3"), reading("5", "1")]});
        assert!(differences(&old, &new, Writer::OtherVersion).is_empty());
        assert!(!differences(&old, &new, Writer::SameVersion).is_empty());
    }
}
