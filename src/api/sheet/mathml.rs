//! The plain-text equations of the data sheets as `MathML`, which browsers typeset and print without a script.
//!
//! The notation is that of the sheets, not `AsciiMath`: words stand among the symbols, and a space or its absence tells a
//! product from a function (`m (a + b)`, `m(T)`). The libraries for `AsciiMath` read neither.

use maud::{Markup, html};

/// A product that is not written, for those who have it read out.
const INVISIBLE_TIMES: &str = "\u{2062}";
/// What stands between a function and its argument, for the same.
const FUNCTION_APPLICATION: &str = "\u{2061}";

const GREEK: &[(&str, &str)] = &[
    ("gamma", "γ"),
    ("eta", "η"),
    ("theta", "θ"),
    ("lambda", "λ"),
    ("mu", "μ"),
    ("nu", "ν"),
    ("pi", "π"),
    ("rho", "ρ"),
];
const FUNCTIONS: &[&str] = &["artanh", "cos", "exp", "max", "min", "sin", "sqrt"];
/// Names of several letters that are symbols all the same.
const NUMBERS_OF_MERIT: &[&str] = &["Fo", "Nu", "Re"];
const OPERATORS: &[(&str, &str)] = &[
    ("<=", "≤"),
    (">=", "≥"),
    ("+-", "±"),
    ("-", "−"),
    ("+", "+"),
    ("=", "="),
    ("<", "<"),
    (">", ">"),
];

/// Equations, one paragraph for each that the text separates by a semicolon.
#[must_use]
pub fn equations(text: &str) -> Markup {
    html! {
        @for clause in text.split(';') { p.eq { (clause_of(clause.trim())) } }
    }
}

/// Symbols within a line of text.
pub(super) fn inline(text: &str) -> Markup {
    clause_of(text)
}

/// The inside of a formula that is put together elsewhere.
pub(super) fn fragment(text: &str) -> Markup {
    let mut parser = Parser { tokens: tokens(text), at: 0 };
    parser.row(&[])
}

fn clause_of(text: &str) -> Markup {
    let mut parser = Parser { tokens: tokens(text), at: 0 };
    let mut pieces = Vec::new();
    while parser.peek().is_some() {
        pieces.push(parser.piece());
    }
    html! { @for piece in &pieces { (piece) } }
}

#[derive(Debug, Clone, PartialEq, Eq)]
enum Token {
    Number(String),
    Word(String),
    Operator(&'static str),
    Other(char),
    Space,
}

fn tokens(text: &str) -> Vec<Token> {
    let mut found = Vec::new();
    let mut rest = text;
    while let Some(first) = rest.chars().next() {
        let (token, length) = token_of(rest, first);
        found.push(token);
        rest = rest.get(length..).unwrap_or_default();
    }
    found
}

fn token_of(rest: &str, first: char) -> (Token, usize) {
    if first.is_ascii_digit() {
        let length = number_length(rest);
        return (Token::Number(rest.get(..length).unwrap_or_default().to_owned()), length);
    }
    if first.is_alphabetic() {
        let length = word_length(rest);
        return (Token::Word(rest.get(..length).unwrap_or_default().to_owned()), length);
    }
    if let Some((written, sign)) = OPERATORS.iter().find(|(written, _)| rest.starts_with(written)) {
        return (Token::Operator(sign), written.len());
    }
    if first.is_whitespace() {
        let length = rest.len() - rest.trim_start().len();
        return (Token::Space, length);
    }
    (Token::Other(first), first.len_utf8())
}

/// Letters, digits and apostrophes; a hyphen joins two words, a minus stands between spaces or beside a symbol.
fn word_length(text: &str) -> usize {
    let is_inside = |letter: char| letter.is_alphanumeric() || letter == '\'';
    let length_of = |text: &str| text.find(|letter| !is_inside(letter)).unwrap_or(text.len());
    let length = length_of(text);
    let rest = text.get(length..).and_then(|rest| rest.strip_prefix('-')).unwrap_or_default();
    let next = length_of(rest);
    if length > 1 && next > 1 && rest.starts_with(char::is_alphabetic) {
        return length + 1 + next;
    }
    length
}

/// Digits, a point between digits, and an exponent such as `e5`.
fn number_length(text: &str) -> usize {
    let bytes = text.as_bytes();
    let digits = |from: usize| {
        let count = bytes.iter().skip(from).take_while(|byte| byte.is_ascii_digit()).count();
        from + count
    };
    let whole = digits(0);
    let end = match bytes.get(whole) {
        Some(b'.') if digits(whole + 1) > whole + 1 => digits(whole + 1),
        _ => whole,
    };
    match bytes.get(end) {
        Some(b'e') if digits(end + 1) > end + 1 => digits(end + 1),
        _ => end,
    }
}

/// Something that can be divided, and what is left of it without its own brackets.
struct Operand {
    shown: Markup,
    bare: Option<Markup>,
}

impl Operand {
    const fn of(shown: Markup) -> Self {
        Self { shown, bare: None }
    }

