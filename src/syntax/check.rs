//! Walks a tree along the table of keys and keeps what is right.

use crate::diagnostic::Diagnostic;
use crate::diagnostic::Findings;
use crate::diagnostic::Severity;

use crate::syntax::Entry;
use crate::syntax::FileSpec;
use crate::syntax::Node;
use crate::syntax::Table;
use crate::syntax::Value;
use crate::syntax::keys::Key;
use crate::syntax::keys::Kind;
use crate::syntax::keys::Status;
use crate::syntax::keys::TableSpec;
use crate::syntax::kind;
use crate::syntax::lookup;
use crate::syntax::lookup::Here;
use crate::syntax::toml_fault::Spoiled;

/// What holds for the whole walk.
pub(super) struct Context<'a> {
    /// The table of keys.
    pub file: &'static FileSpec,
    /// Where faults of syntax stand: values there are not judged, and nothing at all is called missing.
    pub spoiled: &'a Spoiled,
}

/// The checked top level.
pub(super) fn root(tree: &Table, context: &Context<'_>, findings: &mut Findings) -> Table {
    let here = Here { table: context.file.root, header: "the top level" };
    let mut walk = Walk { context, findings, tree, misplaced: Vec::new() };
    let mut root = walk.entries(tree, here);
    root.refused.append(&mut walk.misplaced);
    walk.missing(&root, here);
    root
}

struct Walk<'a> {
    context: &'a Context<'a>,
    findings: &'a mut Findings,
    /// The top level as written.
    tree: &'a Table,
    /// Keys of the top level that stand below a table; they are not missing as well.
    misplaced: Vec<String>,
}

