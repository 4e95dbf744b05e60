//! Words that were typed, against words that are known.

/// The word of `known` with the fewest edits (insert, drop, change) from `word`.
pub(crate) fn nearest<'a>(word: &str, known: &[&'a str]) -> &'a str {
    known.iter().copied().min_by_key(|k| edits(word, k)).unwrap_or("")
}

fn edits(a: &str, b: &str) -> usize {
    let b: Vec<char> = b.chars().collect();
    let mut row: Vec<usize> = (0..=b.len()).collect();
    for (i, x) in a.chars().enumerate() {
        let mut diagonal = row[0];
        row[0] = i + 1;
        for (j, y) in b.iter().enumerate() {
            let changed = diagonal + usize::from(x != *y);
            diagonal = row[j + 1];
            row[j + 1] = changed.min(row[j] + 1).min(diagonal + 1);
        }
    }
    row[b.len()]
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn nearest_word() {
        assert_eq!(nearest("surface_gravty", &["surface_gap", "surface_gravity", "tare"]), "surface_gravity");
        assert_eq!(edits("kitten", "sitting"), 3);
        assert_eq!(edits("", "abc"), 3);
    }
}