    fn without_brackets(self) -> Markup {
        html! { mrow { (self.bare.unwrap_or(self.shown)) } }
    }
}

struct Parser {
    tokens: Vec<Token>,
    at: usize,
}

impl Parser {
    fn peek(&self) -> Option<&Token> {
        self.tokens.get(self.at)
    }

    fn next(&mut self) -> Option<Token> {
        let token = self.peek().cloned();
        self.at += 1;
        token
    }

    fn skip_space(&mut self) {
        while self.peek() == Some(&Token::Space) {
            self.at += 1;
        }
    }

    /// A run of words and commas, or a formula up to the next of them.
    fn piece(&mut self) -> Markup {
        let mut text = String::new();
        while let Some(token) = self.peek() {
            match token {
                Token::Space => text.push(' '),
                Token::Other(mark @ (',' | ':' | ';' | '.')) => text.push(*mark),
                Token::Word(word) if self.is_text(word) => text.push_str(word),
                Token::Number(_) | Token::Word(_) | Token::Operator(_) | Token::Other(_) => break,
            }
            self.at += 1;
        }
        if !text.is_empty() {
            return html! { (text) };
        }
        let row = self.row(&[]);
        html! { math displaystyle="true" { (row) } }
    }

    /// A formula up to one of some marks; without marks, up to words or a comma.
    fn row(&mut self, ends: &[char]) -> Markup {
        let mut parts: Vec<Markup> = Vec::new();
        let mut follows_operand = false;
        let mut has_gap = false;
        while let Some(token) = self.peek() {
            match token {
                Token::Other(mark) if ends.contains(mark) => break,
                Token::Other(',' | ':' | ';') if ends.is_empty() => break,
                Token::Word(word) if self.is_text(word) => {
                    if ends.is_empty() {
                        // The space belongs to the words.
                        self.at -= usize::from(has_gap);
                        break;
                    }
                    parts.push(html! { mtext { "\u{a0}" (word) "\u{a0}" } });
                    self.at += 1;
                    follows_operand = false;
                }
                Token::Space => {
                    self.at += 1;
                    has_gap = true;
                    continue;
                }
                Token::Operator(sign) => {
                    parts.push(html! { mo { (sign) } });
                    self.at += 1;
                    follows_operand = false;
                }
                Token::Word(word) if word == "sum" || word == "integral" => {
                    let sign = if word == "sum" { "∑" } else { "∫" };
                    self.at += 1;
                    self.skip_of();
                    parts.push(html! { mo { (sign) } });
                    follows_operand = false;
                }
                Token::Other('^' | '_' | '/' | ')' | ']' | ',' | ':') => {
                    let mark = self.next();
                    if let Some(Token::Other(mark)) = mark {
                        parts.push(html! { mo { (mark) } });
                    }
                    follows_operand = false;
                }
                Token::Number(_) | Token::Word(_) | Token::Other(_) => {
                    if follows_operand && has_gap {
                        parts.push(html! { mo { (INVISIBLE_TIMES) } });
                        if matches!(token, Token::Word(word) if FUNCTIONS.contains(&word.as_str()))
                        {
                            parts.push(html! { mspace width="0.17em" {} });
                        }
                    }
                    parts.push(self.quotient());
                    follows_operand = true;
                }
            }
            has_gap = false;
        }
        html! { @for part in &parts { (part) } }
    }

    /// `sum of x` is the sum sign before x.
    fn skip_of(&mut self) {
        let is_of = self.tokens.get(self.at) == Some(&Token::Space)
            && self.tokens.get(self.at + 1) == Some(&Token::Word("of".to_owned()));
        if is_of {
            self.at += 2;
        }
    }

    /// Whether a word of the text is prose: none of the symbols, and `a` only among other words.
    fn is_text(&self, word: &str) -> bool {
        if word == "a" {
            let before = self.tokens.get(..self.at).unwrap_or_default().iter().rev();
            let before = before.clone().find(|token| **token != Token::Space);
            return matches!(before, Some(Token::Word(word)) if word.len() > 1 && self.is_text(word));
        }
        let has_index = self.tokens.get(self.at + 1) == Some(&Token::Other('_'));
        let is_known = GREEK.iter().any(|(name, _)| *name == word)
            || FUNCTIONS.contains(&word)
            || NUMBERS_OF_MERIT.contains(&word)
            || ["sum", "integral"].contains(&word);
        let is_call = self.tokens.get(self.at + 1) == Some(&Token::Other('('));
        word.chars().count() > 1
            && !(has_index || is_known || is_call || is_differential(word))
            && numbered(word).is_none()
    }