impl Walk<'_> {
    fn table(&mut self, raw: &Table, here: Here<'_>) -> Table {
        let table = self.entries(raw, here);
        self.missing(&table, here);
        table
    }

    fn entries(&mut self, raw: &Table, here: Here<'_>) -> Table {
        let mut kept = Table { place: raw.place.clone(), entries: Vec::new(), refused: Vec::new() };
        for entry in &raw.entries {
            match here.table.key(&entry.key) {
                Some(key) => match self.entry(entry, key, here.table) {
                    Some(node) => kept.entries.push(Entry { node, ..entry.clone() }),
                    None => kept.refused.push(entry.key.clone()),
                },
                None => kept.refused.extend(self.unknown(entry, here)),
            }
        }
        kept
    }

    fn unknown(&mut self, entry: &Entry, here: Here<'_>) -> Option<String> {
        if self.context.spoiled.touches(&entry.key_place) {
            return None;
        }
        let (fault, meant) = lookup::unknown(entry, here, self.context.file);
        // A key of the top level that stands elsewhere is not missing there as well.
        if matches!(fault.code, "below-a-table" | "other-table") {
            self.misplaced.push(entry.key.clone());
        }
        self.findings.push(fault);
        meant.map(str::to_owned)
    }

    fn entry(&mut self, entry: &Entry, key: &'static Key, around: &'static TableSpec) -> Option<Node> {
        self.findings.extend(status(entry, key, around));
        let header = lookup::header(key, around.name);
        match (key.kind, &entry.node.value) {
            (Kind::One(table), Value::Table(inner)) => {
                let inner = self.table(inner, Here { table, header: &header });
                Some(Node { value: Value::Table(inner), ..entry.node.clone() })
            }
            (Kind::Many(table), Value::List(list)) if is_tables(list) => {
                Some(self.tables(list, &entry.node, Here { table, header: &header }))
            }
            (Kind::Open(kind), Value::Table(inner)) => {
                let inner = self.open(inner, kind, Here { table: around, header: &header });
                Some(Node { value: Value::Table(inner), ..entry.node.clone() })
            }
            _ => self.value(entry, key, &header),
        }
    }

    fn tables(&mut self, list: &[Node], node: &Node, here: Here<'_>) -> Node {
        let tables = list.iter().filter_map(|item| match &item.value {
            Value::Table(inner) => Some(Node { value: Value::Table(self.table(inner, here)), ..item.clone() }),
            _ => None,
        });
        let tables = tables.collect();
        Node { value: Value::List(tables), ..node.clone() }
    }

    /// A table with keys of the user's choice.
    fn open(&mut self, raw: &Table, kind: &'static Kind, here: Here<'_>) -> Table {
        let mut kept = Table { place: raw.place.clone(), entries: Vec::new(), refused: Vec::new() };
        for entry in &raw.entries {
            if self.is_misplaced(entry, here) {
                self.misplaced.push(entry.key.clone());
            } else if self.accepts(&entry.node, kind, &entry.key) {
                kept.entries.push(entry.clone());
            } else {
                kept.refused.push(entry.key.clone());
            }
        }
        kept
    }

    /// `format` below `[contacts]`, where any key could stand: misplaced if the top level has none.
    fn is_misplaced(&mut self, entry: &Entry, here: Here<'_>) -> bool {
        let plain = here.table.name.is_empty() && here.table.key(&entry.key).is_some_and(lookup::is_plain);
        let misplaced = plain && self.tree.node(&entry.key).is_none();
        if misplaced {
            self.findings.push(lookup::below(&entry.key, here.header).at(&entry.key_place));
        }
        misplaced
    }

    fn value(&mut self, entry: &Entry, key: &'static Key, header: &str) -> Option<Node> {
        match key.kind {
            Kind::One(_) | Kind::Many(_) | Kind::Open(_) => {
                self.findings.push(wrong_brackets(entry, key, header));
                None
            }
            _ => self.accepts(&entry.node, &key.kind, key.name).then(|| entry.node.clone()),
        }
    }

    fn accepts(&mut self, node: &Node, kind: &'static Kind, word: &str) -> bool {
        if self.context.spoiled.touches(&node.place) {
            return false;
        }
        let found = kind::judge(kind, word, node);
        let good = found.iter().all(|finding| finding.severity == Severity::Notice);
        self.findings.extend(found);
        good
    }

    fn missing(&mut self, table: &Table, here: Here<'_>) {
        if !self.context.spoiled.is_empty() {
            return;
        }
        let bench = !table.lacks("bench");
        let needed = |key: &&Key| key.required && !(key.alone && bench);
        for key in here.table.keys.iter().filter(needed).filter(|key| table.lacks(key.name)) {
            let what =
                if key.table().is_some() { lookup::header(key, here.table.name) } else { format!("`{}`", key.name) };
            let message = match here.table.name {
                "" => format!("this {} has no {what}", self.context.file.what),
                _ => format!("{} has no {what}", here.header),
            };
            let fault = Diagnostic::fault("missing-key", message).at(&table.place);
            self.findings.push(fault.hint(format!("add {what}: {}", key.doc)));
        }
    }
}

fn is_tables(list: &[Node]) -> bool {
    list.iter().all(|node| matches!(node.value, Value::Table(_)))
}

fn status(entry: &Entry, key: &Key, around: &TableSpec) -> Option<Diagnostic> {
    let word = match key.kind {
        Kind::One(_) | Kind::Many(_) if around.name.is_empty() => lookup::header(key, ""),
        Kind::Open(_) => lookup::header(key, around.name),
        _ => format!("`{}`", key.name),
    };
    let finding = match key.status {
        Status::Applied => return None,
        Status::Stated => {
            Diagnostic::notice("stated-only", format!("{word} is stated and checked, but not applied yet"))
                .hint("no result depends on it; it can stay")
        }
        Status::NotYet(possible) => Diagnostic::fault(
            "not-computed-yet",
            format!("{word} is not computed yet, and results without it would be wrong"),
        )
        .hint(possible),
    };
    Some(finding.at(&entry.key_place))
}

fn wrong_brackets(entry: &Entry, key: &Key, header: &str) -> Diagnostic {
    let (message, hint) = match key.kind {
        Kind::Many(_) => {
            (format!("`{}` can stand several times", key.name), format!("write {header} in double brackets"))
        }
        _ => (format!("`{}` is a table that stands once", key.name), format!("write {header} in single brackets")),
    };
    Diagnostic::fault("wrong-brackets", message).at(&entry.key_place).hint(hint)
}
