//! The parts of a topic that come from tables in the code: keys, columns, units.

use crate::guide::words;
use crate::measured;
use crate::syntax::keys::COOLDOWN_FILE;
use crate::syntax::keys::DEVICE_FILE;
use crate::syntax::keys::Key;
use crate::syntax::keys::TableSpec;
use crate::syntax::keys::UNITS;

/// What stands in the place of a line such as `{{keys device}}`: the same few marks as a topic; none for other lines.
pub fn expanded(line: &str) -> Option<String> {
    match line.strip_prefix("{{")?.strip_suffix("}}")? {
        "keys device" => Some(tables(DEVICE_FILE.root)),
        "keys cooldown" => Some(tables(COOLDOWN_FILE.root)),
        "columns" => Some(columns()),
        "units" => Some(units()),
        _ => None,
    }
}

/// A section per table, the top level first; tables inside a table follow it.
fn tables(root: &'static TableSpec) -> String {
    let mut text = format!("## The top level\n\n{}", list(root));
    sections(root, &mut text);
    text
}

fn sections(around: &'static TableSpec, text: &mut String) {
    for key in around.keys {
        let Some(table) = key.table() else { continue };
        let header = words::takes(&key.kind, None);
        let header = header.rsplit_once(' ').map_or(header.as_str(), |(_, header)| header);
        text.push_str(&format!("\n## {header}: {}\n\n{}", key.doc, list(table)));
        sections(table, text);
    }
}

fn list(table: &TableSpec) -> String {
    table.keys.iter().map(item).collect()
}

fn item(key: &Key) -> String {
    let takes = words::capital(&words::takes(&key.kind, key.unit()));
    let remark = words::remark(key).map(|remark| format!(" {remark}.")).unwrap_or_default();
    format!("- `{}`: {}. {takes}.{remark}\n", key.name, key.doc)
}

fn columns() -> String {
    measured::COLUMNS.iter().map(|(column, name)| format!("- `{name}`: {}.\n", column.meaning())).collect()
}

fn units() -> String {
    UNITS.iter().map(|unit| format!("- `_{}`: {} ({})\n", unit.suffix, unit.words, unit.quantity)).collect()
}
