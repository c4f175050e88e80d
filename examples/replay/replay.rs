//! What the program does, apart from its command line: read cases, send them, compare, tell.

use std::error::Error;
use std::fmt::Write as _;
use std::fs;
use std::path::{Path, PathBuf};
use std::time::Duration;

use reqwest::Client;
use serde_json::Value;

/// Longest time that one answer may take.
const PATIENCE: Duration = Duration::from_mins(2);
/// Differences of a case that are told one by one.
const MOST_TOLD: usize = 10;

/// A request with the answer that is expected.
#[derive(Debug, Clone)]
pub(crate) struct Case {
    /// Folder and file without its ending: `stopping/cargo_cycle`.
    pub(crate) name: String,
    /// The folder: `stopping`.
    pub(crate) endpoint: String,
    /// Members `request`, `status` and `response`.
    pub(crate) content: Value,
}

/// A deployment to send cases to.
#[derive(Debug)]
pub(crate) struct Deployment {
    client: Client,
    /// Without a slash at its end.
    base: String,
    /// A key for the service, if it asks for one.
    key: Option<String>,
    /// Numbers may differ by this share of the larger one; 0: not at all.
    tolerance: f64,
}

/// What came of a case.
#[derive(Debug, Clone, PartialEq)]
pub(crate) enum Found {
    /// The expected answer.
    Same,
    /// The expected answer, by another version of the service.
    OtherVersion(String),
    /// Another answer: how it differs.
    Different(Vec<String>),
    /// No answer: why.
    Unanswered(String),
}

/// A case with the status and what came of it.
#[derive(Debug, Clone)]
pub(crate) struct Row {
    pub(crate) name: String,
    pub(crate) status: Option<u16>,
    pub(crate) found: Found,
}

/// The cases in a file, or in all folders below a folder, by name.
pub(crate) fn cases(place: &Path) -> Result<Vec<Case>, Box<dyn Error>> {
    let mut files = Vec::new();
    collect(place, &mut files)?;
    files.sort();
    if files.is_empty() {
        return Err(format!("no cases in {}", place.display()).into());
    }
    files.iter().map(|file| Case::read(file)).collect()
}

fn collect(place: &Path, files: &mut Vec<PathBuf>) -> Result<(), Box<dyn Error>> {
    if !place.is_dir() {
        files.push(place.canonicalize().map_err(|error| format!("{}: {error}", place.display()))?);
        return Ok(());
    }
    for entry in fs::read_dir(place)? {
        let path = entry?.path();
        if path.is_dir() || path.extension().is_some_and(|extension| extension == "json") {
            collect(&path, files)?;
        }
    }
    Ok(())
}

impl Case {
    fn read(file: &Path) -> Result<Self, Box<dyn Error>> {
        let told = |what: &dyn std::fmt::Display| format!("{}: {what}", file.display());
        let content = fs::read_to_string(file).map_err(|error| told(&error))?;
        let content: Value = serde_json::from_str(&content).map_err(|error| told(&error))?;
        for member in ["request", "status", "response"] {
            if content.get(member).is_none() {
                return Err(told(&format!("has no {member}")).into());
            }
        }
        let text =
            |part: Option<&std::ffi::OsStr>| part.map(|part| part.to_string_lossy().into_owned());
        let folder = text(file.parent().and_then(Path::file_name));
        let endpoint = folder.ok_or_else(|| told(&"lies in no folder"))?;
        let stem = text(file.file_stem()).unwrap_or_default();
        Ok(Self { name: format!("{endpoint}/{stem}"), endpoint, content })
    }
}

impl Deployment {
    /// A deployment at an address.
    pub(crate) fn new(
        base: &str,
        key: Option<String>,
        tolerance: f64,
    ) -> Result<Self, Box<dyn Error>> {
        let client = Client::builder().timeout(PATIENCE).build()?;
        Ok(Self { client, base: base.trim_end_matches('/').to_owned(), key, tolerance })
    }

    /// Sends a case and compares what comes back.
    pub(crate) async fn replay(&self, case: &Case) -> Row {
        let (status, found) = match self.send(case).await {
            Ok((status, answer)) => (Some(status), self.compare(case, status, &answer)),
            Err(error) => (None, Found::Unanswered(error.to_string())),
        };
        Row { name: case.name.clone(), status, found }
    }

