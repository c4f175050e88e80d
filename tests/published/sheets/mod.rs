//! Every data sheet's worked value recomputed through the public functions that the sheet documents.
//!
//! The numbers of the sheets come from the sources that they name or were worked by hand; here the code has to
//! reproduce them to their last printed digit.

use std::collections::BTreeSet;
use std::path::Path;

use brakewright::calc::method::Method;

mod duty;
mod heat;
mod machines;
mod pads;
mod pressing;

/// A sheet with the numbers of its worked value, as printed there, and what the code finds.
struct Worked {
    sheet: &'static Method,
    printed: Vec<(&'static str, f64)>,
}

fn worked(sheet: &'static Method, printed: &[(&'static str, f64)]) -> Worked {
    Worked { sheet, printed: printed.to_vec() }
}

fn all() -> Vec<Worked> {
    let duty = Worked { sheet: duty::SHEET, printed: Vec::new() };
    [pads::all(), pressing::all(), machines::all(), heat::all(), vec![duty]]
        .into_iter()
        .flatten()
        .collect()
}

/// The number of a printed token and half a unit of its last digit.
fn read(token: &str) -> (f64, f64) {
    let plain: String = token.chars().filter(|letter| *letter != ' ').collect();
    let (mantissa, exponent) = plain.split_once('e').unwrap_or((&plain, "0"));
    let decimals = mantissa.split_once('.').map_or(0, |(_, decimals)| decimals.len());
    let last = exponent.parse::<i32>().unwrap() - i32::try_from(decimals).unwrap();
    (plain.parse().unwrap(), 0.5 * 10.0_f64.powi(last))
}

#[test]
fn every_sheet_prints_what_the_code_finds() {
    for Worked { sheet, printed } in all() {
        for (token, found) in printed {
            let text = sheet.worked;
            assert!(text.contains(token), "{}: {token} is not in \"{text}\"", sheet.id);
            let (expected, half) = read(token);
            let off = (found - expected).abs();
            // A tie may fall to either side.
            let holds = off <= half * (1.0 + 1e-6);
            assert!(holds, "{}: prints {token}, the code finds {found}", sheet.id);
        }
    }
}

/// Ids of the sheets declared anywhere below `folder`.
fn declared(folder: &Path, ids: &mut BTreeSet<String>) {
    for entry in std::fs::read_dir(folder).unwrap() {
        let path = entry.unwrap().path();
        if path.is_dir() {
            declared(&path, ids);
            continue;
        }
        let text = std::fs::read_to_string(&path).unwrap();
        // The text before the first call declares nothing; the macro's own definition has no `{` after its name.
        for block in text.split("method_sheet! {").skip(1) {
            let marked =
                block.lines().map(str::trim).filter_map(|line| line.strip_prefix("id: \""));
            ids.extend(marked.map(|line| line.split('"').next().unwrap().to_owned()));
        }
    }
}

#[test]
fn no_sheet_is_without_a_check() {
    let mut ids = BTreeSet::new();
    declared(&Path::new(env!("CARGO_MANIFEST_DIR")).join("src/calc"), &mut ids);
    assert!(ids.len() >= 30, "{ids:?}");
    let checked: BTreeSet<String> = all().iter().map(|check| check.sheet.id.to_owned()).collect();
    assert_eq!(ids, checked);
    // Only a sheet that claims an agreement instead of a number has no number here; it has its own test.
    for check in all() {
        assert_eq!(
            check.printed.is_empty(),
            check.sheet.id == duty::SHEET.id,
            "{}",
            check.sheet.id
        );
    }
}
