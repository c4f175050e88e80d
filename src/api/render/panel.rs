//! One panel: axes, curves, limits, and the names of moments above.

use plotters::chart::ChartBuilder;
use plotters::element::{PathElement, Rectangle, Text};
use plotters::style::Color;
use plotters::style::text_anchor::{HPos, VPos};

use super::captions::{self, Caption};
use super::chart::{Panel, Weight};
use super::draw::{Area, LETTERS, LINE, MARGIN, WIDTH, line_style, text_style};
use super::ink::Ink;
use super::scale::Scale;
use super::svg::DrawingError;
use super::words;

/// Height between the axes.
const PLOT: i32 = 1850;
/// Room for the numbers below the axis.
const BELOW: i32 = 240;
/// Room to the right, for the half of the last number.
pub(super) const RIGHT: i32 = MARGIN + 150;
/// Room above, for the half of the highest number.
const ABOVE: i32 = 130;
/// Between axis and numbers.
const TICK: i32 = 30;
/// A limit is drawn if that leaves the curves at least this part of the height.
const LEAST_SHARE: f64 = 0.3;

/// A panel with its axes.
pub(super) struct PanelLayout<'a> {
    pub(super) panel: &'a Panel,
    x: Scale,
    pub(super) y: Scale,
    /// Where the axis upwards stands; the same for all panels of a sheet.
    pub(super) left: i32,
    /// Whether the words below the axis stand here: below the last of several panels.
    is_last: bool,
    captions: Vec<Caption>,
    /// What cannot be shown in the panel, in words.
    beyond: Vec<String>,
}

impl<'a> PanelLayout<'a> {
    /// Lays panels out that stand below each other.
    pub(super) fn all(panels: &'a [Panel]) -> Vec<Self> {
        let mut laid_out: Vec<Self> = panels.iter().map(Self::new).collect();
        let widths = laid_out.iter().flat_map(|panel| panel.y.labels());
        let widest = widths.map(|(_, label)| words::width(&label, LETTERS)).max().unwrap_or(0);
        let mut before = None;
        for panel in &mut laid_out {
            panel.left = MARGIN + widest + 3 * TICK;
            // Names that stand above the panel before need not be said again.
            panel.place_captions(before == Some(&panel.panel.bands));
            before = Some(&panel.panel.bands);
        }
        if let Some(last) = laid_out.last_mut() {
            last.is_last = true;
        }
        laid_out
    }

    fn new(panel: &'a Panel) -> Self {
        let (low, high) = extent(panel);
        let mut seen = (low, high);
        let mut beyond = Vec::new();
        for limit in panel.limits.iter().filter(|limit| limit.value.is_finite()) {
            let (least, most) = (seen.0.min(limit.value), seen.1.max(limit.value));
            if high - low >= LEAST_SHARE * (most - least) {
                seen = (least, most);
            } else {
                let side = if limit.value > high { "above" } else { "below" };
                beyond.push(format!(
                    "{} {}: {side} this panel",
                    super::frame::capital(&words::plain(&limit.label)),
                    words::number(limit.value)
                ));
            }
        }
        Self {
            panel,
            x: Scale::new(0.0, panel.x_end, 6),
            y: Scale::widened(seen.0, seen.1, 5),
            left: MARGIN,
            is_last: false,
            captions: Vec::new(),
            beyond,
        }
    }

    fn place_captions(&mut self, bands_are_named: bool) {
        let bands = self.panel.bands.iter().filter(|_| !bands_are_named);
        let bands = bands.map(|band| (&band.label, band.from));
        let marks = self.panel.marks.iter().map(|mark| (&mark.label, mark.x));
        let span = (self.left, WIDTH - RIGHT);
        let names =
            bands.chain(marks).map(|(label, x)| (words::plain(label), self.x.place(x, span)));
        self.captions = captions::placed(names.collect(), LETTERS, WIDTH - MARGIN);
    }

    fn above(&self) -> i32 {
        let lines = i32::try_from(self.beyond.len()).unwrap_or(0);
        captions::rows(&self.captions) * LINE + lines * LINE + ABOVE
    }

    /// What is said in the place of curves.
    fn message(&self) -> Option<Vec<String>> {
        const MOST_LETTERS: usize = 48;
        self.panel
            .message
            .as_ref()
            .map(|message| words::lines(&words::plain(message), MOST_LETTERS))
    }

    /// Height with everything that belongs to it.
    pub(super) fn height(&self) -> i32 {
        match self.message() {
            Some(lines) => i32::try_from(lines.len()).unwrap_or(0) * LINE + 2 * LINE,
            None => self.above() + PLOT + BELOW + if self.is_last { LINE } else { 0 },
        }
    }

    /// Draws the panel with its upper edge at `top`.
    pub(super) fn draw(&self, root: &Area<'_>, top: i32) -> Result<(), DrawingError> {
        if let Some(lines) = self.message() {
            return draw_message(root, top + LINE, &lines);
        }
        let plot_top = top + self.above();
        self.draw_bands(root, plot_top)?;
        self.draw_axes(root, plot_top)?;
        self.draw_captions(root, plot_top)?;
        self.draw_beyond(root, top)?;
        self.draw_limits(root, plot_top)?;
        self.draw_curves(root, plot_top)?;
        self.draw_names_of_limits(root, plot_top)
    }

