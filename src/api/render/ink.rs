//! The colors of charts, one for light and one for dark surroundings, and the style sheet made of them.
//!
//! The drawing library writes the light color into every element. The style sheet finds it there and puts a
//! variable in its place, so a chart is right without style sheets, too, and a page can set colors of its own.

use std::fmt::Write as _;
use std::sync::LazyLock;

use plotters::style::RGBColor;

use super::chart::Tone;

/// A color of a chart, by what it is for.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(super) enum Ink {
    Paper,
    Text,
    Soft,
    Grid,
    Band,
    Low,
    Nominal,
    High,
    Limit,
}

/// Name of the variable, light and dark color. No two light colors may be equal.
type Row = (Ink, &'static str, [u8; 3], [u8; 3]);

#[rustfmt::skip]
const INKS: [Row; 9] = [
    (Ink::Paper, "paper", [0xFD, 0xFD, 0xFB], [0x17, 0x1B, 0x1E]),
    (Ink::Text, "text", [0x1C, 0x22, 0x26], [0xE9, 0xEC, 0xEC]),
    (Ink::Soft, "soft", [0x55, 0x5F, 0x66], [0xA9, 0xB3, 0xB8]),
    (Ink::Grid, "grid", [0xCF, 0xD5, 0xD8], [0x3A, 0x43, 0x48]),
    (Ink::Band, "band", [0xEF, 0xF1, 0xEE], [0x20, 0x26, 0x2A]),
    (Ink::Low, "low", [0xB0, 0x4A, 0x12], [0xF0, 0x95, 0x5C]),
    (Ink::Nominal, "nominal", [0x2B, 0x33, 0x3A], [0xDD, 0xE3, 0xE6]),
    (Ink::High, "high", [0x1B, 0x63, 0xA6], [0x74, 0xB4, 0xEE]),
    (Ink::Limit, "limit", [0x9B, 0x16, 0x3F], [0xF2, 0x86, 0xA4]),
];

impl Ink {
    /// The color in light surroundings.
    pub(super) fn color(self) -> RGBColor {
        let [red, green, blue] = INKS.iter().find(|row| row.0 == self).map_or([0; 3], |row| row.2);
        RGBColor(red, green, blue)
    }
}

impl From<Tone> for Ink {
    fn from(tone: Tone) -> Self {
        match tone {
            Tone::Low => Self::Low,
            Tone::Nominal => Self::Nominal,
            Tone::High => Self::High,
        }
    }
}

/// What the library cannot say. The rim of the letters keeps them legible where lines pass.
const RULES: &str = "\
.bw-chart text{font-family:system-ui,-apple-system,'Segoe UI',Roboto,'Noto Sans',sans-serif;\
font-variant-numeric:tabular-nums;paint-order:stroke;stroke:var(--bw-paper);stroke-width:36px;stroke-linejoin:round}
.bw-chart polyline{stroke-linejoin:round}
";

/// Dashes tell the cases apart where colors do not.
const DASHES: [(Ink, &str); 2] = [(Ink::Low, "190 90"), (Ink::High, "45 65")];

fn variables(color: fn(&Row) -> [u8; 3]) -> String {
    INKS.iter().fold(String::new(), |mut text, row| {
        // Writing to a string cannot fail.
        let _ = write!(text, "--bw-{}:{};", row.1, hexadecimal(color(row)));
        text
    })
}

fn hexadecimal([red, green, blue]: [u8; 3]) -> String {
    format!("#{red:02X}{green:02X}{blue:02X}")
}

static SHEET: LazyLock<String> = LazyLock::new(|| {
    let mut sheet = format!(":where(.bw-chart){{{}}}\n", variables(|row| row.2));
    let dark = variables(|row| row.3);
    let _ = writeln!(
        sheet,
        "@media screen and (prefers-color-scheme:dark){{:where(.bw-chart){{{dark}}}}}"
    );
    for (_, name, light, _) in INKS {
        let color = hexadecimal(light);
        for paint in ["fill", "stroke"] {
            let _ = writeln!(sheet, ".bw-chart [{paint}=\"{color}\"]{{{paint}:var(--bw-{name})}}");
        }
    }
    sheet += RULES;
    for (ink, dashes) in DASHES {
        let RGBColor(red, green, blue) = ink.color();
        let color = hexadecimal([red, green, blue]);
        let _ =
            writeln!(sheet, ".bw-chart polyline[stroke=\"{color}\"]{{stroke-dasharray:{dashes}}}");
    }
    sheet
});

/// The style sheet of every chart.
pub(super) fn style_sheet() -> &'static str {
    &SHEET
}
