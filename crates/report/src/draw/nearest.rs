//! Offering the nearest names for one that is unknown.

/// Up to three of `offered` nearest to `asked`, nearest first.
pub(crate) fn nearest(asked: &str, offered: &[String]) -> Vec<String> {
    let mut ranked: Vec<(usize, &String)> = offered
        .iter()
        .map(|name| (distance(asked, name), name))
        .collect();
    ranked.sort();
    ranked.dedup();
    ranked
        .into_iter()
        .take(3)
        .map(|(_, name)| name.clone())
        .collect()
}

/// Number of single-character edits between two names (Levenshtein 1966).
fn distance(a: &str, b: &str) -> usize {
    let b: Vec<char> = b.chars().collect();
    let mut row: Vec<usize> = (0..=b.len()).collect();
    for (i, from) in a.chars().enumerate() {
        let mut diagonal = row[0];
        row[0] = i + 1;
        for (j, to) in b.iter().enumerate() {
            let replace = diagonal + usize::from(from != *to);
            diagonal = row[j + 1];
            row[j + 1] = replace.min(diagonal + 1).min(row[j] + 1);
        }
    }
    row[b.len()]
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn nearest_first() {
        let offered = ["4a1", "2b2", "5a1", "2b1"].map(str::to_owned);
        assert_eq!(
            nearest("6a1", &offered)[..2],
            ["4a1", "5a1"].map(str::to_owned)
        );
        assert_eq!(nearest("2b", &offered)[0], "2b1");
        assert_eq!(distance("kitten", "sitting"), 3);
    }
}
