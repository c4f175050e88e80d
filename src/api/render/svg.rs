//! A chart as an SVG document: what the drawing library writes, inside a root that scales, adapts and speaks.

use std::fmt::Write as _;

use plotters::backend::SVGBackend;
use plotters::drawing::IntoDrawingArea;

use super::chart::Chart;
use super::draw::{self, Sheet, WIDTH};
use super::ink::style_sheet;
use super::words::plain;

/// Why a chart could not be drawn.
pub(super) type DrawingError = Box<dyn std::error::Error + Send + Sync>;

/// The document.
///
/// # Errors
/// A defect of the drawing library; into a string it cannot fail.
pub(super) fn document(chart: &Chart) -> Result<String, DrawingError> {
    let sheet = Sheet::new(chart);
    let height = sheet.height();
    let size = (WIDTH.unsigned_abs(), height.unsigned_abs());
    let mut drawn = String::new();
    {
        let root = SVGBackend::with_string(&mut drawn, size).into_drawing_area();
        draw::draw(&sheet, &root)?;
        root.present()?;
    }
    // The library's own root element has a fixed size; only what is inside it is taken.
    let inside = drawn.split_once('>').map_or("", |(_, inside)| inside);
    let mut text = String::with_capacity(drawn.len() + 4096);
    write!(
        text,
        "<svg xmlns=\"http://www.w3.org/2000/svg\" viewBox=\"0 0 {WIDTH} {height}\" class=\"bw-chart\" \
         role=\"img\" aria-labelledby=\"{title_id} {description_id}\" lang=\"en\">\n\
         <title id=\"{title_id}\">{title}</title>\n<desc id=\"{description_id}\">{description}</desc>\n\
         <style>\n{style}</style>{inside}",
        title_id = format_args!("bw-title-{}", chart.id),
        description_id = format_args!("bw-desc-{}", chart.id),
        title = escaped(&chart.title),
        description = escaped(&chart.description),
        style = style_sheet(),
    )?;
    Ok(text)
}

fn escaped(text: &str) -> String {
    plain(text).replace('&', "&amp;").replace('<', "&lt;").replace('>', "&gt;")
}
