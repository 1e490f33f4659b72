//! How far a reading may lie from its expectation before it disagrees.

/// Share of sheets of a right device that disagree by chance.
const CHANCE: f64 = 0.01;

/// The limit z_n in u for `n` judged readings, chosen so that a right device disagrees in 1 % of sheets; none for n = 0.
///
/// Every one of n independent normal readings lies within z with probability (1 − p)ⁿ where p = P(|Z| > z) = erfc(z/√2),
/// and that is to be 0.99: p = 1 − 0.99^(1/n). Two-sided, because a reading can be wrong either way.
pub fn z_n(n: usize) -> Option<f64> {
    // 1 − 0.99^(1/n) loses digits for large n; expm1 and log1p keep them.
    (n > 0).then(|| two_sided_quantile(-libm::expm1(libm::log1p(-CHANCE) / n as f64)))
}

/// z with P(|Z| > z) = `p` for a standard normal Z; `p` between 1e-300 and 1.
///
/// Bisection of erfc(z/√2) = p: erfc falls with z, and halving gives the same bytes on every machine.
fn two_sided_quantile(p: f64) -> f64 {
    let (mut low, mut high) = (0.0, 40.0);
    loop {
        let middle: f64 = (low + high) / 2.0;
        if middle <= low || middle >= high {
            return middle;
        }
        if libm::erfc(middle * std::f64::consts::FRAC_1_SQRT_2) > p { low = middle } else { high = middle }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn quantiles_agree_with_tables_of_the_normal_distribution() {
        // Φ⁻¹(0.975), Φ⁻¹(0.995), Φ⁻¹(0.9995): tables of the normal distribution, values from memory; the last two from an
        // independent rational approximation (Wichura, algorithm AS 241).
        for (p, z) in [
            (0.05, 1.959_963_984_540_054),
            (0.01, 2.575_829_303_548_901),
            (0.001, 3.290_526_731_491_926),
            (1e-6, 4.891_638_475_698_59),
            (1e-9, 6.109_410_204_869_397_5),
        ] {
            assert!((two_sided_quantile(p) - z).abs() < 1e-12 * z, "{p}: {} against {z}", two_sided_quantile(p));
        }
        assert_eq!(two_sided_quantile(1.0), 0.0);
    }

    #[test]
    fn the_limit_grows_slowly_with_the_number_of_readings() {
        // The limits that the sheet states: 3.2 for 7 readings, 3.5 for 20, 4.0 for 180.
        for (n, limit) in [(7, 3.2), (20, 3.5), (180, 4.0)] {
            let z = z_n(n).unwrap();
            assert!((z - limit).abs() < 0.05, "{n}: {z}");
        }
        // One reading: Φ⁻¹(0.995), value from memory.
        assert!((z_n(1).unwrap() - 2.575_829_303_548_901).abs() < 1e-12);
        assert_eq!(z_n(0), None);
        assert!(z_n(usize::MAX).unwrap() < 10.0);
    }
}
