//! Findings as text for a terminal: what is wrong, file, line and column, the line itself, and the hint.

use annotate_snippets::AnnotationKind;
use annotate_snippets::Group;
use annotate_snippets::Level;
use annotate_snippets::Renderer;
use annotate_snippets::Snippet;
use annotate_snippets::normalize_untrusted_str;

use crate::diagnostic::Diagnostic;
use crate::diagnostic::Place;
use crate::diagnostic::Severity;

/// Whether the text carries colours; never decided by guessing.
#[derive(Clone, Copy, Debug, Default, PartialEq, Eq)]
pub enum Colour {
    /// Plain text.
    #[default]
    Plain,
    /// ANSI colours.
    Coloured,
}

/// Columns of a terminal that a finding uses at most.
const WIDTH: usize = 110;

/// Findings shown at most; a file with more is of another kind altogether.
const MOST_SHOWN: usize = 200;

/// The findings, one after the other, in the order given; after 200 the rest is counted.
pub fn show(diagnostics: &[Diagnostic], colour: Colour) -> String {
    let renderer = match colour {
        Colour::Plain => Renderer::plain(),
        Colour::Coloured => Renderer::styled(),
    };
    let renderer = renderer.term_width(WIDTH);
    let shown = diagnostics.iter().take(MOST_SHOWN);
    let mut texts: Vec<String> = shown.map(|diagnostic| renderer.render(&[group(diagnostic)])).collect();
    let left = diagnostics.len().saturating_sub(MOST_SHOWN);
    texts.extend((left > 0).then(|| format!("and {left} more findings")));
    texts.join("\n\n")
}

fn group(diagnostic: &Diagnostic) -> Group<'_> {
    let level = match diagnostic.severity {
        Severity::Fault => Level::ERROR.with_name("fault"),
        Severity::Notice => Level::NOTE.with_name("notice"),
    };
    let mut group =
        Group::with_title(level.primary_title(normalize_untrusted_str(&diagnostic.message)).id(diagnostic.code));
    if let Some(place) = &diagnostic.place {
        group = group.element(snippet(place));
    }
    if let Some(hint) = &diagnostic.hint {
        group = group.element(Level::HELP.with_name("hint").message(normalize_untrusted_str(hint)));
    }
    group
}

/// The one line on which the place begins; what reaches beyond it is marked up to its end.
fn snippet(place: &Place) -> Snippet<'_, annotate_snippets::Annotation<'_>> {
    let (line_start, line) = place.line_text();
    let start = line.floor_char_boundary(place.start.saturating_sub(line_start));
    let end = line.floor_char_boundary(place.end.saturating_sub(line_start)).max(start);
    Snippet::source(line)
        .line_start(place.line())
        .path(normalize_untrusted_str(&place.source.name))
        .annotation(AnnotationKind::Primary.span(start..end))
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::diagnostic::Source;

    fn finding() -> Diagnostic {
        let source = Source::new("bar.toml", "format = 1\r\n# µ\r\n  wdth_um = 3\r\n");
        let start = source.text.find("wdth").unwrap();
        let place = Place { source, start, end: start + 7 };
        Diagnostic::fault("unknown-key", "`wdth_um` is no key of [mesa]").at(&place).hint("did you mean `width_um`?")
    }

    #[test]
    fn a_finding_shows_place_line_and_hint() {
        let text = show(&[finding()], Colour::Plain);
        for part in ["fault[unknown-key]", "bar.toml:3:3", "wdth_um = 3", "^^^^^^^", "hint: did you mean `width_um`?"] {
            assert!(text.contains(part), "{part} in\n{text}");
        }
    }

    #[test]
    fn a_flood_is_counted() {
        let text = show(&vec![finding(); 203], Colour::Plain);
        assert!(text.ends_with("and 3 more findings") && text.matches("fault[").count() == 200);
    }

    #[test]
    fn colour_comes_only_when_asked_for() {
        assert!(!show(&[finding()], Colour::Plain).contains('\u{1b}'));
        assert!(show(&[finding()], Colour::Coloured).contains('\u{1b}'));
    }

    #[test]
    fn control_signs_of_a_file_do_not_reach_the_terminal() {
        let source = Source::new("a\u{1b}[2J.toml", "a = \u{1b}[2J");
        let place = Place { source, start: 4, end: 8 };
        let text = show(&[Diagnostic::fault("syntax", "bad \u{1b}[2J").at(&place)], Colour::Plain);
        assert!(!text.contains('\u{1b}'), "{text:?}");
    }

    #[test]
    fn a_place_at_the_end_or_beyond_is_shown() {
        let source = Source::new("a.toml", "a = 1");
        for start in [5, 99] {
            let place = Place { source: source.clone(), start, end: 200 };
            assert!(show(&[Diagnostic::fault("syntax", "ends").at(&place)], Colour::Plain).contains("a.toml:1:6"));
        }
    }
}
