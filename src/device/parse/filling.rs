//! Fillings against the ladder.

use crate::diagnostic::Diagnostic;
use crate::diagnostic::Place;
use crate::number::Rational;
use crate::syntax::Filling;

use crate::device::Ladder;
use crate::device::LadderPlace;

/// What a filling that is no step of the ladder would mean.
#[derive(Clone, Copy, PartialEq, Eq)]
pub(super) enum Between {
    /// Under a gate or a step: a partly transmitted level.
    Allowed,
    /// As bulk: no plateau.
    Refused,
}

/// A filling with the words for it, `` the filling of `TG` ``.
pub(super) struct Stated<'a> {
    pub what: &'a str,
    pub written: &'a Filling,
    pub between: Between,
}

/// The finding on a filling that lies on no step.
pub(super) fn judge(stated: &Stated<'_>, ladder: &Ladder, place: &Place) -> Option<Diagnostic> {
    let finding = match ladder.place(&stated.written.value) {
        LadderPlace::Step => return None,
        LadderPlace::Beyond => beyond(stated),
        LadderPlace::Between { lower, upper } if stated.written.whole => no_step(stated, (&lower, &upper)),
        LadderPlace::Between { lower, upper } if stated.between == Between::Refused => {
            no_plateau(stated, (&lower, &upper))
        }
        LadderPlace::Between { lower, upper } => partly_transmitted(stated, (&lower, &upper)),
    };
    Some(finding.at(place))
}

fn beyond(Stated { what, written, .. }: &Stated<'_>) -> Diagnostic {
    Diagnostic::fault("beyond-ladder", format!("{what} is {}, beyond the last step of the ladder", written.text))
        .hint("add the steps to `ladder` of [device]; a list holds only the signs that it names")
}

/// An integer is taken for a slip: nobody writes 3 in an even ladder and means a half-open level.
fn no_step(Stated { what, written, between }: &Stated<'_>, steps: (&Rational, &Rational)) -> Diagnostic {
    let (value, text) = (&written.value, &written.text);
    let as_bulk = if *between == Between::Refused { " with `bulk_partial = true`" } else { "" };
    Diagnostic::fault("no-step", format!("{what} is {text}, which is no step of the ladder")).hint(format!(
        "the steps around it are {}; a partly transmitted level is written {text}.0{as_bulk}",
        signed(steps, value)
    ))
}

fn no_plateau(Stated { what, written, .. }: &Stated<'_>, steps: (&Rational, &Rational)) -> Diagnostic {
    let (value, text) = (&written.value, &written.text);
    Diagnostic::fault("no-plateau", format!("{what} is {text}, between the steps {}: no plateau", signed(steps, value)))
        .hint("write a step, or add `bulk_partial = true` where this is meant")
}

/// The share is t = (ν − lower)/(upper − lower) of the next level.
fn partly_transmitted(Stated { what, written, .. }: &Stated<'_>, steps: (&Rational, &Rational)) -> Diagnostic {
    let (value, text) = (&written.value, &written.text);
    let share = &(&value.abs() - steps.0) / &(steps.1 - steps.0);
    let message = format!("{what} is {text}: of the level between {} the share {share} passes", signed(steps, value));
    Diagnostic::notice("partly-transmitted", message).hint("the rest is turned back at its border")
}

/// `2 and 4`, with the sign of the filling.
fn signed((lower, upper): (&Rational, &Rational), value: &Rational) -> String {
    let sign = if value.is_negative() { "-" } else { "" };
    let lower_sign = if lower.is_zero() { "" } else { sign };
    format!("{lower_sign}{lower} and {sign}{upper}")
}
