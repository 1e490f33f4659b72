//! Which kind of file a text is, by what stands in it.

use std::sync::Arc;

use crate::diagnostic::Source;

use crate::syntax::Entry;
use crate::syntax::FileSpec;
use crate::syntax::Value;
use crate::syntax::keys::Kind;
use crate::syntax::read::parse;

/// A file with more faults of syntax beyond the number of its keys is prose, or a file of another kind.
const MOST_FAULTS: usize = 5;

/// The kind of file that the top level of a text fits best; none where it fits none, or several alike. A few faults of
/// syntax do not matter here.
pub fn recognise(source: &Arc<Source>, kinds: &[&'static FileSpec]) -> Option<&'static FileSpec> {
    let (tree, faults) = parse(source);
    let fit = |file: &FileSpec| tree.entries.iter().filter(|entry| fits(entry, file)).count();
    let best = kinds.iter().max_by_key(|file| fit(file))?;
    let alike = kinds.iter().filter(|file| fit(file) == fit(best)).count();
    // One name in common with the file of another program says nothing: half of them must be ours.
    let ours = fit(best) > 0 && fit(best) * 2 >= tree.entries.len();
    (ours && alike == 1 && faults.len() <= fit(best) + MOST_FAULTS).then_some(best)
}

/// Whether the file has this key, and a table under it exactly where one belongs.
fn fits(entry: &Entry, file: &FileSpec) -> bool {
    let is_table = match &entry.node.value {
        Value::Table(_) => true,
        Value::List(list) => list.iter().all(|node| matches!(node.value, Value::Table(_))),
        _ => false,
    };
    let key = file.root.key(&entry.key);
    key.is_some_and(|key| matches!(key.kind, Kind::One(_) | Kind::Many(_) | Kind::Open(_)) == is_table)
}

/// The text under a key at the top level, or under a key of a table there: `[device] id`.
pub fn text_at(source: &Arc<Source>, path: &[&str]) -> Option<String> {
    let (tree, _) = parse(source);
    match path {
        [key] => tree.text(key),
        [table, key] => tree.table(table)?.text(key),
        _ => None,
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::syntax::keys::COOLDOWN_FILE;
    use crate::syntax::keys::DEVICE_FILE;

    #[test]
    fn files_are_told_apart_by_their_tables() {
        for (text, what) in [
            ("format = 1\n[device]\nid = \"a\"\n[mesa]\n", Some("device file")),
            ("format = 1\ndevice = \"a\"\n", Some("cooldown file")),
            ("[mesa\nlength_um = 3\n[[contact]]\nname = \"1\"\n", Some("device file")),
            ("[source]\ncurrent_nA = 3\n", Some("cooldown file")),
            ("format = 1\n", None),
            ("[package]\nname = \"x\"\n[lib]\n[[bench]]\nname = \"y\"\n", None),
            ("[package]\nname = \"x\"\n", None),
            ("", None),
        ] {
            let found = recognise(&Source::new("a.toml", text), &[&DEVICE_FILE, &COOLDOWN_FILE]);
            assert_eq!(found.map(|file| file.what), what, "{text}");
        }
    }

    #[test]
    fn a_text_that_shows_files_is_none() {
        let prose = "A bar is described so:\n".repeat(20) + "[device]\nid = \"a\"\n[mesa]\n";
        assert!(recognise(&Source::new("a.md", prose), &[&DEVICE_FILE, &COOLDOWN_FILE]).is_none());
    }

    #[test]
    fn identities_are_found() {
        let device = Source::new("a.toml", "[device]\nid = \"a\"\n");
        assert_eq!(text_at(&device, &["device", "id"]).as_deref(), Some("a"));
        assert_eq!(text_at(&device, &["device"]), None);
    }
}