    /// Where a point lies on the sheet.
    pub(super) fn at(&self, (x, y): (f64, f64), plot_top: i32) -> (i32, i32) {
        let across = self.x.place(x, (self.left, WIDTH - RIGHT));
        (across, self.y.place(y, (plot_top + PLOT, plot_top)))
    }

    /// Every other band is shaded, so that neighbors differ.
    fn draw_bands(&self, root: &Area<'_>, plot_top: i32) -> Result<(), DrawingError> {
        let (low, high) = self.y.ends();
        for band in self.panel.bands.iter().step_by(2) {
            let corners = [self.at((band.from, high), plot_top), self.at((band.to, low), plot_top)];
            root.draw(&Rectangle::new(corners, Ink::Band.color().filled()))?;
        }
        Ok(())
    }

    fn draw_axes(&self, root: &Area<'_>, plot_top: i32) -> Result<(), DrawingError> {
        let width = u32::try_from(WIDTH - RIGHT).unwrap_or(0);
        let below = u32::try_from(BELOW).unwrap_or(0);
        let height = u32::try_from(PLOT).unwrap_or(0) + below;
        let area = root.clone().shrink((0, plot_top), (width, height));
        let left = u32::try_from(self.left).unwrap_or(0);
        let mut chart = ChartBuilder::on(&area)
            .y_label_area_size(left)
            .x_label_area_size(below)
            .build_cartesian_2d(self.x.clone(), self.y.clone())?;
        let numbers = text_style(LETTERS, Ink::Soft, false, (HPos::Center, VPos::Center));
        chart
            .configure_mesh()
            .disable_x_mesh()
            .disable_y_axis()
            .bold_line_style(line_style(Ink::Grid, 8))
            .light_line_style(plotters::style::TRANSPARENT)
            .axis_style(line_style(Ink::Soft, 12))
            .set_all_tick_mark_size(TICK)
            .label_style(numbers)
            .draw()?;
        self.draw_words_of_axes(root, plot_top)
    }

    fn draw_words_of_axes(&self, root: &Area<'_>, plot_top: i32) -> Result<(), DrawingError> {
        let words = || text_style(LETTERS, Ink::Soft, false, (HPos::Right, VPos::Center));
        for (value, label) in self.y.labels() {
            let height = self.at((0.0, value), plot_top).1;
            root.draw(&Text::new(label, (self.left - 2 * TICK, height), words()))?;
        }
        if self.is_last {
            let at = (WIDTH - RIGHT, plot_top + PLOT + BELOW + LINE / 2);
            root.draw(&Text::new(self.panel.x_label.clone(), at, words()))?;
        }
        Ok(())
    }

    fn draw_captions(&self, root: &Area<'_>, plot_top: i32) -> Result<(), DrawingError> {
        for caption in &self.captions {
            let middle = plot_top - 30 - caption.row * LINE - LINE / 2;
            let line = vec![(caption.at, middle - LINE / 3), (caption.at, plot_top + PLOT)];
            root.draw(&PathElement::new(line, line_style(Ink::Soft, 7)))?;
        }
        // After all lines: a name that had to give way lies on top of them.
        for caption in &self.captions {
            let middle = plot_top - 30 - caption.row * LINE - LINE / 2;
            let style = text_style(LETTERS, Ink::Soft, false, (HPos::Left, VPos::Center));
            root.draw(&Text::new(caption.label.clone(), (caption.left, middle), style))?;
        }
        Ok(())
    }

    fn draw_beyond(&self, root: &Area<'_>, top: i32) -> Result<(), DrawingError> {
        let mut middle = top + LINE / 2;
        for text in &self.beyond {
            let style = text_style(LETTERS, Ink::Limit, false, (HPos::Left, VPos::Center));
            root.draw(&Text::new(text.clone(), (MARGIN, middle), style))?;
            middle += LINE;
        }
        Ok(())
    }

    fn draw_curves(&self, root: &Area<'_>, plot_top: i32) -> Result<(), DrawingError> {
        for series in &self.panel.series {
            let finite =
                series.points.iter().filter(|point| point.0.is_finite() && point.1.is_finite());
            let points: Vec<_> = finite.map(|point| self.at(*point, plot_top)).collect();
            root.draw(&PathElement::new(points, series.style.line()))?;
        }
        for series in &self.panel.series {
            if let Some(point) = series.marked.filter(|_| series.style.weight == Weight::Heavy) {
                series.style.mark(root, self.at(point, plot_top))?;
            }
        }
        Ok(())
    }
}

fn draw_message(root: &Area<'_>, top: i32, lines: &[String]) -> Result<(), DrawingError> {
    let mut middle = top + LINE / 2;
    for line in lines {
        let style = text_style(LETTERS, Ink::Limit, true, (HPos::Left, VPos::Center));
        root.draw(&Text::new(line.as_str(), (MARGIN, middle), style))?;
        middle += LINE;
    }
    Ok(())
}

/// The lowest and the highest value of the curves.
fn extent(panel: &Panel) -> (f64, f64) {
    let values = panel.series.iter().flat_map(|series| &series.points).map(|point| point.1);
    let values = values.filter(|value| value.is_finite());
    let (low, high) = values.fold((f64::INFINITY, f64::NEG_INFINITY), |(low, high), value| {
        (low.min(value), high.max(value))
    });
    let (low, high) = if low <= high { (low, high) } else { (0.0, 1.0) };
    (if panel.from_zero { low.min(0.0) } else { low }, high)
}
