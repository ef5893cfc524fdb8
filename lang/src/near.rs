//! The names that someone may have meant.

/// The nearest of `candidates` to `word`, best first, at most three: those that are equal but for case, then those
/// within an edit distance of a third of the word's length (at least one).
pub fn nearest<'c>(word: &str, candidates: impl IntoIterator<Item = &'c str>) -> Vec<String> {
    // Nobody mistypes so long a word, and the distance is quadratic.
    if word.len() > 80 {
        return Vec::new();
    }
    let lower = word.to_lowercase();
    let most = (word.chars().count() / 3).max(1);
    let mut found: Vec<(usize, &str)> = candidates
        .into_iter()
        .filter(|candidate| *candidate != word)
        .map(|candidate| {
            let other = candidate.to_lowercase();
            let distance =
                if other == lower { 0 } else { strsim::damerau_levenshtein(word, candidate).max(1) };
            (distance, candidate)
        })
        .filter(|(distance, candidate)| *distance <= most && *distance < candidate.chars().count())
        .collect();
    found.sort();
    found.dedup();
    found.into_iter().take(3).map(|(_, name)| name.to_owned()).collect()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn nearest_names_come_first() {
        let names = ["silver", "silica", "silicon", "titania"];
        assert_eq!(nearest("silcon", names), ["silicon"]);
        assert_eq!(nearest("silver2", names), ["silver"]);
        assert_eq!(nearest("Titania", names), ["titania"]);
        assert!(nearest("gold", names).is_empty());
    }
}
