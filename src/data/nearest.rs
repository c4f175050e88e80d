//! The known name that a mistyped one most likely means.

/// Names longer than this are not compared: the effort grows with the length.
pub const LONGEST: usize = 64; // bytes

/// How alike two names must be, from 0 to 1. Below that a suggestion confuses more than it helps.
const ALIKE: f64 = 0.6;

/// The one of `known` that is most like `name`, whatever the case of the letters, if one is much like it.
#[must_use]
pub fn nearest<'a>(name: &str, known: impl IntoIterator<Item = &'a str>) -> Option<&'a str> {
    if name.len() > LONGEST {
        return None;
    }
    let name = name.to_lowercase();
    let likeness =
        |other: &str| strsim::normalized_damerau_levenshtein(&name, &other.to_lowercase());
    let scored = known.into_iter().map(|other| (likeness(other), other));
    let best = scored.max_by(|one, other| one.0.total_cmp(&other.0))?;
    (best.0 >= ALIKE).then_some(best.1)
}
