//! Physical constants, each with value, unit, uncertainty and source.

use schemars::JsonSchema;
use serde::Serialize;

/// A constant of nature or of convention.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, JsonSchema)]
pub struct Constant {
    /// Name.
    pub name: &'static str,
    /// Symbol.
    pub symbol: &'static str,
    /// Value in `unit`, the float nearest to the exact value.
    pub value: f64,
    /// Unit.
    pub unit: &'static str,
    /// Standard uncertainty in `unit`; 0 for exact constants.
    pub uncertainty: f64,
    /// Where the value stands.
    pub source: &'static str,
}

/// h/e² from the exact SI values h = 6.626 070 15e-34 J s and e = 1.602 176 634e-19 C.
///
/// Exact quotient 25 812.807 459 304 506 66… Ω; source of h and e: BIPM, SI Brochure, 9th edition (2019).
pub const KLITZING: Constant = Constant {
    name: "von Klitzing constant",
    symbol: "h/e²",
    value: 25_812.807_459_304_507,
    unit: "Ω",
    uncertainty: 0.0,
    source: "h/e² with the exact h and e of the SI (BIPM, SI Brochure, 9th edition, 2019)",
};

/// The conventional value in use from 1990 to 2019, offered by name and never used silently.
pub const KLITZING_1990: Constant = Constant {
    name: "conventional von Klitzing constant of 1990",
    symbol: "R_{K-90}",
    value: 25_812.807,
    unit: "Ω",
    uncertainty: 0.0,
    source: "CIPM 1988, Recommendation 2 (CI-1988), in force from 1 January 1990 to 19 May 2019",
};

/// The elementary charge, exact since 2019. Source: BIPM, SI Brochure, 9th edition (2019).
pub const ELEMENTARY_CHARGE: Constant = Constant {
    name: "elementary charge",
    symbol: "e",
    value: 1.602_176_634e-19,
    unit: "C",
    uncertainty: 0.0,
    source: "exact in the SI (BIPM, SI Brochure, 9th edition, 2019)",
};

#[cfg(test)]
mod tests {
    use super::*;

    fn close(value: f64, reference: f64) {
        assert!(((value - reference) / reference).abs() < 1e-13, "{value} against {reference}");
    }

    #[test]
    fn klitzing_is_the_exact_quotient() {
        // h and e: BIPM, SI Brochure, 9th edition (2019), as integers times powers of ten. h/e² = 662 607 015 e-42 over
        // (1 602 176 634 e-28)²; the long division is done here in integers and shares nothing with the constant.
        let e_squared = 1_602_176_634_u128 * 1_602_176_634;
        let (mut whole, mut rest) = (0_u128, 662_607_015_u128);
        for _ in 0..28 {
            (whole, rest) = (whole * 10 + rest * 10 / e_squared, rest * 10 % e_squared);
        }
        // 28 decimals of h/e² · 1e-14 are 14 decimals in ohm.
        assert!(rest < e_squared);
        close(KLITZING.value, whole as f64 * 1e-14);
    }

    #[test]
    fn klitzing_agrees_with_the_published_digits() {
        // NIST/CODATA 2018 and 2022 print 25 812.807 45… (exact).
        assert!(KLITZING.value.to_string().starts_with("25812.80745"));
        // CODATA 2014: 25 812.807 4555(59) Ω.
        assert!((KLITZING.value - 25_812.807_455_5).abs() < 0.000_005_9);
        assert_eq!(KLITZING.uncertainty, 0.0);
    }

    #[test]
    fn fractions_of_klitzing_agree_with_reference_values() {
        // R_K/i from the exact h and e, computed independently with exact rationals and cut to ten decimals.
        for (i, ohm) in [
            (1.0, 25_812.807_459_304_5),
            (2.0, 12_906.403_729_652_3),
            (3.0, 8_604.269_153_101_5),
            (4.0, 6_453.201_864_826_1),
            (6.0, 4_302.134_576_550_8),
            (10.0, 2_581.280_745_930_5),
        ] {
            close(KLITZING.value / i, ohm);
        }
    }

    #[test]
    fn the_conventional_value_of_1990_is_lower_by_17_8_parts_in_1e9() {
        // CIPM 1988, Recommendation 2: 25 812.807 Ω exactly; half of it is printed as 12 906.4035 Ω.
        assert_eq!(KLITZING_1990.value, 25_812.807);
        assert_eq!(KLITZING_1990.value / 2.0, 12_906.403_5);
        // R_K/R_K-90 − 1 = 1.779 366 8e-8, computed independently; a float of the ratio holds eight digits of it.
        let excess = (KLITZING.value - KLITZING_1990.value) / KLITZING_1990.value;
        assert!((excess - 1.779_366_8e-8).abs() < 2e-15, "{excess}");
    }
}
