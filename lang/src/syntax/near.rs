//! Nearest words, for messages that guess what was meant.

/// The candidates that are nearest to `word`, best first: alike but for case, or within a third of its length.
pub(super) fn near(word: &str, candidates: impl Iterator<Item = &'static str>) -> Vec<&'static str> {
    // Nobody mistypes so long a word, and the distance is quadratic; one letter is near to anything.
    if word.len() > 40 || word.len() < 2 {
        return Vec::new();
    }
    let bound = (word.chars().count() / 3).max(1);
    let mut found: Vec<(usize, &'static str)> = candidates
        .filter_map(|candidate| {
            if candidate.eq_ignore_ascii_case(word) {
                return Some((0, candidate));
            }
            let distance = distance(word, candidate);
            (distance <= bound && distance + 1 < candidate.chars().count().max(3))
                .then_some((distance, candidate))
        })
        .collect();
    found.sort();
    found.dedup();
    found.into_iter().map(|(_, candidate)| candidate).take(3).collect()
}

/// Insertions, deletions, substitutions and swaps of neighbours between two words.
fn distance(a: &str, b: &str) -> usize {
    let a: Vec<char> = a.chars().collect();
    let b: Vec<char> = b.chars().collect();
    let mut before: Vec<usize> = Vec::new();
    let mut previous: Vec<usize> = (0..=b.len()).collect();
    for (i, x) in a.iter().enumerate() {
        let mut row = vec![i + 1];
        for (j, y) in b.iter().enumerate() {
            let mut least = (previous[j] + usize::from(x != y)).min(previous[j + 1] + 1).min(row[j] + 1);
            if i > 0 && j > 0 && *x == b[j - 1] && a[i - 1] == *y {
                least = least.min(before[j - 1] + 1);
            }
            row.push(least);
        }
        before = std::mem::replace(&mut previous, row);
    }
    previous.last().copied().unwrap_or(0)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn slips_of_the_finger_are_near() {
        let words = ["layer", "slab", "nm", "um", "MPa"];
        assert_eq!(near("laier", words.into_iter()), ["layer"]);
        assert_eq!(near("alyer", words.into_iter()), ["layer"]);
        assert_eq!(near("mpa", words.into_iter()), ["MPa"]);
        assert!(near("repeat", words.into_iter()).is_empty());
    }
}
