//! From a node to a typed value; none where it is of another kind.

use crate::number::Rational;

use crate::syntax::Node;
use crate::syntax::Value;
use crate::syntax::decimal::RoundedNanometres;
use crate::syntax::decimal::exact_decimal;
use crate::syntax::decimal::nanometres;
use crate::syntax::keys::split_unit;

/// A filling factor as written.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Filling {
    /// The exact value, with its sign.
    pub value: Rational,
    /// As the user wrote it.
    pub text: String,
    /// Whether it was written as an integer (`3`, not `3.0` or `"6/2"`).
    pub whole: bool,
}

/// A length or coordinate in whole nanometres.
pub type Length = i64;

impl Node {
    /// The text of a number.
    pub(super) fn number_text(&self) -> Option<&str> {
        match &self.value {
            Value::Whole(text) | Value::Decimal(text) => Some(text),
            _ => None,
        }
    }

    /// A text in quotes.
    pub fn text(&self) -> Option<&str> {
        match &self.value {
            Value::Text(text) => Some(text),
            _ => None,
        }
    }

    /// A finite number.
    pub fn number(&self) -> Option<f64> {
        let number: f64 = self.number_text()?.replace('_', "").parse().ok()?;
        number.is_finite().then_some(number)
    }

    /// A whole number.
    pub fn count(&self) -> Option<i64> {
        match &self.value {
            Value::Whole(text) => text.replace('_', "").parse().ok(),
            _ => None,
        }
    }

    /// An exact number: integer, decimal or `"p/q"`.
    pub fn exact(&self) -> Option<Rational> {
        match &self.value {
            Value::Text(text) => exact_decimal(text.trim().replace('−', "-").as_str()),
            _ => exact_decimal(self.number_text()?),
        }
    }

    /// A filling factor.
    pub fn filling(&self) -> Option<Filling> {
        let text = self.text().or(self.number_text())?.trim().to_owned();
        Some(Filling { value: self.exact()?, whole: !text.contains(['.', '/', 'e', 'E']), text })
    }

    /// A length under a key that ends in `_um` or `_nm`.
    pub(super) fn length(&self, key: &str) -> Option<RoundedNanometres> {
        let text = self.number_text()?.replace('_', "");
        match split_unit(key) {
            Some((_, unit)) if unit.suffix == "nm" => nanometres(&scaled_down(&text)),
            _ => nanometres(&text),
        }
    }

    /// The values of a list.
    pub fn list(&self) -> Option<&[Node]> {
        match &self.value {
            Value::List(list) => Some(list),
            _ => None,
        }
    }
}

/// Nanometres as micrometres, in text so that nothing is rounded.
fn scaled_down(nanometres: &str) -> String {
    match nanometres.split_once(['e', 'E']) {
        Some((mantissa, exponent)) => match exponent.parse::<i32>() {
            Ok(exponent) => format!("{mantissa}e{}", exponent.saturating_sub(3)),
            Err(_) => nanometres.to_owned(),
        },
        None => format!("{nanometres}e-3"),
    }
}
