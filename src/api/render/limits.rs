//! The limits of a panel: lines across it, and names where the fewest curves pass.

use plotters::element::{PathElement, Text};
use plotters::style::text_anchor::{HPos, VPos};

use super::chart::Limit;
use super::draw::{Area, LETTERS, LINE, WIDTH, line_style, text_style};
use super::ink::Ink;
use super::panel::{PanelLayout, RIGHT};
use super::svg::DrawingError;
use super::words;

impl PanelLayout<'_> {
    /// The limits within the panel, highest first.
    fn limits(&self) -> Vec<&Limit> {
        let (low, high) = self.y.ends();
        let mut limits: Vec<_> = self.panel.limits.iter().collect();
        limits.retain(|limit| (low..=high).contains(&limit.value));
        limits.sort_by(|one, other| other.value.total_cmp(&one.value));
        limits
    }

    /// Draws their lines.
    pub(super) fn draw_limits(&self, root: &Area<'_>, plot_top: i32) -> Result<(), DrawingError> {
        for limit in self.limits() {
            let (left, height) = self.at((0.0, limit.value), plot_top);
            let ends = vec![(left, height), (WIDTH - RIGHT, height)];
            root.draw(&PathElement::new(ends, line_style(Ink::Limit, 14)))?;
        }
        Ok(())
    }

    /// Writes their names. To be called after the curves are drawn: words lie on top of them.
    pub(super) fn draw_names_of_limits(
        &self,
        root: &Area<'_>,
        plot_top: i32,
    ) -> Result<(), DrawingError> {
        // The lowest place that a name took; the next one goes below it.
        let mut taken = plot_top - 2 * LINE;
        for limit in self.limits() {
            let height = self.at((0.0, limit.value), plot_top).1;
            let side = if height - LINE >= plot_top { -1 } else { 1 };
            let middle = (height + side * LINE / 2).max(taken + LINE);
            taken = middle;
            let text = format!("{} {}", words::plain(&limit.label), words::number(limit.value));
            let width = words::width(&text, LETTERS);
            let (left, right) = (self.left + LINE / 4, WIDTH - RIGHT - LINE / 4);
            let is_crowded = |from| self.points_in((from, from + width), middle, plot_top);
            let (at, anchor) = if is_crowded(right - width) > is_crowded(left) {
                (left, HPos::Left)
            } else {
                (right, HPos::Right)
            };
            let style = text_style(LETTERS, Ink::Limit, false, (anchor, VPos::Center));
            root.draw(&Text::new(text, (at, middle), style))?;
        }
        Ok(())
    }

    /// How many points of curves lie where a line of text would.
    fn points_in(&self, (from, to): (i32, i32), middle: i32, plot_top: i32) -> usize {
        let points = self.panel.series.iter().flat_map(|series| &series.points);
        let places = points.map(|point| self.at(*point, plot_top));
        places.filter(|(x, y)| (from..=to).contains(x) && (y - middle).abs() < LINE * 2 / 3).count()
    }
}
