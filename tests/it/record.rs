//! The record: its keys are frozen, its schema describes it, and it alone is enough to start again.

use std::collections::BTreeSet;
use std::fs;
use std::path::Path;

use serde_json::Value;

use crate::program::fresh;
use crate::program::repository;
use crate::program::run;
use crate::program::with_demo;

/// A record of a demo device, with its cooldown or without.
fn record(folder: &Path, inputs: &str) -> Value {
    run(folder, &format!("sheet {inputs} -o out --replace")).answer();
    let json = crate::program::files(&folder.join("out")).into_iter().find(|(name, _)| name.ends_with(".json"));
    let text = fs::read_to_string(json.unwrap().1).unwrap();
    fs::remove_dir_all(folder.join("out")).unwrap();
    serde_json::from_str(&text).unwrap()
}

fn records(name: &str) -> Vec<Value> {
    let demos = ["top-gated-bar", "two-gates-and-step", "bipolar-graphene"];
    let all = demos.iter().flat_map(|demo| {
        let folder = with_demo(&format!("record/{name}/{demo}"), demo);
        ["device.toml", "device.toml cooldown.toml --limit 3 --paper letter"].map(|inputs| record(&folder, inputs))
    });
    all.collect()
}

/// Follows `$ref` to its definition.
fn resolved<'a>(schema: &'a Value, root: &'a Value) -> &'a Value {
    match schema["$ref"].as_str().and_then(|name| name.strip_prefix("#")) {
        Some(pointer) => resolved(root.pointer(pointer).expect("a definition"), root),
        None => schema,
    }
}

/// The types that a schema allows, sorted: `number|null`. Numbers of all kinds are one type.
fn kinds(schema: &Value, root: &Value, found: &mut BTreeSet<String>) {
    let schema = resolved(schema, root);
    for part in ["anyOf", "oneOf"].iter().filter_map(|key| schema[*key].as_array()).flatten() {
        kinds(part, root, found);
    }
    match &schema["type"] {
        Value::String(kind) => _ = found.insert(kind.clone()),
        Value::Array(list) => found.extend(list.iter().filter_map(Value::as_str).map(str::to_owned)),
        _ => {}
    }
}

/// Every key as a line `points[].name: string`.
fn keys(schema: &Value, (path, root): (&str, &Value), found: &mut BTreeSet<String>) {
    let schema = resolved(schema, root);
    for part in ["anyOf", "oneOf"].iter().filter_map(|key| schema[*key].as_array()).flatten() {
        keys(part, (path, root), found);
    }
    for (name, property) in schema["properties"].as_object().into_iter().flatten() {
        let path = if path.is_empty() { name.clone() } else { format!("{path}.{name}") };
        let mut of = BTreeSet::new();
        kinds(property, root, &mut of);
        found.insert(format!("{path}: {}", of.into_iter().collect::<Vec<_>>().join("|")));
        keys(property, (&path, root), found);
    }
    if schema["items"].is_object() {
        keys(&schema["items"], (&format!("{path}[]"), root), found);
    }
}

/// Formats are kept for ever. A key that was written once keeps its name, its place and its kind; a new one is added to
/// the list of the next release.
#[test]
fn the_keys_of_format_1_are_frozen() {
    let schema = edgesheet::archive::schema();
    let mut now = BTreeSet::new();
    keys(&schema, ("", &schema), &mut now);
    let path = repository().join("tests/golden/record-keys.txt");
    let kept: BTreeSet<String> = fs::read_to_string(path).unwrap().lines().map(str::to_owned).collect();
    let gone: Vec<&String> = kept.difference(&now).collect();
    assert!(gone.is_empty(), "keys are never taken away or changed: {gone:#?}");
    let new: Vec<&String> = now.difference(&kept).collect();
    assert!(new.is_empty(), "add to tests/golden/record-keys.txt, if they shall be kept for ever:\n{new:#?}");
    assert!(kept.len() > 90, "{}", kept.len());
}

