//! Words and numbers of charts: shortened, broken into lines, and free of what a document cannot hold.

/// Widths of letters differ; a line of text is about this many ems a letter, on average.
const EMS_PER_LETTER: f64 = 0.6;

/// About how wide a text is, for letters `size` high.
#[must_use]
pub(super) fn width(text: &str, size: i32) -> i32 {
    let letters = i32::try_from(text.chars().count()).unwrap_or(i32::MAX).min(100_000);
    super::scale::pixel(f64::from(letters) * f64::from(size) * EMS_PER_LETTER)
}

/// The text without control characters and others that XML does not allow or that turn the direction of reading.
#[must_use]
pub fn plain(text: &str) -> String {
    let is_hidden = |letter: char| {
        letter.is_control()
            || matches!(letter, '\u{200B}'..='\u{200F}' | '\u{2028}'..='\u{202E}' | '\u{2060}'..='\u{206F}' | '\u{FEFF}' | '\u{FFFE}' | '\u{FFFF}')
    };
    text.chars().map(|letter| if is_hidden(letter) { ' ' } else { letter }).collect()
}

/// The text, cut to at most `most` letters with an ellipsis.
#[must_use]
pub fn shortened(text: &str, most: usize) -> String {
    if text.chars().count() <= most {
        return text.to_owned();
    }
    let kept: String = text.chars().take(most.saturating_sub(1)).collect();
    format!("{}…", kept.trim_end())
}

/// The text as lines of at most `most` letters, broken at spaces; a longer word is cut.
#[must_use]
pub(super) fn lines(text: &str, most: usize) -> Vec<String> {
    let mut lines: Vec<String> = Vec::new();
    for word in text.split_whitespace().map(|word| shortened(word, most)) {
        match lines.last_mut() {
            Some(line) if line.chars().count() + 1 + word.chars().count() <= most => {
                line.push(' ');
                line.push_str(&word);
            }
            _ => lines.push(word),
        }
    }
    lines
}

/// A number with four significant digits and no idle zeros.
#[must_use]
pub fn number(value: f64) -> String {
    let magnitude = value.abs();
    if magnitude > 0.0 && !(1e-3..1e6).contains(&magnitude) {
        return format!("{value:.3e}");
    }
    let decimals = match magnitude {
        size if size >= 1000.0 => 0,
        size if size >= 100.0 => 1,
        size if size >= 10.0 => 2,
        _ => 3,
    };
    let text = format!("{value:.decimals$}");
    let text =
        if text.contains('.') { text.trim_end_matches('0').trim_end_matches('.') } else { &text };
    if text == "-0" { "0".to_owned() } else { text.to_owned() }
}
