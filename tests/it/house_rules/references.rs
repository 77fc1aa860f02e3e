//! One bibliography: every key cited in the sources stands in it, and every key in it is cited.

use std::collections::BTreeSet;

use super::source::{self, assert_none};

const BIBLIOGRAPHY: &str = "src/model/REFERENCES.md";

#[test]
fn keys_and_bibliography_agree() {
    let cited: BTreeSet<String> = source::sources().iter().flat_map(|file| keys(&file.text)).collect();
    let listed = keys(&source::read(BIBLIOGRAPHY));
    let unknown = cited
        .difference(&listed)
        .map(|key| format!("cited in src, not in {BIBLIOGRAPHY}: {key}"));
    let unused = listed
        .difference(&cited)
        .map(|key| format!("in {BIBLIOGRAPHY}, cited nowhere in src: {key}"));
    assert_none("keys that stand alone:", &unknown.chain(unused).collect::<Vec<_>>());
}

#[test]
fn keys_are_recognised() {
    let found =
        keys("See [HylandWexler1983], eq. 3 and [CODATA2018]; not [x2000], [Pa], [`Air`], [1983] or Massman1998.");
    assert_eq!(found, ["CODATA2018", "HylandWexler1983"].map(String::from).into());
}

/// `[Author1983]`: letters, then a year, perhaps a letter, in square brackets.
fn keys(text: &str) -> BTreeSet<String> {
    text.split('[')
        .skip(1)
        .filter_map(|after| after.split_once(']'))
        .map(|(key, _)| key)
        .filter(|key| is_key(key))
        .map(String::from)
        .collect()
}

fn is_key(word: &str) -> bool {
    let letters: String = word.chars().take_while(|letter| !letter.is_ascii_digit()).collect();
    let year = word[letters.len()..].trim_end_matches(|letter: char| letter.is_ascii_lowercase());
    letters.starts_with(|first: char| first.is_ascii_uppercase())
        && letters.chars().all(|letter| letter.is_alphabetic() || letter == '-')
        && year.len() == 4
        && year.chars().all(|digit| digit.is_ascii_digit())
}