    /// An operand, over another if a slash follows, and so on from left to right.
    fn quotient(&mut self) -> Markup {
        let mut left = self.operand();
        loop {
            let place = self.at;
            self.skip_space();
            if self.peek() != Some(&Token::Other('/')) {
                self.at = place;
                return left.shown;
            }
            self.at += 1;
            self.skip_space();
            let right = self.operand();
            let (above, below) = (left.without_brackets(), right.without_brackets());
            left = Operand::of(html! { mfrac { (above) (below) } });
        }
    }

    /// A number, a symbol, a function with its argument or a group in brackets, with its index and exponent.
    fn operand(&mut self) -> Operand {
        match self.next() {
            Some(Token::Number(number)) => self.scripted(numeral(&number)),
            Some(Token::Word(word)) if word == "sqrt" && self.opens() => {
                self.at += 1;
                let inside = self.group(')');
                self.scripted(html! { msqrt { (inside) } })
            }
            Some(Token::Word(word)) => {
                let base = self.scripted(symbol(&word)).shown;
                if !self.opens() {
                    return Operand::of(base);
                }
                self.at += 1;
                let inside = self.group(')');
                let argument = fenced(&inside, ["(", ")"]);
                Operand::of(html! { mrow { (base) mo { (FUNCTION_APPLICATION) } (argument) } })
            }
            Some(Token::Other('(')) => {
                let inside = self.group(')');
                let shown = fenced(&inside, ["(", ")"]);
                if matches!(self.peek(), Some(Token::Other('_' | '^'))) {
                    return self.scripted(shown);
                }
                Operand { shown, bare: Some(inside) }
            }
            Some(Token::Other('|')) => {
                let inside = self.group('|');
                self.scripted(fenced(&inside, ["|", "|"]))
            }
            Some(Token::Other(mark)) => Operand::of(html! { mo { (mark) } }),
            Some(Token::Operator(sign)) => Operand::of(html! { mo { (sign) } }),
            Some(Token::Space) | None => Operand::of(html! {}),
        }
    }

    fn opens(&self) -> bool {
        self.peek() == Some(&Token::Other('('))
    }

    fn group(&mut self, end: char) -> Markup {
        let inside = self.row(&[end]);
        self.at += 1;
        inside
    }

    fn scripted(&mut self, base: Markup) -> Operand {
        let index = self.script('_', true);
        let exponent = self.script('^', false);
        Operand::of(match (index, exponent) {
            (None, None) => base,
            (Some(index), None) => html! { msub { (base) (index) } },
            (None, Some(exponent)) => html! { msup { (base) (exponent) } },
            (Some(index), Some(exponent)) => html! { msubsup { (base) (index) (exponent) } },
        })
    }

    /// What stands after `_` or `^`. Words of an index are upright.
    fn script(&mut self, mark: char, is_index: bool) -> Option<Markup> {
        if self.peek() != Some(&Token::Other(mark)) {
            return None;
        }
        self.at += 1;
        Some(match self.next()? {
            Token::Word(word) if is_index && word.chars().count() > 1 => html! { mtext { (word) } },
            Token::Word(word) => symbol(&word),
            Token::Number(number) => numeral(&number),
            Token::Other('(') => {
                let inside = self.group(')');
                html! { mrow { (inside) } }
            }
            Token::Operator(sign) => html! { mo { (sign) } },
            Token::Other(_) | Token::Space => html! { mrow {} },
        })
    }
}

fn fenced(inside: &Markup, [open, close]: [&str; 2]) -> Markup {
    html! { mrow { mo fence="true" { (open) } (inside) mo fence="true" { (close) } } }
}

/// `dv` of `dv/dt`.
fn is_differential(word: &str) -> bool {
    word.starts_with('d') && word.chars().count() == 2 && word != "do"
}

/// `T1` as T and 1.
fn numbered(word: &str) -> Option<(&str, &str)> {
    let (letter, number) = word.split_at_checked(1)?;
    let is_number = !number.is_empty() && number.bytes().all(|byte| byte.is_ascii_digit());
    is_number.then_some((letter, number))
}

fn symbol(word: &str) -> Markup {
    if let Some((_, letter)) = GREEK.iter().find(|(name, _)| *name == word) {
        return html! { mi { (letter) } };
    }
    if let Some((letter, number)) = numbered(word) {
        return html! { msub { mi { (letter) } mn { (number) } } };
    }
    if is_differential(word) {
        let (d, variable) = word.split_at(1);
        return html! { mrow { mi { (d) } mi { (variable) } } };
    }
    html! { mi { (word) } }
}

/// A number as written; an exponent becomes a power of ten.
fn numeral(text: &str) -> Markup {
    if let Some((digits, exponent)) = text.split_once('e') {
        return power_of_ten(digits, exponent);
    }
    html! { mn { (text) } }
}

/// `digits` times ten to the `exponent`.
pub(super) fn power_of_ten(digits: &str, exponent: &str) -> Markup {
    html! { mrow { mn { (digits) } mo { "×" } msup { mn { "10" } mn { (exponent) } } } }
}