    async fn send(&self, case: &Case) -> Result<(u16, Value), Box<dyn Error>> {
        let address = format!("{}/v1/{}", self.base, case.endpoint);
        // The id of the examples: a problem document names it.
        let request = self.client.post(address).header("x-request-id", "example");
        let request = match &self.key {
            Some(key) => request.bearer_auth(key),
            None => request,
        };
        let response = request.json(&case.content["request"]).send().await?;
        let status = response.status().as_u16();
        let body = response.text().await?;
        let answer = serde_json::from_str(&body)
            .map_err(|error| format!("status {status}, but the body is no JSON: {error}"))?;
        Ok((status, answer))
    }

    fn compare(&self, case: &Case, status: u16, answer: &Value) -> Found {
        let mut differences = Vec::new();
        if case.content["status"] != status {
            differences.push(format!("status {status} instead of {}", case.content["status"]));
        }
        let (mut expected, mut answer) = (case.content["response"].clone(), answer.clone());
        let versions = [version(&mut expected), version(&mut answer)];
        self.values("#", &expected, &answer, &mut differences);
        match (differences.is_empty(), versions) {
            (false, _) => Found::Different(differences),
            (true, [Some(known), Some(other)]) if known != other => {
                Found::OtherVersion(format!("version {other} instead of {known}"))
            }
            (true, _) => Found::Same,
        }
    }

    fn values(&self, at: &str, expected: &Value, found: &Value, differences: &mut Vec<String>) {
        match (expected, found) {
            (Value::Object(first), Value::Object(second)) => {
                for (name, part) in first {
                    let at = format!("{at}/{name}");
                    match second.get(name) {
                        Some(other) => self.values(&at, part, other, differences),
                        None => differences.push(format!("{at} is missing")),
                    }
                }
                let added = second.keys().filter(|name| !first.contains_key(*name));
                differences.extend(added.map(|name| format!("{at}/{name} was not expected")));
            }
            (Value::Array(first), Value::Array(second)) => {
                if first.len() != second.len() {
                    let (first, second) = (first.len(), second.len());
                    differences.push(format!("{at} has {second} items instead of {first}"));
                }
                for (index, (part, other)) in first.iter().zip(second).enumerate() {
                    self.values(&format!("{at}/{index}"), part, other, differences);
                }
            }
            (Value::Number(first), Value::Number(second)) if self.is_close(first, second) => {}
            _ if expected == found => {}
            _ => differences.push(format!("{at} is {found} instead of {expected}")),
        }
    }

    /// Written so that what is no finite number is not close.
    fn is_close(&self, one: &serde_json::Number, other: &serde_json::Number) -> bool {
        let (Some(one), Some(other)) = (one.as_f64(), other.as_f64()) else { return false };
        (one - other).abs() <= self.tolerance * one.abs().max(other.abs())
    }
}

/// Takes the version of the service out of an answer.
fn version(answer: &mut Value) -> Option<Value> {
    answer.get_mut("record")?.as_object_mut()?.remove("service_version")
}

/// Whether nothing differs but perhaps the version.
pub(crate) fn is_as_expected(rows: &[Row]) -> bool {
    rows.iter().all(|row| matches!(row.found, Found::Same | Found::OtherVersion(_)))
}

/// The table: one line a case, below it what differs, and the sums.
pub(crate) fn table(rows: &[Row]) -> Result<String, std::fmt::Error> {
    let width = rows.iter().map(|row| row.name.len()).max().unwrap_or_default().max(4);
    let mut text = String::new();
    writeln!(text, "{:<width$}  status  found", "case")?;
    let mut sums = [0_usize; 4];
    for Row { name, status, found } in rows {
        let status = status.map_or_else(|| "-".to_owned(), |status| status.to_string());
        let (place, told, details): (usize, &str, &[String]) = match found {
            Found::Same => (0, "same", &[]),
            Found::OtherVersion(which) => (1, which, &[]),
            Found::Different(differences) => (2, "different", differences),
            Found::Unanswered(why) => (3, why, &[]),
        };
        sums[place] += 1;
        writeln!(text, "{name:<width$}  {status:<6}  {told}")?;
        for detail in details.iter().take(MOST_TOLD) {
            writeln!(text, "    {detail}")?;
        }
        if details.len() > MOST_TOLD {
            writeln!(text, "    and {} more", details.len() - MOST_TOLD)?;
        }
    }
    let [same, other_version, different, unanswered] = sums;
    let count = rows.len();
    writeln!(
        text,
        "{count} cases: {same} same, {other_version} same by another version, {different} different, {unanswered} unanswered"
    )?;
    Ok(text)
}
