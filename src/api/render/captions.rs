//! Names of moments above a panel, in steps, so that none covers another or its line.

use super::words;

/// A name with the place of its line.
#[derive(Debug, Clone, PartialEq, Eq)]
pub(super) struct Caption {
    pub(super) label: String,
    /// Where its line stands.
    pub(super) at: i32,
    /// Where the text begins.
    pub(super) left: i32,
    /// Steps above the panel, from 0.
    pub(super) row: i32,
}

/// Places names to the right of their lines. Going left, a name that would reach the next one steps up: its line
/// then passes that name on the left.
pub(super) fn placed(mut names: Vec<(String, i32)>, size: i32, right: i32) -> Vec<Caption> {
    names.sort_by_key(|name| name.1);
    let mut captions: Vec<Caption> = Vec::with_capacity(names.len());
    for (label, at) in names.into_iter().rev() {
        let width = words::width(&label, size);
        let left = (at + size / 4).min(right - width);
        let row = captions.last().map_or(0, |next| {
            if left + width + size / 3 <= next.at.min(next.left) { next.row } else { next.row + 1 }
        });
        captions.push(Caption { label, at, left, row });
    }
    captions.reverse();
    captions
}

/// Steps that the names take.
pub(super) fn rows(captions: &[Caption]) -> i32 {
    captions.iter().map(|caption| caption.row + 1).max().unwrap_or(0)
}
