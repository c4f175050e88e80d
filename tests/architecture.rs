//! Who may import whom, and other rules that no compiler checks. They match text: a fence, not a wall.

use std::ffi::OsStr;
use std::fs;
use std::path::{Component, Path, PathBuf};

/// A line of code with its place, as a fault is reported.
#[derive(Clone)]
struct Line {
    file: PathBuf,
    number: usize,
    text: String,
}

/// Every Rust file below a folder or the file itself, in a fixed order.
fn files(place: &str) -> Vec<PathBuf> {
    fn collect(path: &Path, found: &mut Vec<PathBuf>) {
        if path.is_dir() {
            let mut entries: Vec<PathBuf> =
                fs::read_dir(path).unwrap().map(|entry| entry.unwrap().path()).collect();
            entries.sort();
            for entry in &entries {
                collect(entry, found);
            }
        } else if path.extension().is_some_and(|extension| extension == "rs") {
            found.push(path.to_owned());
        }
    }
    let mut found = Vec::new();
    collect(&Path::new(env!("CARGO_MANIFEST_DIR")).join(place), &mut found);
    assert!(!found.is_empty(), "nothing below {place}");
    found
}

/// Demands that nothing was found, or says what and where.
#[track_caller]
fn assert_none(found: &[&Line]) {
    let places: Vec<String> = found
        .iter()
        .map(|line| format!("{}:{}: {}", line.file.display(), line.number, line.text))
        .collect();
    assert!(places.is_empty(), "{}", places.join("\n"));
}

/// The lines of a text without comments; what stands in strings stays.
fn code_of(file: &Path, text: &str) -> Vec<Line> {
    let code = |(index, line): (usize, &str)| {
        let text = line.split("//").next().unwrap_or_default().trim().to_owned();
        Line { file: file.to_owned(), number: index + 1, text }
    };
    text.lines().enumerate().map(code).filter(|line| !line.text.is_empty()).collect()
}

fn code(place: &str) -> Vec<Line> {
    let lines = |file: PathBuf| code_of(&file, &fs::read_to_string(&file).unwrap());
    files(place).into_iter().flat_map(lines).collect()
}

/// Whether a path such as `axum` or `crate::api` is named in a line, not merely as a part of another word.
fn names(line: &str, path: &str) -> bool {
    let is_word = |character: char| character.is_alphanumeric() || character == '_';
    line.match_indices(path).any(|(start, _)| {
        let before = line[..start].chars().next_back();
        let after = line[start + path.len()..].chars().next();
        !before.is_some_and(|character| is_word(character) || character == ':')
            && !after.is_some_and(is_word)
    })
}

/// The lines that name one of some paths.
fn strays<'a>(lines: &'a [Line], forbidden: &[&str]) -> Vec<&'a Line> {
    let is_stray = |line: &&Line| forbidden.iter().any(|path| names(&line.text, path));
    lines.iter().filter(is_stray).collect()
}

const SERVICE: &[&str] = &[
    "crate::api",
    "crate::settings",
    "crate::server",
    "crate::probe",
    "axum",
    "http",
    "tower",
    "utoipa",
    "tokio",
    "tracing",
    "jsonschema",
];

/// What makes a calculation depend on more than its input.
const WORLD: &[&str] = &[
    "std::env",
    "std::fs",
    "std::time",
    "std::net",
    "std::process",
    "std::thread",
    "std::io",
    "Instant::now",
    "rand",
];

#[test]
fn the_calculations_know_nothing_of_the_service_and_the_world() {
    let lines = code("src/calc");
    for forbidden in [SERVICE, WORLD, &["serde", "serde_json", "toml"]] {
        let found = strays(&lines, forbidden);
        assert_none(&found);
    }
}

#[test]
fn only_cases_read_the_published_tables() {
    let lines: Vec<Line> = code("src/calc")
        .into_iter()
        .filter(|line| !line.file.components().any(|part| part.as_os_str() == "case"))
        .collect();
    assert_none(&strays(&lines, &["crate::data"]));
}

