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
    rows("", &answer["results"]);
    for warning in list(&answer["warnings"]) {
        println!("{}: {}", text(&warning["severity"]), text(&warning["detail"]));
    }
    for caution in list(&answer["cautions"]) {
        println!("caution: {}", text(&caution["text"]));
    }
}

/// One row a number; members of members and of lists are named by their path.
fn rows(path: &str, part: &Value) {
    if let (Some(value), Some(unit)) = (part["value"].as_f64(), part["unit"].as_str()) {
        println!("{path:<55} {value:>14.4} {unit}");
        return;
    }
    let below =
        |name: &str| if path.is_empty() { name.to_owned() } else { format!("{path}.{name}") };
    match part {
        Value::Object(members) => {
            members.iter().for_each(|(name, member)| rows(&below(name), member));
        }
        Value::Array(items) if items.iter().any(Value::is_object) => {
            for (index, item) in items.iter().enumerate() {
                let case = item["friction_case"].as_str().map(str::to_owned);
                rows(&below(&case.unwrap_or_else(|| index.to_string())), item);
            }
        }
        Value::Array(items) => println!("{path:<55} {:>14} points", items.len()),
        Value::Number(number) => {
            println!("{path:<55} {:>14.4}", number.as_f64().unwrap_or(f64::NAN));
        }
        Value::Null | Value::Bool(_) | Value::String(_) => {
            println!("{path:<55} {:>14}", text(part));
        }
    }
}

fn list(part: &Value) -> impl Iterator<Item = &Value> {
    part.as_array().into_iter().flatten()
}

fn text(part: &Value) -> String {
    part.as_str().map_or_else(|| part.to_string(), str::to_owned)
}
