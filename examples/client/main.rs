//! Sends one request file to a running service and prints a short table of the results.
//!
//! ```sh
//! cargo run --example client -- FILE [BASE_URL]
//! ```
//!
//! A file is one of `examples/requests`, or a request alone with its endpoint's name as folder.

use std::error::Error;
use std::fmt::Write as _;
use std::io::Write as _;
use std::path::Path;
use std::{fs, io};

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
    io::stdout().write_all(page(status, &answer)?.as_bytes())?;
    if status.is_success() { Ok(()) } else { Err("the service gave no results".into()) }
}

/// The endpoint is the name of the file's folder.
fn read(file: &Path) -> Result<(String, Value), Box<dyn Error>> {
    let content: Value = serde_json::from_str(&fs::read_to_string(file)?)?;
    let folder = file.canonicalize()?.parent().and_then(Path::file_name).map(ToOwned::to_owned);
    let endpoint = folder.ok_or("the file lies in no folder")?.to_string_lossy().into_owned();
    Ok((endpoint, content.get("request").unwrap_or(&content).clone()))
}

fn page(status: StatusCode, answer: &Value) -> Result<String, std::fmt::Error> {
    let mut page = String::new();
    if status != StatusCode::OK {
        writeln!(page, "{status}: {}", text(&answer["detail"]))?;
        for fault in list(&answer["errors"]) {
            writeln!(page, "  {}  {}", text(&fault["pointer"]), text(&fault["detail"]))?;
        }
        return Ok(page);
    }
    table(&answer["results"], &mut page)?;
    for warning in list(&answer["warnings"]) {
        writeln!(page, "{}: {}", text(&warning["severity"]), text(&warning["detail"]))?;
    }
    for caution in list(&answer["cautions"]) {
        writeln!(page, "caution: {}", text(&caution["text"]))?;
    }
    Ok(page)
}

/// One row a member, one column a friction case. Lists inside a case are left to the answer itself.
fn table(results: &Value, page: &mut String) -> std::fmt::Result {
    for (name, member) in results.as_object().into_iter().flatten() {
        row(name, &[member], page)?;
    }
    let cases: Vec<&Value> = list(&results["friction_cases"]).collect();
    let mut names: Vec<&String> = Vec::new();
    for name in cases.iter().filter_map(|case| case.as_object()).flat_map(|case| case.keys()) {
        if !names.contains(&name) {
            names.push(name);
        }
    }
    for name in names {
        let members: Vec<&Value> = cases.iter().map(|case| &case[name.as_str()]).collect();
        row(name, &members, page)?;
    }
    Ok(())
}

fn row(name: &str, members: &[&Value], page: &mut String) -> std::fmt::Result {
    let cells: Vec<_> = members.iter().map(|member| cell(member)).collect();
    let Some((_, unit)) = cells.iter().flatten().next() else { return Ok(()) };
    write!(page, "{name:<36}")?;
    for cell in &cells {
        write!(page, " {:>19}", cell.as_ref().map_or("", |(number, _)| number))?;
    }
    writeln!(page, " {unit}")
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