#[test]
fn the_data_know_nothing_of_the_service_and_the_world() {
    let lines = code("src/data");
    for forbidden in [SERVICE, WORLD] {
        let found = strays(&lines, forbidden);
        assert_none(&found);
    }
}

#[test]
fn calculations_of_one_layer_do_not_name_those_above() {
    // case → {machine, motion, heat, pad, actuation, finding} → {quantity, method}; only `brake` and `fitted`
    // stand between.
    for place in ["pad", "machine", "motion", "actuation", "finding", "quantity", "disc"] {
        let found = code(&format!("src/calc/{place}"));
        let found = strays(&found, &["crate::calc::case", "crate::calc::fitted", "super::case"]);
        assert_none(&found);
    }
    let lines = code("src/calc/quantity");
    let above = ["pad", "machine", "motion", "heat", "actuation", "finding", "brake", "lining"];
    let above = above.map(|module| format!("crate::calc::{module}"));
    let found = strays(&lines, &above.each_ref().map(String::as_str));
    assert_none(&found);
}

#[test]
fn only_the_settings_read_the_environment() {
    let lines: Vec<Line> =
        code("src").into_iter().filter(|line| !line.file.ends_with("settings.rs")).collect();
    let found =
        strays(&lines, &["std::env", "env::var", "env::vars", "env::var_os", "env::vars_os"]);
    assert_none(&found);
}

/// Functions of the standard library whose last bits depend on the machine.
const TRANSCENDENTAL: &[&str] = &[
    "sin", "cos", "tan", "asin", "acos", "atan", "atan2", "sin_cos", "sinh", "cosh", "tanh",
    "asinh", "acosh", "atanh", "exp", "exp2", "exp_m1", "ln", "ln_1p", "log", "log2", "log10",
    "powf", "powi", "cbrt", "hypot", "mul_add",
];

/// The lines that call one of them, as a method or by its path.
fn transcendental(lines: &[Line]) -> Vec<&Line> {
    let calls = |line: &&Line| {
        TRANSCENDENTAL.iter().any(|name| {
            line.text.contains(&format!(".{name}("))
                || ["f64::", "f32::"].iter().any(|kind| names(&line.text, &format!("{kind}{name}")))
        })
    };
    lines.iter().filter(calls).collect()
}

#[test]
fn transcendental_functions_come_from_libm_only() {
    let lines = code("src");
    let found = transcendental(&lines);
    assert_none(&found);
}

/// The declaration that compiles a test file, and the file it must stand in.
fn declaration(file: &Path) -> (PathBuf, String) {
    let (folder, stem) = (file.parent().unwrap(), file.file_stem().unwrap().to_str().unwrap());
    if stem == "mod" {
        let name = folder.file_name().unwrap().to_str().unwrap();
        return (parent_module(folder.parent().unwrap()), name.to_owned());
    }
    (parent_module(folder), stem.to_owned())
}

fn parent_module(folder: &Path) -> PathBuf {
    let own = folder.join("mod.rs");
    if own.exists() { own } else { folder.join("main.rs") }
}

fn is_declared(parent: &[Line], name: &str) -> bool {
    parent.iter().any(|line| {
        let text = line.text.strip_prefix("pub(crate) ").unwrap_or(&line.text);
        text == format!("mod {name};")
    })
}

#[test]
fn every_test_file_is_compiled() {
    for file in files("tests") {
        // The benchmarks and the fuzzer are programs of their own.
        let is_apart =
            |part: Component<'_>| ["bench", "fuzz"].map(OsStr::new).contains(&part.as_os_str());
        if file.ends_with("main.rs") || file.components().any(is_apart) {
            continue;
        }
        let (parent, name) = declaration(&file);
        let lines = code_of(&parent, &fs::read_to_string(&parent).unwrap());
        assert!(is_declared(&lines, &name), "{} lacks `mod {name};`", parent.display());
    }
}

