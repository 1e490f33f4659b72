//! The README: what it says can be typed, and what it shows is what the program prints.

use std::fs;

use crate::help::example;
use crate::program::fresh;
use crate::program::repository;
use crate::program::run;

/// The fenced blocks, each with the word behind its opening fence.
pub fn fences(text: &str) -> Vec<(String, String)> {
    let mut found = Vec::new();
    let mut open: Option<(String, String)> = None;
    for line in text.lines() {
        match (open.as_mut(), line.strip_prefix("```")) {
            (Some(_), Some(_)) => found.extend(open.take()),
            (Some((_, block)), None) => *block += &format!("{line}\n"),
            (None, Some(word)) => open = Some((word.to_owned(), String::new())),
            (None, None) => {}
        }
    }
    assert!(open.is_none(), "a fence is not closed");
    found
}

fn readme() -> String {
    fs::read_to_string(repository().join("README.md")).unwrap()
}

#[test]
fn two_commands_set_everything_up() {
    let commands: Vec<String> =
        fences(&readme()).into_iter().map(|(_, block)| block).filter(|block| block.starts_with("cargo")).collect();
    assert_eq!(commands.len(), 2, "{commands:?}");
    assert!(commands.iter().all(|command| command.lines().count() == 1), "{commands:?}");
    assert!(commands[1].starts_with("cargo test"));
    let line = commands[0].replace("cargo run --release --", "edgesheet");
    assert!(line.starts_with("edgesheet sheet "), "{line}");
    assert!(example(&line, "readme/first").answer().contains("wrote "));
}

/// A block of `sh` that begins with `$ edgesheet` shows commands and what they print. Blocks that begin with a line
/// `# NAME.toml` or `# NAME.csv` are the files that these commands read, beside the demo devices.
#[test]
fn the_commands_shown_print_what_is_shown() {
    let folder = fresh("readme/shown");
    let blocks = fences(&readme());
    for (word, block) in blocks.iter().filter(|(word, _)| ["toml", "csv"].contains(&word.as_str())) {
        let name = block.lines().next().and_then(|line| line.strip_prefix("# "));
        if let Some(name) = name.filter(|name| name.ends_with(&format!(".{word}"))) {
            fs::write(folder.join(name), block).unwrap();
        }
    }
    let mut checked = 0;
    for (_, block) in blocks.iter().filter(|(word, block)| word == "sh" && !block.starts_with("cargo")) {
        for part in format!("\n{block}").split("\n$ edgesheet ").skip(1) {
            let (line, shown) = part.split_once('\n').unwrap();
            assert_eq!(run(&folder, line).answer().trim_end(), shown.trim_end(), "{line}");
            checked += 1;
        }
    }
    assert!(checked >= 2, "the README shows only {checked} commands with what they print");
}

#[test]
fn every_command_and_picture_is_there() {
    let text = readme();
    for command in crate::help::commands() {
        assert!(text.contains(&format!("edgesheet {command}")), "{command} is not in the README");
    }
    let links: Vec<&str> = text.split("](").skip(1).filter_map(|part| part.split(')').next()).collect();
    assert!(links.iter().any(|link| link.ends_with(".png")));
    for link in links {
        assert!(repository().join(link).exists(), "{link} does not exist");
    }
}
