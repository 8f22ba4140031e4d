//! The known word that a misspelt one most likely meant.

/// The candidate at the smallest edit distance from `word`, if that is at most two edits.
pub(crate) fn nearest<'a>(word: &str, candidates: &[&'a str]) -> Option<&'a str> {
    candidates
        .iter()
        .map(|candidate| (edits(word, candidate), *candidate))
        .filter(|(distance, candidate)| *distance <= 2 && *distance < candidate.chars().count())
        .min_by_key(|(distance, _)| *distance)
        .map(|(_, candidate)| candidate)
}

/// Levenshtein distance.
fn edits(from: &str, to: &str) -> usize {
    let to: Vec<char> = to.chars().collect();
    let mut row: Vec<usize> = (0..=to.len()).collect();
    for (i, a) in from.chars().enumerate() {
        let mut diagonal = row[0];
        row[0] = i + 1;
        for (j, b) in to.iter().enumerate() {
            let above = row[j + 1];
            row[j + 1] = (diagonal + usize::from(a != *b))
                .min(above + 1)
                .min(row[j] + 1);
            diagonal = above;
        }
    }
    row[to.len()]
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_slip_finds_its_word_and_nonsense_finds_none() {
        let words = ["shells", "source", "zeta_source", "hii"];
        assert_eq!(nearest("shell", &words), Some("shells"));
        assert_eq!(nearest("sorce", &words), Some("source"));
        assert_eq!(nearest("hi", &words), Some("hii"));
        assert_eq!(nearest("temperature", &words), None);
    }
}
