//! `guide` as a user runs it. Every example of every topic is run: commands print what is shown, files and parts of files
//! pass `check` beside the starter files, or fail as the topic says.

use std::fs;
use std::path::Path;
use std::path::PathBuf;

use edgesheet::syntax::keys::COOLDOWN_FILE;
use edgesheet::syntax::keys::DEVICE_FILE;
use edgesheet::syntax::keys::Key;
use edgesheet::syntax::keys::TableSpec;
use serde_json::Value;

use crate::program::fresh;
use crate::program::repository;
use crate::program::run;
use crate::readme::fences;

/// Names of all topics, as the program lists them.
fn topics() -> Vec<String> {
    let list = run(&repository(), "guide").answer();
    let rows: Vec<&str> = list.lines().skip(2).filter(|line| !line.is_empty()).collect();
    let (last, rows) = rows.split_last().unwrap();
    assert!(last.starts_with("`edgesheet guide TOPIC`"), "{list}");
    rows.iter().filter(|row| !row.starts_with(' ')).map(|row| row.split(' ').next().unwrap().to_owned()).collect()
}

fn topic_text(name: &str) -> String {
    fs::read_to_string(repository().join(format!("src/guide/{name}.md"))).unwrap()
}

#[test]
fn every_topic_is_listed_and_fits_a_narrow_page() {
    let topics = topics();
    for name in ["start", "device", "cooldown", "readings", "conventions", "polarity", "mixing", "contacts", "meters"] {
        assert!(topics.iter().any(|topic| topic == name), "{name}");
    }
    let files = crate::program::names(&repository().join("src/guide")).into_iter();
    assert_eq!(files.filter(|name| name.ends_with(".md")).count(), topics.len(), "a topic is not listed");
    for topic in topics {
        let page = run(&repository(), &format!("guide {topic}")).answer();
        assert!(!page.contains('\u{1b}'), "{topic} has control sequences in a pipe");
        assert!(!page.contains("{{"), "{topic} has a part that was not filled in");
        let wide = |line: &&str| line.chars().count() > 80 && !line.starts_with("    ");
        assert_eq!(page.lines().find(wide), None, "{topic}");
        assert_eq!(page, run(&repository(), &format!("guide {topic}")).answer());
    }
}

#[test]
fn an_unknown_topic_is_answered_with_the_one_that_was_meant() {
    for (word, hint) in [("polarty", "did you mean `polarity`?"), ("colours", "the topics are start, ")] {
        let ran = run(&repository(), &format!("guide {word}"));
        assert_eq!((ran.code, ran.out.as_str()), (2, ""));
        assert!(ran.err.contains(hint), "{}", ran.err);
    }
    assert_eq!(run(&repository(), "guide device --man").code, 2, "one thing at a time");
}

/// A topic or an answer of `check` that tells people to type a command names one that the program has.
#[test]
fn commands_that_the_guide_names_exist() {
    let commands = crate::help::commands();
    let folder = crate::program::with_demo("guide/named", "top-gated-bar");
    run(&folder, "sheet device.toml -o out").answer();
    let checked = run(&folder, "check out/KR-0417_expected_r1.pdf").answer();
    let texts = topics().into_iter().map(|topic| topic_text(&topic)).chain([checked]);
    let text = texts.collect::<Vec<_>>().join("\n").replace('\n', " ");
    let named: Vec<&str> = text.split("edgesheet ").skip(1).filter_map(|rest| rest.split([' ', '`']).next()).collect();
    assert!(named.len() > 20 && named.contains(&"verify"), "{named:?}");
    for word in named {
        assert!(commands.iter().any(|command| command == word), "`edgesheet {word}` is no command");
    }
}