/// A schema describes a value as far as `type`, `properties`, `required`, `items`, `anyOf` and `oneOf` go (JSON Schema
/// core and validation, draft 2020-12). Every key has to be described.
fn check(value: &Value, schema: &Value, (path, root): (&str, &Value)) -> Result<(), String> {
    let schema = resolved(schema, root);
    let choices: Vec<&Value> = ["anyOf", "oneOf"].iter().filter_map(|key| schema[*key].as_array()).flatten().collect();
    if !choices.is_empty() {
        let tried: Vec<_> = choices.iter().map(|one| check(value, one, (path, root))).collect();
        return if tried.iter().any(Result::is_ok) { Ok(()) } else { tried.into_iter().next_back().unwrap() };
    }
    let mut allowed = BTreeSet::new();
    kinds(schema, root, &mut allowed);
    let whole = value.as_f64().is_some_and(|number| number.fract() == 0.0);
    let fits = |kind: &String| match kind.as_str() {
        "object" => value.is_object(),
        "array" => value.is_array(),
        "string" => value.is_string(),
        "number" => value.is_number(),
        "integer" => whole,
        "boolean" => value.is_boolean(),
        "null" => value.is_null(),
        other => panic!("{other}"),
    };
    if !allowed.is_empty() && !allowed.iter().any(fits) {
        return Err(format!("{path}: {value} is none of {allowed:?}"));
    }
    if let Some(words) = schema["enum"].as_array() {
        words.contains(value).then_some(()).ok_or_else(|| format!("{path}: {value} is none of {words:?}"))?;
    }
    for name in schema["required"].as_array().into_iter().flatten().filter_map(Value::as_str) {
        value.get(name).map(|_| ()).ok_or_else(|| format!("{path}: {name} is missing"))?;
    }
    if let (Some(fields), Some(described)) = (value.as_object(), schema["properties"].as_object()) {
        for (name, field) in fields {
            let schema = described.get(name).ok_or_else(|| format!("{path}: {name} is not described"))?;
            check(field, schema, (&format!("{path}.{name}"), root))?;
        }
    }
    let items = value.as_array().into_iter().flatten().filter(|_| schema["items"].is_object());
    items.into_iter().try_for_each(|item| check(item, &schema["items"], (&format!("{path}[]"), root)))
}

#[test]
fn every_record_is_as_its_schema_says() {
    let schema = edgesheet::archive::schema();
    for record in records("schema") {
        check(&record, &schema, ("record", &schema)).unwrap();
        let mut without = record.clone();
        without["points"][0].as_object_mut().unwrap().remove("name");
        assert!(check(&without, &schema, ("record", &schema)).unwrap_err().contains("name is missing"));
    }
}

#[test]
fn the_program_prints_the_schema() {
    assert_eq!(run(&repository(), "guide --schema record").json(), edgesheet::archive::schema());
}

/// JSON Schema allows what it does not forbid: a reader with today's schema must take tomorrow's record.
#[test]
fn the_schema_allows_keys_of_later_versions() {
    let schema = edgesheet::archive::schema();
    assert!(!schema.to_string().contains("additionalProperties\":false"));
    assert!(schema["$schema"].as_str().unwrap().contains("2020-12"));
}

/// Every input whole, with its size and its SHA-256 by a tool of others where there is one; nothing else is needed to
/// start again.
#[test]
fn a_record_alone_is_enough_to_compute_again() {
    let folder = with_demo("record/alone", "top-gated-bar");
    let first = record(&folder, "device.toml cooldown.toml --limit 3");
    let again = fresh("record/again");
    for input in first["inputs"].as_array().unwrap() {
        let (name, text) = (input["name"].as_str().unwrap(), input["text"].as_str().unwrap());
        assert_eq!(input["bytes"].as_u64().unwrap(), text.len() as u64);
        fs::write(again.join(name), text).unwrap();
        let original = fs::read(folder.join(name)).unwrap();
        assert!(original == text.as_bytes(), "{name}");
    }
    let limit = first["options"]["limit_in_u"].as_f64().unwrap();
    assert!(record(&again, &format!("device.toml cooldown.toml --limit {limit}")) == first);
}

/// The exact value of h/e² from h = 6.62607015e-34 J s and e = 1.602176634e-19 C (SI Brochure, 9th edition): the float
/// beside each fraction is that fraction of it.
#[test]
fn floats_stand_beside_their_fractions() {
    let klitzing = 6.626_070_15e-34 / (1.602_176_634e-19 * 1.602_176_634e-19);
    let mut checked = 0;
    for record in records("floats") {
        for point in record["points"].as_array().unwrap() {
            for side in point["polarities"].as_array().unwrap() {
                for reading in side["readings"].as_array().unwrap() {
                    let Some(exact) = reading["exact"].as_str() else { continue };
                    let (top, below) = exact.split_once('/').unwrap_or((exact, "1"));
                    let value = top.parse::<f64>().unwrap() / below.parse::<f64>().unwrap();
                    let ohm = reading["ohm"].as_f64().unwrap();
                    assert!((ohm - value * klitzing).abs() < 1e-9, "{exact} beside {ohm}");
                    checked += 1;
                }
            }
        }
    }
    assert!(checked > 100, "{checked}");
}

#[test]
fn a_record_is_text_that_a_person_can_read() {
    let folder = with_demo("record/lines", "top-gated-bar");
    run(&folder, "sheet device.toml cooldown.toml -o out").answer();
    let text = fs::read_to_string(folder.join("out/KR-0417_KR-0417-c3_r1.json")).unwrap();
    assert!(text.starts_with("{\n  \"format\": 1,\n  \"about\": "), "{}", &text[..60]);
    assert!(
        text.contains("            [\"3\", \"0\", \"0\", \"0\", \"0\", \"-3\"],\n"),
        "a matrix has its rows on lines"
    );
    for drawing in ["\"words\"", "\"strip\"", "\"charts\"", "\"drawn\""] {
        assert!(!text.contains(drawing), "{drawing} is of no use to a reader");
    }
}