/// The names of the method sheets that a file declares.
fn sheets(text: &str) -> Vec<&str> {
    let mut inside = false;
    let mut found = Vec::new();
    for line in text.lines() {
        inside |= line.ends_with("method_sheet! {");
        inside &= line != "}";
        if let Some(name) = line.strip_prefix("    ").and_then(|line| line.strip_suffix(" {"))
            && inside
            && name.chars().all(|character| {
                character.is_ascii_uppercase() || "_0123456789".contains(character)
            })
        {
            found.push(name);
        }
    }
    found
}

/// Whether a sheet is linked from a comment of its folder, or noted where the answer's methods are collected.
fn is_referred_to(sheet: &str, text: &str) -> bool {
    text.lines().any(|line| {
        let is_comment = line.trim_start().starts_with("//");
        let links = line.contains(&format!("{sheet}`]"));
        let notes = line.contains('&') && line.contains(sheet);
        (is_comment && links) || (!is_comment && notes)
    })
}

#[test]
fn every_method_sheet_is_linked_or_noted() {
    let all: Vec<(PathBuf, String)> = files("src/calc")
        .into_iter()
        .map(|file| (file.clone(), fs::read_to_string(file).unwrap()))
        .collect();
    let mut count = 0;
    for (file, text) in &all {
        for sheet in sheets(text) {
            count += 1;
            let found = all.iter().any(|(_, text)| is_referred_to(sheet, text));
            assert!(found, "{}: nothing refers to {sheet}", file.display());
        }
    }
    assert!(count > 20, "only {count} sheets found: the search is broken");
}

#[test]
fn every_method_of_an_answer_has_one_identifier() {
    let lines = code("src/calc");
    let mut ids: Vec<&str> =
        lines.iter().filter_map(|line| line.text.strip_prefix("id: \"")).collect();
    let count = ids.len();
    ids.sort_unstable();
    ids.dedup();
    assert_eq!(ids.len(), count, "an identifier is used twice");
}

/// These checks can fail: each is fed with what it must catch, and with what it must let pass.
#[test]
fn stray_lines_are_caught() {
    let line = |text: &str| code_of(Path::new("stray.rs"), text);
    for stray in [
        "use serde::Serialize;",
        "let now = std::time::Instant::now();",
        "use axum::{Router, routing};",
        "fn f(_: &crate::api::measure::Length) {}",
        "#[derive(utoipa::ToSchema)]",
        "    tokio::spawn(task);",
    ] {
        let lines = line(stray);
        let found =
            [SERVICE, WORLD, &["serde"]].iter().any(|list| !strays(&lines, list).is_empty());
        assert!(found, "not caught: {stray}");
    }
    for fine in [
        "// use serde::Serialize;",
        "use crate::calc::pad::Pad;",
        "let http_like = 1;",
        "observe(x);",
    ] {
        let lines = line(fine);
        assert!(
            [SERVICE, WORLD].iter().all(|list| strays(&lines, list).is_empty()),
            "caught: {fine}"
        );
    }
    for stray in ["let y = x.sin();", "a.powi(2) + b", "values.map(f64::exp)", "f64::hypot(a, b)"] {
        assert_eq!(transcendental(&line(stray)).len(), 1, "not caught: {stray}");
    }
    for fine in ["libm::sin(x)", "x.sqrt()", "x.to_radians()", "self.cosine(x)", "// x.sin()"] {
        assert!(transcendental(&line(fine)).is_empty(), "caught: {fine}");
    }
    assert!(is_declared(&line("pub(crate) mod common;"), "common"));
    assert!(!is_declared(&line("// mod orphan;\nmod other;"), "orphan"));
    let text = "crate::method_sheet! {\n    LOST {\n        id: \"lost\",\n    }\n}\n";
    assert_eq!(sheets(text), ["LOST"]);
    assert!(!is_referred_to("LOST", text));
    assert!(
        is_referred_to("LOST", "/// See [`LOST`].")
            && is_referred_to("LOST", "remarks.method(&LOST);")
    );
}
