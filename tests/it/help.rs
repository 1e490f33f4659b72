//! Every command explains itself, with an example that runs.

use crate::program::Ran;
use crate::program::fresh;
use crate::program::program;
use crate::program::ran;
use crate::program::repository;
use crate::program::run;

/// The commands that the program lists.
pub fn commands() -> Vec<String> {
    let help = run(&repository(), "--help").answer();
    let list = help.split("Commands:").nth(1).unwrap().split("\n\n").next().unwrap().to_owned();
    let found: Vec<String> =
        list.lines().filter_map(|line| line.split_whitespace().next()).map(str::to_owned).collect();
    assert!(found.iter().any(|command| command == "sheet") && found.len() >= 3, "{found:?}");
    found
}

/// Runs an example line from the repository, with what it writes sent to a fresh folder.
pub fn example(line: &str, name: &str) -> Ran {
    let mut words: Vec<String> = line.split_whitespace().skip(1).map(str::to_owned).collect();
    if let Some(at) = words.iter().position(|word| word == "-o") {
        words[at + 1] = fresh(name).display().to_string();
    }
    if words.first().is_some_and(|command| command == "start") {
        words[1] = fresh(name).display().to_string();
    }
    ran(&mut program(&repository(), words))
}

#[test]
fn the_example_of_every_command_runs() {
    for command in commands() {
        let help = run(&repository(), &format!("{command} --help")).answer();
        let examples = help.split("Example:").nth(1).unwrap_or_else(|| panic!("{command} shows no example"));
        let lines: Vec<&str> = examples.lines().map(str::trim).filter(|line| line.starts_with("edgesheet ")).collect();
        assert!(!lines.is_empty(), "{command} shows no example");
        for line in lines {
            assert!(line.starts_with(&format!("edgesheet {command} ")), "{line} is no example of {command}");
            let said = example(line, &format!("help/{command}")).answer();
            assert!(!said.is_empty(), "{line} says nothing");
        }
    }
}

#[test]
fn short_and_long_help_and_version_end_well() {
    for line in ["-h", "--help", "-V", "--version", "sheet -h", "expect -h", "isolate -h"] {
        assert!(!run(&repository(), line).answer().is_empty(), "{line}");
    }
    assert_eq!(run(&repository(), "--version").out, format!("edgesheet {}\n", env!("CARGO_PKG_VERSION")));
}

#[test]
fn mistakes_on_the_command_line_end_with_two() {
    for line in [
        "",
        "sheeet",
        "sheet",
        "expect",
        "isolate a.toml",
        "expect --colour a.toml",
        "expect a.toml --all --reading 1-2,3-4",
    ] {
        let ran = run(&repository(), line);
        assert_eq!((ran.code, ran.out.as_str()), (2, ""), "{line}");
        assert!(ran.err.contains("Usage"), "{line}: {}", ran.err);
    }
}
