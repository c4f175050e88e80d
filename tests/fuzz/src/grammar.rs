//! What the description knows: endpoints, members, words; and requests to start from.

use std::collections::HashMap;
use std::fs;
use std::path::Path;
use std::sync::LazyLock;

use brakewright::api::openapi::openapi_json;
use fastrand::Rng;
use serde_json::Value;

use crate::check;
use crate::tree::Node;

/// A `POST` operation.
#[derive(Debug)]
pub struct Endpoint {
    pub path: String,
    pub media_type: String,
    pub operation: Value,
}

impl Endpoint {
    /// Whether its body is a line for each request.
    pub fn takes_lines(&self) -> bool {
        self.media_type != "application/json"
    }

    /// The media types of its answers.
    pub fn forms(&self) -> Vec<&str> {
        let content = self.operation["responses"]["200"]["content"].as_object();
        content.into_iter().flat_map(|content| content.keys()).map(String::as_str).collect()
    }

    /// The schema of its body.
    pub fn request(&self) -> &Value {
        &self.operation["requestBody"]["content"][&self.media_type]["schema"]
    }
}

#[derive(Debug)]
pub struct Grammar {
    pub document: Value,
    pub endpoints: Vec<Endpoint>,
    /// Texts that mean something: values of enums, identifiers of catalog rows, codes of units.
    pub words: Vec<String>,
    /// Requests, each with the path that it is meant for.
    pub seeds: Vec<(String, Node)>,
    /// Values that the seeds give to a member.
    pub donors: HashMap<String, Vec<Node>>,
}

pub static GRAMMAR: LazyLock<Grammar> = LazyLock::new(Grammar::new);

/// Deepest part that is made up.
const DEEPEST: usize = 12;

impl Grammar {
    fn new() -> Self {
        let document: Value =
            serde_json::from_str(openapi_json()).expect("the description is JSON");
        let paths = document["paths"].as_object().expect("it has paths");
        let endpoints: Vec<Endpoint> = paths
            .iter()
            .filter_map(|(path, operations)| {
                let operation = operations.get("post")?.clone();
                let media_types = operation["requestBody"]["content"].as_object()?;
                let media_type = media_types.keys().next()?.clone();
                Some(Endpoint { path: path.clone(), media_type, operation })
            })
            .collect();
        let mut words = Vec::new();
        collect_words(&document["components"]["schemas"], &mut words);
        collect_identifiers(paths, &mut words);
        words.sort();
        words.dedup();
        let seeds = seeds(&endpoints);
        let mut donors: HashMap<String, Vec<Node>> = HashMap::new();
        for (_, seed) in &seeds {
            seed.each_member(&mut |name, value| {
                donors.entry(name.to_owned()).or_default().push(value.clone());
            });
        }
        Self { document, endpoints, words, seeds, donors }
    }

    pub fn endpoint(&self, path: &str) -> Option<&Endpoint> {
        self.endpoints.iter().find(|endpoint| endpoint.path == path)
    }

    fn resolved<'a>(&'a self, schema: &'a Value) -> &'a Value {
        match schema["$ref"].as_str() {
            Some(reference) => {
                let target = self.document.pointer(reference.trim_start_matches('#'));
                target.map_or(&Value::Null, |target| self.resolved(target))
            }
            None => schema,
        }
    }

    /// A value as a schema describes it.
    pub fn instance(&self, schema: &Value, rng: &mut Rng, depth: usize) -> Node {
        let schema = self.resolved(schema);
        if let Some(parts) = schema["allOf"].as_array() {
            let members = parts.iter().flat_map(|part| match self.instance(part, rng, depth) {
                Node::Object(members) => members,
                Node::Leaf(_) | Node::List(_) => Vec::new(),
            });
            return Node::Object(members.collect());
        }
        if let Some(form) = choice(schema.get("oneOf"), rng) {
            return self.instance(form, rng, depth);
        }
        if let Some(word) = choice(schema.get("enum"), rng) {
            return Node::of(word);
        }
        match schema["type"].as_str() {
            Some("object") => self.object(schema, rng, depth),
            Some("array") => {
                let least = schema["minItems"].as_u64().unwrap_or(0);
                let most = schema["maxItems"].as_u64().unwrap_or(least + 3).min(least + 3);
                let items = (0..rng.u64(least..=most))
                    .map(|_| self.instance(&schema["items"], rng, depth + 1));
                Node::List(items.collect())
            }
            Some("boolean") => Node::Leaf(rng.bool().to_string()),
            Some("integer") => {
                let most = *rng.choice(&[1, 2, 5, 5, 5, 5, 100, 3000]).unwrap_or(&5);
                Node::Leaf(rng.u64(0..=most).to_string())
            }
            Some("number") => Node::Leaf(number(rng)),
            _ => Node::text(rng.choice(&self.words).map_or("", String::as_str)),
        }
    }

    fn object(&self, schema: &Value, rng: &mut Rng, depth: usize) -> Node {
        let required: Vec<&str> =
            schema["required"].as_array().into_iter().flatten().filter_map(Value::as_str).collect();
        let mut members = Vec::new();
        for (name, member) in schema["properties"].as_object().into_iter().flatten() {
            let is_required = required.contains(&name.as_str());
            if is_required || (depth < DEEPEST && rng.u8(0..100) < 35) {
                members.push((name.clone(), self.value(name, member, rng, depth + 1)));
            }
        }
        Node::Object(members)
    }

