//! A float as the decimal digits that a reader sees, rounded half to even.

/// ± `mantissa` × 10^`exponent`.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(super) struct Decimal {
    negative: bool,
    mantissa: u64,
    exponent: i32,
}

impl Decimal {
    /// The shortest digits that read back as `value`; none where it is not finite.
    ///
    /// Rounding starts from these digits and not from the binary value, so that 0.15, which no float holds exactly, is
    /// half-way between 0.1 and 0.2 as its reader thinks.
    pub fn of(value: f64) -> Option<Self> {
        if !value.is_finite() {
            return None;
        }
        let text = format!("{:e}", value.abs());
        let (digits, power) = text.split_once('e')?;
        let (whole, fraction) = digits.split_once('.').unwrap_or((digits, ""));
        let mantissa = format!("{whole}{fraction}").parse().ok()?;
        let exponent = power.parse::<i32>().ok()? - fraction.len() as i32;
        Some(Self { negative: value < 0.0, mantissa, exponent })
    }

    /// Whether it is zero.
    pub fn is_zero(self) -> bool {
        self.mantissa == 0
    }

    /// Power of ten of the leading digit; 0 for zero.
    pub fn magnitude(self) -> i32 {
        self.mantissa.checked_ilog10().map_or(0, |digits| self.exponent + digits as i32)
    }

    /// Power of ten of the last digit that is not zero; 0 for zero.
    pub fn last_place(self) -> i32 {
        let (mut mantissa, mut place) = (self.mantissa, self.exponent);
        while mantissa != 0 && mantissa.is_multiple_of(10) {
            (mantissa, place) = (mantissa / 10, place + 1);
        }
        if mantissa == 0 { 0 } else { place }
    }

    /// The first three digits, 100 to 999; 0 for zero.
    pub fn leading_three(self) -> u64 {
        match self.mantissa.checked_ilog10() {
            None => 0,
            Some(more @ 0..=2) => self.mantissa * 10_u64.pow(2 - more),
            Some(more) => self.mantissa / 10_u64.pow(more - 2),
        }
    }

    /// The same times 10^`power`.
    pub fn shifted(self, power: i32) -> Self {
        Self { exponent: self.exponent + power, ..self }
    }

    /// Rounded to a multiple of 10^`place`, half to even (ISO 80000-1, annex on rounding, rule A; from memory).
    pub fn rounded(self, place: i32) -> Self {
        let dropped = place - self.exponent;
        if dropped <= 0 {
            return self;
        }
        let Some(step) = 10_u64.checked_pow(dropped as u32) else {
            return Self { mantissa: 0, exponent: place, ..self };
        };
        let (whole, rest) = (self.mantissa / step, self.mantissa % step);
        // The rest is compared with what is missing to the next multiple: twice the rest could overflow.
        let up = rest > step - rest || (rest == step - rest && whole % 2 == 1);
        Self { mantissa: whole + u64::from(up), exponent: place, ..self }
    }

    /// Rounded to 10^`place` and written down to it, with a true minus (U+2212); zero has no sign.
    pub fn text(self, place: i32) -> String {
        let rounded = self.rounded(place);
        let sign = if rounded.negative && !rounded.is_zero() { "−" } else { "" };
        format!("{sign}{}", rounded.unsigned_text(place))
    }

    fn unsigned_text(self, place: i32) -> String {
        let decimals = (-place).max(0) as usize;
        let zeros = if self.is_zero() { 0 } else { (self.exponent + decimals as i32).max(0) as usize };
        let digits = format!("{}{}", self.mantissa, "0".repeat(zeros));
        let digits = format!("{digits:0>width$}", width = decimals + 1);
        let (whole, fraction) = digits.split_at(digits.len() - decimals);
        if fraction.is_empty() { whole.to_string() } else { format!("{whole}.{fraction}") }
    }
}
