//! `expect` and `isolate` on a terminal.

use std::fs;
use std::path::Path;

use crate::program::bar;
use crate::program::demos;
use crate::program::fresh;
use crate::program::run;
use crate::program::with_demo;

fn fits(folder: &Path, line: &str) -> String {
    let answer = run(folder, line).answer();
    for row in answer.lines() {
        assert!(row.chars().count() <= 100, "{} columns in {line}: {row}", row.chars().count());
        assert_eq!(row, row.trim_end(), "{line} pads its lines");
    }
    answer
}

#[test]
fn tables_fit_a_hundred_columns() {
    for demo in demos() {
        let cooldown = if demo.join("cooldown.toml").exists() { "cooldown.toml" } else { "" };
        for options in ["", "--all"] {
            fits(&demo, &format!("expect device.toml {options}"));
            fits(&demo, &format!("expect device.toml {cooldown} {options}"));
        }
        let bulk = if demo.ends_with("triple-series") { "B:bulk" } else { "bulk" };
        fits(&demo, &format!("isolate device.toml {bulk} --all"));
    }
}

#[test]
fn long_names_are_printed_whole_and_fit_too() {
    let folder = fresh("long");
    let mut device = bar("3", "1", "").replace("TG", "constriction-gate-20");
    let long = |contact: u32| format!("contact-number-{contact}-abcd");
    for contact in 1..=6 {
        device = device.replace(&format!("name = \"{contact}\""), &format!("name = \"{}\"", long(contact)));
    }
    fs::write(folder.join("device.toml"), device).unwrap();
    let cooldown = "format = 1\ndevice = \"bar\"\n[cooldown]\nid = \"c\"\n[[line]]\ncontact = \"contact-number-1-abcd\"\nohm = 5\n";
    fs::write(folder.join("cooldown.toml"), cooldown).unwrap();
    for line in
        ["expect device.toml", "expect device.toml cooldown.toml --all", "isolate device.toml constriction-gate-20"]
    {
        let answer = fits(&folder, line);
        assert!((1..=6).all(|contact| answer.contains(&long(contact))), "{line}: {answer}");
    }
    let chosen = format!("{}-{},{}-{}", long(1), long(4), long(2), long(5));
    assert!(
        run(&folder, &format!("expect device.toml --reading {chosen}")).answer().contains("1/ν(constriction-gate-20)")
    );
}

/// A gated bar: current 1 to 4, probes 2 and 5 on a diagonal give 1/ν_g at + (source: the closed forms of a gated bar in
/// C. W. J. Beenakker and H. van Houten, Solid State Phys. 44, 1 (1991); formula from memory, algebra verified).
#[test]
fn one_reading_can_be_asked_for() {
    let folder = with_demo("reading", "top-gated-bar");
    let answer = run(&folder, "expect device.toml --reading 1-4,2-5 --reading 4-1,2-5").answer();
    let row = |name: &str| answer.lines().find(|line| line.starts_with(name)).unwrap_or_else(|| panic!("{answer}"));
    assert_eq!(
        row("R_14,25").split_whitespace().take(5).collect::<Vec<_>>(),
        ["R_14,25", "1", "25.8128", "1/3", "8.6043"]
    );
    assert_eq!(row("R_41,25").split_whitespace().nth(1), Some("−1"));
}

#[test]
fn readings_that_are_none_are_faults_that_list_the_contacts() {
    let folder = with_demo("no-reading", "top-gated-bar");
    for text in ["1-4", "1-4,2", "1-1,2-3", "1-4,2-2", "1-4,2-9", "14,25", "1-4;2-5", ",", "-,-", "1-4,2-5,3-6"] {
        let ran = run(&folder, &format!("expect device.toml --reading={text}"));
        assert_eq!((ran.code, ran.out.as_str()), (2, ""), "{text}");
        assert!(ran.err.contains(&format!("`{text}`")) && ran.err.contains("1, 2, 3, 4, 5, 6"), "{text}: {}", ran.err);
    }
    let both = run(&folder, "expect device.toml --reading 1-9,2-3 --reading 1-4,2-8");
    assert!(both.err.contains("1-9,2-3") && both.err.contains("1-4,2-8"), "not all faults at once: {}", both.err);
}

#[test]
fn isolate_names_the_diagonal_of_each_polarity() {
    let folder = with_demo("isolate", "top-gated-bar");
    let answer = fits(&folder, "isolate device.toml TG");
    assert!(answer.contains("TG alone: field toward you: I 1→4, V 2−5; field away: I 1→4, V 3−6"), "{answer}");
    let all = run(&folder, "isolate device.toml TG --all").answer();
    assert!(all.lines().count() > answer.lines().count() && !all.contains("--all"));
}

#[test]
fn isolate_knows_the_regions() {
    let folder = with_demo("regions", "two-gates-and-step");
    let ran = run(&folder, "isolate device.toml XG");
    assert_eq!((ran.code, ran.out.as_str()), (2, ""));
    assert!(["`XG`", "TG", "QG", "thin", "bulk"].iter().all(|word| ran.err.contains(word)), "{}", ran.err);
    let answer = run(&folder, "isolate device.toml QG").answer();
    assert!(answer.contains("QG has no filling of its own at this point"), "{answer}");
    assert!(answer.contains("1/ν(QG)"), "{answer}");
}

/// Two gates of opposite signs side by side behind a third: the current divides between them, and the two-terminal
/// resistance is no sum over regions (own algebra: `raster` finds the same matrix, `forms` that no sum fits such bars).
#[test]
fn a_reading_without_a_closed_form_says_why() {
    let folder = fresh("formless");
    let ends = "[[contact]]\nname = \"1\"\nedge = \"left\"\n[[contact]]\nname = \"2\"\nedge = \"right\"\n";
    let gates = "[[gate]]\nname = \"A\"\nfrom_um = 100\nto_um = 200\n\
                 [[gate]]\nname = \"B\"\noutline_um = [[300, 0], [400, 0], [400, 50], [300, 50]]\n\
                 [[gate]]\nname = \"C\"\noutline_um = [[300, 50], [400, 50], [400, 100], [300, 100]]\n";
    let text = format!(
        "format = 1\n[device]\nid = \"NF\"\n[mesa]\nshape = \"bar\"\nlength_um = 600\nwidth_um = 100\n{ends}{gates}\
         [[point]]\nname = \"p\"\nbulk = 4\nfillings = {{ A = -2, B = -3, C = 2 }}\n"
    );
    fs::write(folder.join("device.toml"), text).unwrap();
    let answer = fits(&folder, "expect device.toml");
    assert!(answer.contains("no closed form"), "{answer}");
    assert!(!run(&with_demo("with-forms", "top-gated-bar"), "expect device.toml").answer().contains("no closed form"));
}
