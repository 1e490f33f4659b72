//! Did-you-mean: the nearest known word.

/// The known word that was most likely meant, if one is near enough: at most a third of the letters differ.
pub fn did_you_mean<'a>(word: &str, known: impl IntoIterator<Item = &'a str>) -> Option<&'a str> {
    let distance = |candidate: &str| strsim::osa_distance(&word.to_lowercase(), &candidate.to_lowercase());
    let near = known.into_iter().map(|candidate| (distance(candidate), candidate));
    let best = near.min_by_key(|(distance, _)| *distance)?;
    let longest = word.chars().count().max(best.1.chars().count());
    (best.0 * 3 <= longest).then_some(best.1)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_slip_finds_its_word() {
        let known = ["length_um", "width_um", "snap_nm", "shape"];
        for (word, meant) in [
            ("wdth_um", Some("width_um")),
            ("widht_um", Some("width_um")),
            ("Shape", Some("shape")),
            ("snap", None),
            ("colour", None),
            ("", None),
        ] {
            assert_eq!(did_you_mean(word, known), meant, "{word}");
        }
    }

    #[test]
    fn short_names_are_not_guessed_wildly() {
        assert_eq!(did_you_mean("TH", ["TG", "BG"]), None);
        assert_eq!(did_you_mean("tg", ["TG", "BG"]), Some("TG"));
    }
}
