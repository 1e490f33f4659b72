//! JSON Schemas of the device file and the cooldown file, draft 2020-12, made from the tables of keys alone.
//!
//! A schema says less than `check`: what needs a second key or the geometry to be judged has no place in it.

use serde_json::Map;
use serde_json::Value;
use serde_json::json;

use crate::guide::words;
use crate::syntax::FileSpec;
use crate::syntax::keys::Key;
use crate::syntax::keys::Kind;
use crate::syntax::keys::Range;
use crate::syntax::keys::Status;
use crate::syntax::keys::TableSpec;

/// The schema as JSON text with a line end.
pub fn schema(file: &'static FileSpec) -> String {
    let mut tables = Map::new();
    collect(file.root, &mut tables);
    let mut root = Map::new();
    root.insert("$schema".into(), json!("https://json-schema.org/draft/2020-12/schema"));
    root.insert("title".into(), json!(format!("edgesheet {}", file.what)));
    root.extend(table(file.root));
    root.insert("$defs".into(), Value::Object(tables));
    format!("{:#}\n", Value::Object(root))
}

/// Every table below this one, by name.
fn collect(spec: &'static TableSpec, found: &mut Map<String, Value>) {
    for inner in spec.keys.iter().filter_map(Key::table) {
        if found.insert(inner.name.into(), Value::Object(table(inner))).is_none() {
            collect(inner, found);
        }
    }
}

/// A table is closed: a key that it does not name is a slip.
fn table(spec: &TableSpec) -> Map<String, Value> {
    let keys = spec.keys.iter().map(|one| (one.name.to_owned(), key(one))).collect();
    let names = |keep: fn(&&Key) -> bool| spec.keys.iter().filter(keep).map(|key| key.name).collect::<Vec<_>>();
    let required = names(|key| key.required && !key.alone);
    let (alone, needed) = (names(|key| key.alone), names(|key| key.required && key.alone));
    let mut object = Map::new();
    object.insert("type".into(), json!("object"));
    object.insert("properties".into(), Value::Object(keys));
    object.insert("required".into(), json!(required));
    object.insert("additionalProperties".into(), json!(false));
    if !alone.is_empty() {
        object.insert("anyOf".into(), json!([{ "required": needed }, on_a_bench(&alone)]));
    }
    object
}

/// A bench has none of the keys that describe one device.
fn on_a_bench(alone: &[&str]) -> Value {
    let none: Map<String, Value> = alone.iter().map(|name| ((*name).to_owned(), json!(false))).collect();
    json!({ "required": ["bench"], "properties": none })
}

fn key(key: &Key) -> Value {
    let unit = key.unit();
    let mut described = match key.status {
        // What would be a fault when the file is read is one in the editor too.
        Status::NotYet(_) => object(json!({ "not": {} })),
        _ => object(kind(&key.kind)),
    };
    let takes = words::takes(&key.kind, unit);
    let more = words::remark(key).map(|remark| format!(" {remark}.")).unwrap_or_default();
    described.insert("description".into(), json!(format!("{}. Takes {takes}.{more}", words::capital(key.doc))));
    // Defaults are written as a user would; numbers, words in quotes, `true` and `false` are JSON as they stand.
    if let Ok(default) = serde_json::from_str::<Value>(key.default) {
        described.insert("default".into(), default);
    }
    Value::Object(described)
}

fn object(value: Value) -> Map<String, Value> {
    if let Value::Object(object) = value { object } else { Map::new() }
}

fn kind(kind: &Kind) -> Value {
    match kind {
        Kind::Text => json!({ "type": "string" }),
        Kind::Name => name(),
        Kind::Line => json!({ "type": "string", "minLength": 1 }),
        Kind::Count(from) => json!({ "type": "integer", "minimum": from, "maximum": 1_000_000 }),
        Kind::Boolean => json!({ "type": "boolean" }),
        Kind::Date => json!({ "type": "string", "format": "date", "pattern": "^[0-9]{4}-[0-9]{2}-[0-9]{2}$" }),
        Kind::Word(words) => json!({ "enum": words }),
        Kind::Number(range) | Kind::Length(range) => number(*range),
        Kind::Limits => json!({ "type": "array", "items": number(Range::Any), "minItems": 2, "maxItems": 2 }),
        Kind::Filling => filling(),
        Kind::WordOrFillings(words) => json!({ "anyOf": [{ "enum": words }, list(filling(), 1)] }),
        Kind::Shares => json!({ "anyOf": [share(), list(share(), 1)] }),
        Kind::Mixing => mixing(),
        Kind::NamePair => {
            json!({ "type": "array", "items": name(), "minItems": 2, "maxItems": 2, "uniqueItems": true })
        }
        Kind::NameList => json!({ "type": "array", "items": name(), "minItems": 2, "uniqueItems": true }),
        Kind::Corner => corner(),
        Kind::Outline => list(corner(), 3),
        Kind::Outlines => list(list(corner(), 3), 1),
        Kind::Groups => list(list(filling(), 1), 1),
        Kind::Names => list(name(), 1),
        Kind::Texts => list(json!({ "type": "string" }), 1),
        Kind::Open(inner) => json!({ "type": "object", "additionalProperties": self::kind(inner) }),
        Kind::One(table) => reference(table),
        Kind::Many(table) => json!({ "type": "array", "items": reference(table) }),
    }
}

fn reference(table: &TableSpec) -> Value {
    json!({ "$ref": format!("#/$defs/{}", table.name) })
}

fn list(items: Value, fewest: usize) -> Value {
    json!({ "type": "array", "items": items, "minItems": fewest })
}

/// One line without blanks at the ends and without curly brackets.
fn name() -> Value {
    json!({ "type": "string", "minLength": 1, "maxLength": 60, "pattern": "^[^\\s{}]([^\\t\\r\\n{}]*[^\\s{}])?$" })
}

fn number(range: Range) -> Value {
    match range {
        Range::Any => json!({ "type": "number" }),
        Range::Positive | Range::Magnitude => json!({ "type": "number", "exclusiveMinimum": 0 }),
        Range::NotNegative => json!({ "type": "number", "minimum": 0 }),
        Range::NotZero => json!({ "type": "number", "not": { "const": 0 } }),
    }
}

/// A number, or digits with a point or a stroke in quotes.
fn filling() -> Value {
    let quoted = "^[+-]?[0-9]+([.][0-9]+)?(/[0-9]+)?$";
    json!({ "anyOf": [{ "type": "number" }, { "type": "string", "pattern": quoted }] })
}

fn share() -> Value {
    let quoted = "^[+]?[0-9]+([.][0-9]+)?(/[0-9]+)?$";
    json!({ "anyOf": [{ "type": "number", "minimum": 0, "maximum": 1 }, { "type": "string", "pattern": quoted }] })
}

fn mixing() -> Value {
    let length = json!({
        "type": "object",
        "properties": { "length_um": number(Range::Positive) },
        "required": ["length_um"],
        "additionalProperties": false
    });
    json!({ "anyOf": [{ "enum": ["none", "full"] }, length] })
}

fn corner() -> Value {
    json!({ "type": "array", "items": number(Range::Any), "minItems": 2, "maxItems": 2 })
}
