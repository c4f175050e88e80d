//! The sheet: words, key and panels below each other.
//!
//! The library works in whole pixels, so the sheet is ten times as large as it is meant to be seen.

use plotters::backend::SVGBackend;
use plotters::coord::Shift;
use plotters::drawing::DrawingArea;
use plotters::element::{Circle, PathElement, Polygon, Text};
use plotters::style::text_anchor::{HPos, Pos, VPos};
use plotters::style::{Color, FontStyle, IntoFont, ShapeStyle, TextStyle};

use super::chart::{Chart, Key, Style, Tone, Weight};
use super::ink::Ink;
use super::panel::PanelLayout;
use super::svg::DrawingError;
use super::words;

/// The place to draw on.
pub(super) type Area<'a> = DrawingArea<SVGBackend<'a>, Shift>;

/// Width of the sheet.
pub(super) const WIDTH: i32 = 5600;
/// Left, right, top and bottom of the sheet.
pub(super) const MARGIN: i32 = 150;
/// Height of letters.
pub(super) const LETTERS: i32 = 172;
/// Height of a line of text.
pub(super) const LINE: i32 = 240;
const TITLE: i32 = 224;
const SMALL: i32 = 142;
/// Letters of a line of text; more would leave the sheet.
const MOST_LETTERS: usize = 56;
/// Length of the sample before a line of the key.
const SAMPLE: i32 = 620;

/// A style of text.
pub(super) fn text_style(
    size: i32,
    ink: Ink,
    bold: bool,
    anchor: (HPos, VPos),
) -> TextStyle<'static> {
    // The library takes the height of a line and divides by this to find that of the letters.
    const LINE_PER_LETTER: f64 = 1.24;
    let style = if bold { FontStyle::Bold } else { FontStyle::Normal };
    let font = ("sans-serif", f64::from(size) * LINE_PER_LETTER, style).into_font();
    let color = ink.color().to_backend_color();
    TextStyle { font, color, pos: Pos::new(anchor.0, anchor.1) }
}

/// A style of lines.
pub(super) fn line_style(ink: Ink, width: u32) -> ShapeStyle {
    ink.color().stroke_width(width)
}

impl Style {
    /// The look of a curve.
    pub(super) fn line(self) -> ShapeStyle {
        let width = match self.weight {
            Weight::Heavy => 32,
            Weight::Light => 15,
        };
        line_style(self.tone.into(), width)
    }

    /// Draws the shape of the case.
    pub(super) fn mark(self, area: &Area<'_>, (x, y): (i32, i32)) -> Result<(), DrawingError> {
        const SIZE: i32 = 62;
        let filled = Ink::from(self.tone).color().filled();
        let triangle = |up: i32| vec![(x, y - up), (x - SIZE, y + up / 2), (x + SIZE, y + up / 2)];
        match self.tone {
            Tone::Low => area.draw(&Polygon::new(triangle(-SIZE - 16), filled))?,
            Tone::Nominal => area.draw(&Circle::new((x, y), SIZE - 8, filled))?,
            Tone::High => area.draw(&Polygon::new(triangle(SIZE + 16), filled))?,
        }
        Ok(())
    }
}

/// Something that takes the whole width.
enum Block<'a> {
    Gap(i32),
    Line { text: String, size: i32, ink: Ink, bold: bool },
    Key { key: &'a Key, lines: Vec<String> },
    Panel(PanelLayout<'a>),
}

impl Block<'_> {
    fn height(&self) -> i32 {
        match self {
            Self::Gap(height) => *height,
            Self::Line { size, .. } => size * LINE / LETTERS,
            Self::Key { lines, .. } => LINE * i32::try_from(lines.len()).unwrap_or(1),
            Self::Panel(panel) => panel.height(),
        }
    }

    fn draw(&self, root: &Area<'_>, top: i32) -> Result<(), DrawingError> {
        let middle = top + self.height() / 2;
        let anchor = (HPos::Left, VPos::Center);
        match self {
            Self::Gap(_) => {}
            Self::Line { text, size, ink, bold } => {
                let style = text_style(*size, *ink, *bold, anchor);
                root.draw(&Text::new(text.as_str(), (MARGIN, middle), style))?;
            }
            Self::Key { key, lines } => draw_key(root, top + LINE / 2, key, lines)?,
            Self::Panel(panel) => panel.draw(root, top)?,
        }
        Ok(())
    }
}

/// Draws the sample of a line and what it stands for.
fn draw_key(
    root: &Area<'_>,
    mut middle: i32,
    key: &Key,
    lines: &[String],
) -> Result<(), DrawingError> {
    let ends = vec![(MARGIN, middle), (MARGIN + SAMPLE, middle)];
    root.draw(&PathElement::new(ends, key.style.line()))?;
    if key.is_marked {
        key.style.mark(root, (MARGIN + SAMPLE / 2, middle))?;
    }
    for line in lines {
        let words = text_style(LETTERS, Ink::Text, false, (HPos::Left, VPos::Center));
        root.draw(&Text::new(line.as_str(), (MARGIN + SAMPLE + 110, middle), words))?;
        middle += LINE;
    }
    Ok(())
}

/// A chart, laid out.
pub(super) struct Sheet<'a> {
    blocks: Vec<Block<'a>>,
}

impl<'a> Sheet<'a> {
    /// Lays a chart out.
    pub(super) fn new(chart: &'a Chart) -> Self {
        let mut blocks = vec![Block::Gap(MARGIN)];
        push_lines(&mut blocks, &chart.title, TITLE, Ink::Text, true);
        for line in &chart.subtitle {
            push_lines(&mut blocks, line, LETTERS, Ink::Soft, false);
        }
        if !chart.key.is_empty() {
            blocks.push(Block::Gap(90));
            blocks.extend(chart.key.iter().map(|key| {
                let lines = words::lines(&words::plain(&key.label), MOST_LETTERS - 9);
                Block::Key { key, lines }
            }));
        }
        let panels = PanelLayout::all(&chart.panels);
        for panel in panels {
            blocks.push(Block::Gap(170));
            push_lines(&mut blocks, &panel.panel.heading, LETTERS, Ink::Text, true);
            for note in &panel.panel.notes {
                push_lines(&mut blocks, note, LETTERS, Ink::Soft, false);
            }
            blocks.push(Block::Panel(panel));
        }
        blocks.push(Block::Gap(110));
        for line in &chart.footer {
            push_lines(&mut blocks, line, SMALL, Ink::Soft, false);
        }
        blocks.push(Block::Gap(MARGIN));
        Self { blocks }
    }

    /// Height of the sheet.
    pub(super) fn height(&self) -> i32 {
        self.blocks.iter().map(Block::height).sum()
    }
}

fn push_lines(blocks: &mut Vec<Block<'_>>, text: &str, size: i32, ink: Ink, bold: bool) {
    let letters = i32::try_from(MOST_LETTERS).unwrap_or(i32::MAX) * LETTERS / size;
    let most = usize::try_from(letters).unwrap_or(MOST_LETTERS);
    let lines = words::lines(&words::plain(text), most);
    blocks.extend(lines.into_iter().map(|text| Block::Line { text, size, ink, bold }));
}

/// Draws a sheet.
pub(super) fn draw(sheet: &Sheet<'_>, root: &Area<'_>) -> Result<(), DrawingError> {
    root.fill(&Ink::Paper.color())?;
    let mut top = 0;
    for block in &sheet.blocks {
        block.draw(root, top)?;
        top += block.height();
    }
    Ok(())
}
