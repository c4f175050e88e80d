//! The list of methods against the sources.

use std::collections::BTreeSet;
use std::fs;
use std::path::{Path, PathBuf};

use brakewright::calc::method_index;

fn sources(folder: &Path, found: &mut Vec<PathBuf>) {
    for entry in fs::read_dir(folder).unwrap() {
        let path = entry.unwrap().path();
        if path.is_dir() {
            sources(&path, found);
        } else if path.extension().is_some_and(|ending| ending == "rs") {
            found.push(path);
        }
    }
}

/// Every source file but the one that defines the data sheet.
fn texts() -> Vec<(PathBuf, String)> {
    let mut found = Vec::new();
    sources(&Path::new(env!("CARGO_MANIFEST_DIR")).join("src"), &mut found);
    assert!(found.len() > 100, "{} files", found.len());
    found.retain(|path| !path.ends_with("calc/method.rs"));
    found.into_iter().map(|path| (path.clone(), fs::read_to_string(path).unwrap())).collect()
}

/// The ids of the data sheets that a file declares.
fn declared(text: &str) -> Vec<String> {
    let mut ids = Vec::new();
    for block in text.split("method_sheet! {").skip(1) {
        let block = block.split("\n}\n").next().unwrap();
        let of_line =
            |line: &str| Some(line.trim().strip_prefix("id: \"")?.strip_suffix("\",")?.to_owned());
        let found: Vec<String> = block.lines().filter_map(of_line).collect();
        let sheets = block.lines().filter(|line| line.trim().starts_with("equation: ")).count();
        assert!(!found.is_empty() && found.len() == sheets, "an id cannot be read in {block}");
        ids.extend(found);
    }
    ids
}

#[test]
fn every_data_sheet_of_the_sources_is_listed_once() {
    let mut of_sources: Vec<String> = texts().iter().flat_map(|(_, text)| declared(text)).collect();
    let mut listed: Vec<&str> = method_index::all().map(|method| method.id).collect();
    of_sources.sort();
    listed.sort_unstable();
    assert_eq!(listed, of_sources);
    assert_eq!(listed.iter().collect::<BTreeSet<_>>().len(), listed.len());
    assert!(listed.len() > 30);
}

/// Answers name methods by their sheets, so an id that is not listed could come only from a sheet made by hand.
#[test]
fn no_data_sheet_is_made_without_being_declared() {
    for (path, text) in texts() {
        let by_hand = text.lines().any(|line| {
            line.contains("Method {")
                && !line.contains("-> &'static Method {")
                && !line.contains("-> Option<&'static Method> {")
        });
        let is_ours = path.components().any(|part| part.as_os_str() == "calc");
        assert!(!(by_hand && is_ours), "{}", path.display());
    }
}

#[test]
fn every_data_sheet_is_filled_in() {
    for method in method_index::all() {
        let words = [
            method.name,
            method.equation,
            method.valid,
            method.accuracy,
            method.source,
            method.worked,
        ];
        assert!(words.iter().all(|text| text.len() > 3), "{}", method.id);
        assert!(!method.symbols.is_empty(), "{}", method.id);
        for symbol in method.symbols {
            let parts = [symbol.symbol, symbol.meaning, symbol.unit];
            assert!(parts.iter().all(|text| !text.is_empty()), "{}", method.id);
        }
        let plain =
            |byte: u8| byte.is_ascii_lowercase() || byte.is_ascii_digit() || b"._".contains(&byte);
        assert!(method.id.bytes().all(plain), "{}", method.id);
    }
}