    /// A value for a member: one that a seed gives to it, or one that is made up.
    fn value(&self, name: &str, schema: &Value, rng: &mut Rng, depth: usize) -> Node {
        let donors = self
            .donors
            .get(name)
            .filter(|_| !matches!(name, "value" | "unit") && rng.u8(0..4) == 0);
        let donor = donors.and_then(|donors| rng.choice(donors)).cloned();
        donor.unwrap_or_else(|| self.instance(schema, rng, depth))
    }

    /// A member that an object with these names may have beside them.
    pub fn further_member(&self, names: &[&str], rng: &mut Rng) -> Option<(String, Node)> {
        let schemas = self.document["components"]["schemas"].as_object()?;
        let fitting: Vec<_> = schemas
            .values()
            .filter(|schema| schema["additionalProperties"] == false)
            .filter_map(|schema| schema["properties"].as_object())
            .filter(|known| {
                names.len() < known.len() && names.iter().all(|name| known.contains_key(*name))
            })
            .collect();
        let open: Vec<_> = rng
            .choice(fitting)?
            .iter()
            .filter(|(name, _)| !names.contains(&name.as_str()))
            .collect();
        let (name, schema) = rng.choice(open)?;
        Some((name.clone(), self.value(name, schema, rng, 4)))
    }
}

fn choice<'a>(list: Option<&'a Value>, rng: &mut Rng) -> Option<&'a Value> {
    list.and_then(Value::as_array).and_then(|list| rng.choice(list))
}

/// A number of any size, mostly of the size that quantities have.
pub fn number(rng: &mut Rng) -> String {
    const EDGES: [&str; 24] = [
        "0",
        "-0.0",
        "1",
        "-1",
        "2",
        "0.5",
        "0.1",
        "1.0000000000000002",
        "0.9999999999999999",
        "1e-9",
        "1e-12",
        "5e-324",
        "1e-300",
        "2.2250738585072014e-308",
        "1e9",
        "1e12",
        "1e15",
        "9007199254740993",
        "4294967295",
        "4294967296",
        "18446744073709551616",
        "1e300",
        "1.7976931348623157e308",
        "1e309",
    ];
    match rng.u8(0..8) {
        0 => EDGES[rng.usize(0..EDGES.len())].to_owned(),
        1 => rng.u32(0..400).to_string(),
        2 => format!("{}", rng.f64()),
        3 => format!("{:e}", 10_f64.powf(rng.f64() * 30.0 - 15.0)),
        _ => format!("{}", 10_f64.powf(rng.f64() * 7.0 - 3.0)),
    }
}

fn collect_words(part: &Value, words: &mut Vec<String>) {
    for (name, member) in part.as_object().into_iter().flatten() {
        match member.as_array() {
            Some(values) if name == "enum" => {
                words.extend(values.iter().filter_map(Value::as_str).map(str::to_owned))
            }
            _ => collect_words(member, words),
        }
    }
}

/// Asks the service itself for its catalogs.
fn collect_identifiers(paths: &serde_json::Map<String, Value>, words: &mut Vec<String>) {
    for path in paths
        .keys()
        .filter(|path| path.starts_with("/v1/") && paths.contains_key(&format!("{path}/{{id}}")))
    {
        let catalog: Value = serde_json::from_slice(&check::get(path)).unwrap_or_default();
        for item in catalog["items"].as_array().into_iter().flatten() {
            words.extend(
                ["id", "ucum", "common_code"]
                    .iter()
                    .filter_map(|name| item[name].as_str())
                    .map(str::to_owned),
            );
        }
    }
}

/// The requests of the examples and of the tests, and an empty one for every endpoint.
fn seeds(endpoints: &[Endpoint]) -> Vec<(String, Node)> {
    let root = Path::new(env!("CARGO_MANIFEST_DIR")).join("../..");
    let mut seeds = Vec::new();
    for endpoint in endpoints {
        let name = endpoint.path.trim_start_matches("/v1/");
        for document in documents(&root.join("examples/requests").join(name)) {
            seeds.push((endpoint.path.clone(), Node::of(&document["request"])));
        }
        seeds.push((endpoint.path.clone(), Node::Object(Vec::new())));
    }
    for document in documents(&root.join("tests/reference/spec_check")) {
        let cases = document["cases"].as_array().into_iter().flatten();
        seeds.extend(cases.map(|case| ("/v1/spec-check".to_owned(), Node::of(&case["request"]))));
    }
    // A stream of one line; the mutator adds others.
    for endpoint in endpoints.iter().filter(|endpoint| endpoint.takes_lines()) {
        let single = seeds.iter().filter(|(path, _)| path == "/v1/spec-check");
        let lines: Vec<_> = single.map(|(_, seed)| (endpoint.path.clone(), seed.clone())).collect();
        seeds.extend(lines);
    }
    for case in documents(&root.join("tests/fuzz/cases")) {
        let path = case["path"].as_str().unwrap_or_default().to_owned();
        seeds.push((path, Node::of(&case["request"])));
    }
    seeds
}

fn documents(folder: &Path) -> Vec<Value> {
    let files = fs::read_dir(folder).into_iter().flatten().flatten();
    let texts = files.filter_map(|file| fs::read(file.path()).ok());
    texts.filter_map(|text| serde_json::from_slice(&text).ok()).collect()
}
