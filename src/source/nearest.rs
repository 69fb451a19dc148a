//! "Did you mean": the choice that a misspelt name was most likely meant to be.

/// Names longer than this are not compared: nobody misspells that much, and the cost is quadratic.
const LONGEST: usize = 64;

/// The choice that is closest to `name`, if one is close enough to be meant.
///
/// Close is an edit distance (insertions, deletions, replacements, swapped neighbours; case does
/// not count) of at most a third of the longer name, or one name beginning with the other from
/// three letters on. Of equally close choices the first is taken.
///
/// The distance is the "optimal string alignment" of R. A. Wagner and R. Lowrance, "An extension
/// of the string-to-string correction problem", Journal of the ACM 22 (1975), without the later
/// edits of a swapped pair.
#[must_use]
pub fn nearest<'a>(name: &str, choices: impl IntoIterator<Item = &'a str>) -> Option<&'a str> {
    let name: Vec<char> = name.to_lowercase().chars().collect();
    if name.is_empty() || name.len() > LONGEST {
        return None;
    }
    let mut best: Option<(usize, &str)> = None;
    for choice in choices {
        let letters: Vec<char> = choice.to_lowercase().chars().collect();
        if letters.len() > LONGEST {
            continue;
        }
        let (short, long) =
            if name.len() < letters.len() { (&name, &letters) } else { (&letters, &name) };
        let abbreviates = short.len() >= 3 && long.starts_with(short);
        let edits = distance(&name, &letters);
        let allowed = (long.len() / 3).max(1);
        let close = edits <= allowed && edits < short.len().max(1);
        if !close && !abbreviates {
            continue;
        }
        let cost = if abbreviates { edits.min(allowed) } else { edits };
        if best.is_none_or(|(least, _)| cost < least) {
            best = Some((cost, choice));
        }
    }
    best.map(|(_, choice)| choice)
}

/// Edits that lead from `a` to `b`.
fn distance(a: &[char], b: &[char]) -> usize {
    let mut before: Vec<usize> = Vec::new();
    let mut above: Vec<usize> = (0..=b.len()).collect();
    for (i, ca) in a.iter().enumerate() {
        let mut row = vec![i + 1];
        for (j, cb) in b.iter().enumerate() {
            let replaced = above[j] + usize::from(ca != cb);
            let mut least = replaced.min(above[j + 1] + 1).min(row[j] + 1);
            if i > 0 && j > 0 && *ca == b[j - 1] && a[i - 1] == *cb {
                least = least.min(before[j - 1] + 1);
            }
            row.push(least);
        }
        before = std::mem::replace(&mut above, row);
    }
    above[b.len()]
}

#[cfg(test)]
mod tests {
    use super::*;

    fn letters(text: &str) -> Vec<char> {
        text.chars().collect()
    }

    #[test]
    fn distances_are_those_of_textbooks() {
        // "kitten" to "sitting" is the example found in most texts on edit distance.
        for (a, b, expected) in
            [("kitten", "sitting", 3), ("ab", "ba", 1), ("", "abc", 3), ("same", "same", 0)]
        {
            assert_eq!(distance(&letters(a), &letters(b)), expected, "{a} {b}");
        }
    }

    #[test]
    fn slips_of_the_pen_find_their_word() {
        let keys = ["diameter", "centre", "radius", "start", "sweep", "end"];
        for (name, expected) in [
            ("diametre", Some("diameter")),
            ("center", Some("centre")),
            ("dia", Some("diameter")),
            ("RADIUS", Some("radius")),
            ("strat", Some("start")),
            ("colour", None),
            ("x", None),
            ("", None),
        ] {
            assert_eq!(nearest(name, keys), expected, "{name}");
        }
    }

    #[test]
    fn one_letter_names_are_not_each_other() {
        assert_eq!(nearest("a", ["b", "c"]), None);
    }
}
