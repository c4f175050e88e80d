//! Sends one request file to a running service and prints a short table of the results.
//!
//! ```sh
//! cargo run --example client -- FILE [BASE_URL]
//! ```
//!
//! A file is one of `examples/requests`, or a request alone with its endpoint's name as folder.
#![expect(clippy::print_stdout, reason = "printing is what this program is for")]

use std::error::Error;
use std::fs;
use std::path::Path;

use reqwest::{Client, StatusCode};
use serde_json::Value;

#[tokio::main(flavor = "current_thread")]
async fn main() -> Result<(), Box<dyn Error>> {
    let mut arguments = std::env::args().skip(1);
    let file = arguments.next().ok_or("usage: client FILE [BASE_URL]")?;
    let base = arguments.next().unwrap_or_else(|| "http://127.0.0.1:8080".to_owned());
    let (endpoint, request) = read(Path::new(&file))?;

    let address = format!("{base}/v1/{endpoint}");
    let response = Client::new().post(&address).json(&request).send().await?;
    let status = response.status();
    let answer: Value = response.json().await?;
    print(status, &answer);
    if status.is_success() { Ok(()) } else { Err("the service gave no results".into()) }
}

/// The endpoint is the name of the file's folder.
fn read(file: &Path) -> Result<(String, Value), Box<dyn Error>> {
    let content: Value = serde_json::from_str(&fs::read_to_string(file)?)?;
    let folder = file.canonicalize()?.parent().and_then(Path::file_name).map(ToOwned::to_owned);
    let endpoint = folder.ok_or("the file lies in no folder")?.to_string_lossy().into_owned();
    Ok((endpoint, content.get("request").unwrap_or(&content).clone()))
}

fn print(status: StatusCode, answer: &Value) {
    if status != StatusCode::OK {
        println!("{status}: {}", text(&answer["detail"]));
        for fault in list(&answer["errors"]) {
            println!("  {}  {}", text(&fault["pointer"]), text(&fault["detail"]));
        }
        return;
    }
    table(&answer["results"]);
    for warning in list(&answer["warnings"]) {
        println!("{}: {}", text(&warning["severity"]), text(&warning["detail"]));
    }
    for caution in list(&answer["cautions"]) {
        println!("caution: {}", text(&caution["text"]));
    }
}

/// One row a member, one column a friction case. Lists inside a case are left to the answer itself.
fn table(results: &Value) {
    for (name, member) in results.as_object().into_iter().flatten() {
        if let Some((number, unit)) = cell(member) {
            println!("{name:<36} {number:>14} {unit}");
        }
    }
    let cases: Vec<&Value> = list(&results["friction_cases"]).collect();
    for name in
        cases.first().and_then(|case| case.as_object()).into_iter().flat_map(|case| case.keys())
    {
        let cells: Vec<(String, String)> =
            cases.iter().map(|case| cell(&case[name]).unwrap_or_default()).collect();
        if cells.iter().any(|(number, _)| !number.is_empty()) {
            let numbers: Vec<String> =
                cells.iter().map(|(number, _)| format!("{number:>14}")).collect();
            let unit = cells.iter().map(|(_, unit)| unit.as_str()).find(|unit| !unit.is_empty());
            println!("{name:<36} {} {}", numbers.join(" "), unit.unwrap_or_default());
        }
    }
}

/// A quantity, number or word with its unit; nothing for what does not fit into a cell.
fn cell(part: &Value) -> Option<(String, String)> {
    let number = |value: f64| format!("{value:.4}");
    match part {
        Value::Object(_) => Some((number(part["value"].as_f64()?), text(&part["unit"]))),
        Value::Number(value) => Some((number(value.as_f64()?), String::new())),
        Value::Bool(_) | Value::String(_) => Some((text(part), String::new())),
        Value::Array(_) | Value::Null => None,
    }
}

fn list(part: &Value) -> impl Iterator<Item = &Value> {
    part.as_array().into_iter().flatten()
}

fn text(part: &Value) -> String {
    part.as_str().map_or_else(|| part.to_string(), str::to_owned)
}