fn every_key(table: &'static TableSpec) -> Vec<&'static Key> {
    let inner = table.keys.iter().filter_map(Key::table).flat_map(every_key);
    table.keys.iter().chain(inner).collect()
}

/// The reference stands nowhere but in the tables of keys.
#[test]
fn every_key_is_explained() {
    for (topic, file) in [("device", &DEVICE_FILE), ("cooldown", &COOLDOWN_FILE)] {
        let page = run(&repository(), &format!("guide {topic}")).answer();
        let flat = page.split_whitespace().collect::<Vec<_>>().join(" ");
        for key in every_key(file.root) {
            assert!(flat.contains(&format!("- `{}`: {}.", key.name, key.doc)), "{topic} {}", key.name);
        }
        assert!(topic_text(topic).lines().count() < 100, "{topic} repeats the reference");
    }
}

/// The starter files in a fresh folder.
fn starter(name: &str) -> PathBuf {
    let folder = fresh(name);
    run(&folder, "start .").answer();
    folder
}

#[test]
fn every_example_holds() {
    let mut examples = 0;
    for topic in topics() {
        for (at, (words, block)) in fences(&topic_text(&topic)).into_iter().enumerate() {
            let folder = starter(&format!("guide/{topic}-{at}"));
            let words: Vec<&str> = words.split(' ').collect();
            match words.as_slice() {
                ["sh"] => commands(&folder, &block),
                ["text"] => lines_to_type(&folder, &block),
                ["toml", file, expected @ ..] => {
                    merge(&folder.join(format!("{file}.toml")), &block);
                    checked(&folder, &[topic.as_str(), *file], expected);
                }
                ["csv", expected @ ..] => {
                    fs::write(folder.join("readings.csv"), &block).unwrap();
                    checked(&folder, &[topic.as_str(), "readings"], expected);
                }
                other => panic!("{topic}: no example of kind {other:?}"),
            }
            examples += 1;
        }
    }
    assert!(examples >= 30, "{examples} examples");
}

/// `$ edgesheet …` and what it prints.
fn commands(folder: &Path, block: &str) {
    for part in format!("\n{block}").split("\n$ edgesheet ").skip(1) {
        let (line, shown) = part.split_once('\n').unwrap_or((part, ""));
        match line.split_once(" > ") {
            Some((line, file)) => fs::write(folder.join(file), run(folder, line).answer()).unwrap(),
            None => assert_eq!(run(folder, line).answer().trim_end(), shown.trim_end(), "{line}"),
        }
    }
}

/// Lines to type whose answers are not shown; what the shell or another program does with them is left out.
fn lines_to_type(folder: &Path, block: &str) {
    for line in block.lines().filter_map(|line| line.split_once("edgesheet ")).map(|(_, line)| line) {
        let line = line.split(" > ").next().unwrap().trim_end_matches(')');
        if !line.starts_with('.') && !line.starts_with('1') {
            assert!(!run(folder, line).answer().is_empty(), "{line}");
        }
    }
}

/// Passes, or fails with the code that the topic names.
fn checked(folder: &Path, what: &[&str], expected: &[&str]) {
    let ran = run(folder, "check device.toml cooldown.toml");
    match expected {
        [] => assert_eq!(ran.code, 0, "{what:?}: {}", ran.err),
        ["fault", code] => {
            assert_eq!(ran.code, 2, "{what:?} passes");
            assert!(ran.err.contains(&format!("fault[{code}]")), "{what:?}: {}", ran.err);
        }
        other => panic!("{other:?}"),
    }
}

/// Tables of the part stand in the place of those of the same name (a table that can stand several times: of the same
/// header and the same first line), or at the end.
fn merge(path: &Path, part: &str) {
    let mut tables = tables(&fs::read_to_string(path).unwrap());
    for table in self::tables(part).into_iter().filter(|table| !table.is_empty()) {
        match tables.iter_mut().find(|known| identity(known) == identity(&table)) {
            Some(known) => *known = table,
            None => tables.push(table),
        }
    }
    fs::write(path, tables.concat()).unwrap();
}

/// What stands before the first header, then each table.
fn tables(text: &str) -> Vec<String> {
    let mut found = vec![String::new()];
    for line in text.lines() {
        if line.starts_with('[') {
            found.push(String::new());
        }
        *found.last_mut().unwrap() += &format!("{line}\n");
    }
    found
}

fn identity(table: &str) -> Vec<&str> {
    let mut lines = table.lines().map(|line| line.split('#').next().unwrap().trim());
    let header = lines.next().unwrap_or_default();
    if header.starts_with("[[") { vec![header, lines.next().unwrap_or_default()] } else { vec![header] }
}

fn schema(file: &str) -> Value {
    run(&repository(), &format!("guide --schema {file}")).json()
}

/// What stands in the tables of keys stands in the schema: every key, whether it is needed, and closed tables.
#[test]
fn a_schema_says_what_the_tables_of_keys_say() {
    for (name, file) in [("device", &DEVICE_FILE), ("cooldown", &COOLDOWN_FILE)] {
        let schema = schema(name);
        assert_eq!(schema["$schema"], "https://json-schema.org/draft/2020-12/schema");
        compare(&schema, &schema, file.root);
    }
}

fn compare(schema: &Value, here: &Value, table: &'static TableSpec) {
    assert_eq!(here["additionalProperties"], false, "{}", table.name);
    let properties = here["properties"].as_object().unwrap();
    assert_eq!(properties.len(), table.keys.len(), "{}", table.name);
    let required: Vec<&str> = here["required"].as_array().unwrap().iter().map(|key| key.as_str().unwrap()).collect();
    let needed = |key: &Key| key.required && !key.alone;
    assert!(table.keys.iter().all(|key| needed(key) == required.contains(&key.name)), "{}", table.name);
    let of_one = &here["anyOf"][0]["required"];
    let said = |key: &Key| of_one.as_array().is_some_and(|keys| keys.iter().any(|name| name == key.name));
    assert!(table.keys.iter().all(|key| (key.required && key.alone) == said(key)), "{}", table.name);
    for key in table.keys {
        let said = properties[key.name]["description"].as_str().unwrap();
        assert!(said.to_lowercase().starts_with(&key.doc.to_lowercase()), "{}: {said}", key.name);
        if let Some(unit) = key.unit() {
            assert!(said.contains(unit.words), "{}: {said}", key.name);
        }
        if let Some(inner) = key.table() {
            compare(schema, &schema["$defs"][inner.name], inner);
        }
    }
}

#[test]
fn completions_and_the_manual_page_name_every_command() {
    let commands = crate::help::commands();
    for shell in ["bash", "zsh", "fish", "elvish", "powershell"] {
        let text = run(&repository(), &format!("guide --completions {shell}")).answer();
        assert!(commands.iter().all(|command| text.contains(command)), "{shell}");
        assert_eq!(text, run(&repository(), &format!("guide --completions {shell}")).answer());
    }
    let page = run(&repository(), "guide --man").answer();
    for command in &commands {
        assert!(page.contains(&format!(".SH {}\n", command.to_uppercase())), "{command}");
    }
    assert_eq!(page, run(&repository(), "guide --man").answer());
    assert_eq!(run(&repository(), "guide --completions tcsh").code, 2);
}
