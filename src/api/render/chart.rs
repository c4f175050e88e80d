//! What a chart shows: plain series, limits, marks and words, in the units of the answer.

/// Panels below each other, with the words around them.
#[derive(Debug, Clone, PartialEq)]
pub struct Chart {
    /// Tells the chart from others on the same page: letters, digits and hyphens.
    pub id: String,
    /// What is shown, in one line.
    pub title: String,
    /// Further lines below the title.
    pub subtitle: Vec<String>,
    /// The same in sentences, for those who do not see the chart.
    pub description: String,
    /// What the lines mean.
    pub key: Vec<Key>,
    /// The panels, from top to bottom.
    pub panels: Vec<Panel>,
    /// Small lines at the bottom.
    pub footer: Vec<String>,
}

/// A line of the key.
#[derive(Debug, Clone, PartialEq)]
pub struct Key {
    /// The look that is explained.
    pub style: Style,
    /// Whether the sample bears the mark of its case.
    pub is_marked: bool,
    /// What it stands for.
    pub label: String,
}

/// Which friction case a line is for. Color, dashes and the shape of the mark go with it.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Tone {
    /// The lowest friction.
    Low,
    /// The nominal friction, or no matter of friction.
    Nominal,
    /// The highest friction.
    High,
}

/// How heavy a line is.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Weight {
    /// For what matters most.
    Heavy,
    /// For what goes with it.
    Light,
}

/// The look of a line.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct Style {
    /// Its case.
    pub tone: Tone,
    /// Its weight.
    pub weight: Weight,
}

/// One coordinate system.
#[derive(Debug, Clone, PartialEq)]
pub struct Panel {
    /// What goes upwards, with its unit.
    pub heading: String,
    /// Lines below the heading.
    pub notes: Vec<String>,
    /// What goes to the right, with its unit.
    pub x_label: String,
    /// How far to the right the panel reaches, from 0.
    pub x_end: f64,
    /// Whether the values are to be seen from zero up.
    pub from_zero: bool,
    /// The lines.
    pub series: Vec<Series>,
    /// Horizontal lines that should not be passed.
    pub limits: Vec<Limit>,
    /// Stretches of time.
    pub bands: Vec<Band>,
    /// Moments.
    pub marks: Vec<Mark>,
    /// What stands in the place of lines that cannot be drawn.
    pub message: Option<String>,
}

impl Panel {
    /// A panel with nothing in it.
    #[must_use]
    pub fn empty() -> Self {
        Self {
            heading: String::new(),
            notes: Vec::new(),
            x_label: String::new(),
            x_end: 1.0,
            from_zero: false,
            series: Vec::new(),
            limits: Vec::new(),
            bands: Vec::new(),
            marks: Vec::new(),
            message: None,
        }
    }

    /// A message in the place of a panel.
    #[must_use]
    pub fn saying(message: impl Into<String>) -> Self {
        Self { message: Some(message.into()), ..Self::empty() }
    }
}

/// A line.
#[derive(Debug, Clone, PartialEq)]
pub struct Series {
    /// Its look.
    pub style: Style,
    /// Its points, in the order of x.
    pub points: Vec<(f64, f64)>,
    /// A point to be marked.
    pub marked: Option<(f64, f64)>,
}

/// A value that should not be passed.
#[derive(Debug, Clone, PartialEq)]
pub struct Limit {
    /// Whose.
    pub label: String,
    /// How much.
    pub value: f64,
}

/// A stretch of time with a name.
#[derive(Debug, Clone, PartialEq)]
pub struct Band {
    /// Its name.
    pub label: String,
    /// Where it begins.
    pub from: f64,
    /// Where it ends.
    pub to: f64,
}

/// A moment with a name.
#[derive(Debug, Clone, PartialEq)]
pub struct Mark {
    /// Its name.
    pub label: String,
    /// When.
    pub x: f64,
}
