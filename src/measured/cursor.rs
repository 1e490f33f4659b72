//! The parts of a written number, one after the other: sign, digits, bracket, power of ten, ±, unit.

use crate::measured::number_text::NumberFault;
use crate::measured::number_text::shortened;
use crate::measured::separators;
use crate::measured::unit::Unit;

/// Digits with sign and point, times ten to a power.
#[derive(Clone, Debug, PartialEq)]
pub struct Decimal {
    digits: String,
    power: i32,
}

impl Decimal {
    /// The number in Ω when it is written in `unit`.
    pub fn times(&self, unit: Unit) -> f64 {
        // The text is digits by construction; a number too large reads as infinite and is refused by the caller.
        let value: f64 = format!("{}e{}", self.digits, self.power + unit.power).parse().unwrap_or(f64::NAN);
        value * unit.factor
    }
}

/// How far a cell has been read.
pub struct Cursor<'a> {
    text: &'a str,
    /// The next byte.
    pub at: usize,
}

const MINUS: [&str; 3] = ["-", "−", "–"];
const PLUS_MINUS: [&str; 4] = ["±", "+/-", "+/−", "+-"];
const TIMES: [&str; 5] = ["×", "*", "·", "x", "X"];
const SUPERSCRIPTS: &str = "⁰¹²³⁴⁵⁶⁷⁸⁹";

impl<'a> Cursor<'a> {
    /// At the start of `text`.
    pub fn new(text: &'a str) -> Self {
        Self { text, at: 0 }
    }

    /// Skips blanks, then takes `word` if it stands there.
    pub fn take(&mut self, word: &str) -> bool {
        self.skip_space();
        let found = self.rest().starts_with(word);
        self.at += if found { word.len() } else { 0 };
        found
    }

    /// Sign, digits and point, without exponent.
    pub fn decimal(&mut self) -> Result<Decimal, NumberFault> {
        self.skip_space();
        let minus = self.take_any(&MINUS);
        let _ = !minus && self.take("+");
        self.skip_space();
        let start = self.at;
        let whole = self.take_digits();
        let fraction = if self.rest().starts_with('.') { self.fraction() } else { "" };
        separators::refuse(self.text, start..self.at)?;
        if whole.is_empty() && fraction.is_empty() {
            return Err(self.no_number());
        }
        let sign = if minus { "-" } else { "" };
        Ok(Decimal { digits: format!("{sign}{whole}{fraction}"), power: -(fraction.len() as i32) })
    }

    /// `(4)` in units of the last place, `(1.2)` as it stands.
    pub fn bracket(&mut self, value: &Decimal) -> Result<Option<Decimal>, NumberFault> {
        if !self.take("(") {
            return Ok(None);
        }
        let start = self.at;
        let size = self.decimal()?;
        let with_point = self.text[start..self.at].contains('.');
        self.close()?;
        let power = if with_point { size.power } else { value.power };
        Ok(Some(Decimal { power, ..size }))
    }

    /// The closing bracket.
    pub fn close(&mut self) -> Result<(), NumberFault> {
        let message = format!("`{}` opens a bracket and does not close it", shortened(self.text));
        let fault = self.fault("bad-number", message, "close it, as in `12.906(4) kΩ`");
        if self.take(")") { Ok(()) } else { Err(fault) }
    }

    /// `e4`, `× 10⁴`, `x10^4`: it belongs to the value and to its bracket.
    pub fn power(&mut self, value: &mut Decimal, u: Option<&mut Decimal>) -> Result<(), NumberFault> {
        let power = self.written_power()?;
        value.power += power;
        if let Some(u) = u {
            u.power += power;
        }
        Ok(())
    }

    /// Takes ± in any spelling; its first byte where one stands here.
    pub fn plus_minus(&mut self) -> Option<usize> {
        self.skip_space();
        let start = self.at;
        PLUS_MINUS.iter().any(|mark| self.take(mark)).then_some(start)
    }

    /// A number with its own power of ten.
    pub fn exponential(&mut self) -> Result<Decimal, NumberFault> {
        let mut size = self.decimal()?;
        self.power(&mut size, None)?;
        Ok(size)
    }

    /// The unit up to ± or the end, where one stands here.
    pub fn unit(&mut self) -> Result<Option<Unit>, NumberFault> {
        self.skip_space();
        let rest = self.rest();
        let end = PLUS_MINUS.iter().filter_map(|mark| rest.find(mark)).min().unwrap_or(rest.len());
        let word = rest[..end].trim_end();
        if word.is_empty() {
            return Ok(None);
        }
        let bytes = self.at..self.at + word.len();
        self.at = bytes.end;
        Unit::from_text(word).map(Some).map_err(|hint| NumberFault {
            code: "unknown-unit",
            message: format!("`{}` is no unit of resistance", shortened(word)),
            hint,
            bytes,
        })
    }

    /// Nothing but blanks may be left.
    pub fn end(&mut self) -> Result<(), NumberFault> {
        self.skip_space();
        if self.rest().is_empty() { Ok(()) } else { Err(self.no_number()) }
    }

    fn rest(&self) -> &'a str {
        &self.text[self.at..]
    }

    fn skip_space(&mut self) {
        self.at = self.text.len() - self.rest().trim_start().len();
    }

    fn take_any(&mut self, words: &[&str]) -> bool {
        words.iter().any(|word| self.take(word))
    }

    fn take_digits(&mut self) -> &'a str {
        let rest = self.rest();
        let end = rest.find(|c: char| !c.is_ascii_digit()).unwrap_or(rest.len());
        self.at += end;
        &rest[..end]
    }

    fn fault(&self, code: &'static str, message: String, hint: impl Into<String>) -> NumberFault {
        NumberFault { code, message, hint: hint.into(), bytes: self.at.min(self.text.len())..self.text.len() }
    }

    fn no_number(&self) -> NumberFault {
        let message = format!("`{}` is no number", shortened(self.text));
        self.fault("bad-number", message, "write it as in `12.906(4) kΩ`, `12906 ± 3 Ω` or `0.5 h/e2`")
    }

    fn fraction(&mut self) -> &'a str {
        self.at += 1;
        self.take_digits()
    }

    fn written_power(&mut self) -> Result<i32, NumberFault> {
        let start = self.at;
        if self.rest().starts_with(['e', 'E']) {
            self.at += 1;
            return self.whole_power();
        }
        if self.take_any(&TIMES) && self.take("10") {
            let _ = self.take("^");
            return self.whole_power();
        }
        self.at = start;
        Ok(0)
    }

    fn whole_power(&mut self) -> Result<i32, NumberFault> {
        let minus = ["-", "−", "–", "⁻"].iter().any(|sign| self.take(sign));
        let _ = !minus && self.take("+");
        let raised = self.rest().chars().map_while(|c| SUPERSCRIPTS.chars().position(|s| s == c));
        let raised: String = raised.map(|digit| digit.to_string()).collect();
        let digits = if raised.is_empty() { self.take_digits().to_string() } else { raised.clone() };
        self.at += self.rest().chars().take(raised.len()).map(char::len_utf8).sum::<usize>();
        match digits.parse::<i32>() {
            Ok(power) if digits.len() <= 3 => Ok(if minus { -power } else { power }),
            _ => Err(self.no_number()),
        }
    }
}
