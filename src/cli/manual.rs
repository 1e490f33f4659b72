//! What shells and man read, from the definition of the command line.

use clap::Command;
use clap_complete::Shell;
use clap_mangen::Man;

/// Completions for a shell.
pub fn completions(shell: Shell, mut command: Command) -> String {
    let mut bytes = Vec::new();
    clap_complete::generate(shell, &mut command, "edgesheet", &mut bytes);
    text(bytes)
}

/// The manual page: the program, then every command with its arguments and an example. It has no date.
pub fn page(mut command: Command) -> String {
    command.build();
    let whole = Man::new(command.clone());
    let head = rendered(|out| {
        whole.render_title(out)?;
        whole.render_name_section(out)?;
        whole.render_synopsis_section(out)?;
        whole.render_description_section(out)?;
        whole.render_options_section(out)
    });
    let page = command.get_subcommands().map(section).fold(head, |page, section| page + &section);
    page.chars().map(escaped).collect()
}

/// Signs beyond ASCII by their number, so that the page is read alike whatever the reader takes its encoding to be
/// (groff_char(7), `\[uXXXX]`).
fn escaped(sign: char) -> String {
    if sign.is_ascii() { sign.to_string() } else { format!("\\[u{:04X}]", u32::from(sign)) }
}

/// A command as a section; its own sections become parts of that.
fn section(command: &Command) -> String {
    let man = Man::new(command.clone());
    let inside = rendered(|out| {
        man.render_description_section(out)?;
        man.render_synopsis_section(out)?;
        man.render_options_section(out)?;
        man.render_extra_section(out)
    });
    let name = command.get_name().to_uppercase();
    // What the head of the page defines holds for all of it.
    let lines = inside.lines().filter(|line| !line.starts_with(".ie ") && !line.starts_with(".el "));
    let parts = lines.map(|line| line.strip_prefix(".SH ").map_or(line.to_owned(), |part| format!(".SS {part}")));
    format!(".SH {name}\n{}\n", parts.collect::<Vec<_>>().join("\n"))
}

/// What is written into memory; that cannot fail.
fn rendered(write: impl FnOnce(&mut Vec<u8>) -> std::io::Result<()>) -> String {
    let mut bytes = Vec::new();
    let _ = write(&mut bytes);
    text(bytes)
}

fn text(bytes: Vec<u8>) -> String {
    String::from_utf8_lossy(&bytes).into_owned()
}
