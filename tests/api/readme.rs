//! What the README says, held against the service.

use std::collections::BTreeSet;
use std::fs;
use std::path::Path;

use brakewright::api::openapi::openapi_json;
use brakewright::calc::finding::CheckCode;
use brakewright::settings::CommandLine;
use clap::CommandFactory as _;
use serde_json::Value;

use crate::support::client::TestApp;
use crate::support::json::readable;

fn file(name: &str) -> String {
    fs::read_to_string(Path::new(env!("CARGO_MANIFEST_DIR")).join(name)).unwrap()
}

/// What stands between two marks, without them.
fn between<'a>(text: &'a str, open: &str, close: &str) -> &'a str {
    let (_, rest) = text.split_once(open).unwrap_or_else(|| panic!("no {open}"));
    rest.split_once(close).unwrap().0
}

#[tokio::test]
async fn the_request_of_the_readme_gets_the_answer_of_the_readme() {
    let readme = file("README.md");
    let request = between(&readme, "curl --json '", "'");
    let path = between(&readme, "}' http://127.0.0.1:8080", "\n");
    let answer = readable(&TestApp::new().post(path, request, 200).await);
    let shown = between(&readme, "```json\n", "```");
    if std::env::vars_os().any(|(name, _)| name == "UPDATE_GOLDEN") {
        let updated =
            readme.replace(&format!("```json\n{shown}```"), &format!("```json\n{answer}```"));
        fs::write(Path::new(env!("CARGO_MANIFEST_DIR")).join("README.md"), updated).unwrap();
    } else {
        assert_eq!(shown, answer);
    }
}

#[test]
fn the_readme_lists_the_endpoints_of_the_description() {
    let document: Value = serde_json::from_str(openapi_json()).unwrap();
    let described: BTreeSet<String> = document["paths"]
        .as_object()
        .unwrap()
        .iter()
        .flat_map(|(path, item)| {
            let methods = item.as_object().unwrap().keys();
            methods.map(move |method| format!("{} {path}", method.to_uppercase()))
        })
        .collect();
    let readme = file("README.md");
    let section = between(&readme, "## Endpoints\n", "\n## ");
    let listed: BTreeSet<String> = section
        .lines()
        .filter_map(|line| line.strip_prefix("| `"))
        .flat_map(|line| line.split_once(" |").unwrap().0.split(", "))
        .map(|name| name.trim_matches('`').to_owned())
        .collect();
    assert_eq!(listed, described);
}

#[test]
fn the_readme_lists_every_check_once() {
    let readme = file("README.md");
    let section = between(&readme, "## Checking a choice\n", "\n## ");
    let rows = section.lines().filter_map(|line| line.strip_prefix("| `"));
    let listed: Vec<&str> = rows
        .flat_map(|row| row.split_once(" |").unwrap().0.split(", "))
        .map(|code| code.trim_matches('`'))
        .collect();
    let mut known: Vec<&str> = CheckCode::ALL.iter().map(|code| code.as_str()).collect();
    let mut found = listed;
    known.sort_unstable();
    found.sort_unstable();
    assert_eq!(found, known);
}

#[test]
fn the_readme_lists_the_settings_with_their_defaults() {
    let program = CommandLine::command();
    let settings: Vec<String> = program
        .get_arguments()
        .filter_map(|argument| {
            let variable = argument.get_env()?.to_str()?;
            let [default] = argument.get_default_values() else { panic!("{variable}") };
            let default = default.to_str().filter(|default| !default.is_empty());
            let default = default.map_or("none".to_owned(), |default| format!("`{default}`"));
            let help = argument.get_help()?.to_string();
            Some(format!("| `{variable}` | {default} | {help} |"))
        })
        .collect();
    let readme = file("README.md");
    let section = between(&readme, "|---|---|---|\n", "\n\nWithout a subcommand");
    assert_eq!(section.lines().collect::<Vec<_>>(), settings);
}

#[test]
fn the_image_says_the_version_of_the_program() {
    let label = format!("org.opencontainers.image.version=\"{}\"", env!("CARGO_PKG_VERSION"));
    assert!(file("Dockerfile").contains(&label));
}

#[test]
fn the_deployments_use_settings_that_exist_and_the_image_of_this_version() {
    let program = CommandLine::command();
    let known: BTreeSet<&str> =
        program.get_arguments().filter_map(|argument| argument.get_env()?.to_str()).collect();
    for name in ["compose.yaml", "kubernetes/deployment.yaml"] {
        let text = file(&format!("examples/deploy/{name}"));
        assert!(text.contains(&format!("image: brakewright:{}\n", env!("CARGO_PKG_VERSION"))));
        let word = |character: char| !(character.is_ascii_uppercase() || character == '_');
        let used: Vec<&str> =
            text.split(word).filter(|word| word.starts_with("BRAKEWRIGHT_")).collect();
        assert!(used.len() >= 3, "{name}: {used:?}");
        for variable in used {
            assert!(known.contains(variable), "{name}: {variable}");
        }
    }
}
