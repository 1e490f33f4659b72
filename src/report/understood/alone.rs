//! What can be said of a cooldown file without its device: what it states, as it is written.

use crate::report::Understood;
use crate::syntax::Entry;
use crate::syntax::Node;
use crate::syntax::Table;
use crate::syntax::Value;

/// A cooldown file that was read without a device; `why` there was none.
pub fn understood_alone(file: &str, root: &Table, why: &str) -> Understood {
    let device = root.text("device").map(|id| format!(" of {id}")).unwrap_or_default();
    let tables = root.entries.iter().flat_map(entry_rows).collect();
    Understood::new(file, format!("cooldown file{device}, {why}"))
        .with("written", tables)
        .saying("not checked", vec!["names of contacts and points: they stand in the device file".to_owned()])
}

/// One row per table, several for tables in double brackets; plain keys as they stand.
fn entry_rows(entry: &Entry) -> Vec<Vec<String>> {
    match &entry.node.value {
        Value::Table(table) => vec![vec![format!("[{}]", entry.key), inside(table)]],
        Value::List(list) if list.iter().all(|node| matches!(node.value, Value::Table(_))) => {
            let tables = list.iter().filter_map(|node| match &node.value {
                Value::Table(table) => Some(table),
                _ => None,
            });
            tables.map(|table| vec![format!("[[{}]]", entry.key), inside(table)]).collect()
        }
        _ => vec![vec![entry.key.clone(), written(&entry.node)]],
    }
}

fn inside(table: &Table) -> String {
    let entries = table.entries.iter().map(|entry| format!("{} = {}", entry.key, written(&entry.node)));
    entries.collect::<Vec<_>>().join(", ")
}

fn written(node: &Node) -> String {
    match &node.value {
        Value::Text(text) => format!("\"{text}\""),
        Value::Whole(text) | Value::Decimal(text) | Value::Date(text) => text.clone(),
        Value::Boolean(truth) => truth.to_string(),
        Value::List(list) => format!("[{}]", list.iter().map(written).collect::<Vec<_>>().join(", ")),
        Value::Table(table) => format!("{{ {} }}", inside(table)),
    }
}
