//! What was given, member by member as written, and what was taken for members that were left out.

use maud::{Markup, html};
use serde_json::{Map, Value};

use super::Sheet;
use super::value::{self, Figure};
use crate::api::parse::DefaultValue;

/// Members of a request that stand in sections of their own.
const SECTIONS: [&str; 3] = ["machine", "fitted", "duties"];

/// A table of members that belong together.
struct Group {
    title: String,
    rows: Vec<(String, Markup)>,
}

/// All inputs as given.
pub(super) fn section(sheet: &Sheet<'_>) -> Markup {
    let nothing = Map::new();
    let request = sheet.request.as_object().unwrap_or(&nothing);
    let list =
        |name: &str| request.get(name).and_then(Value::as_array).cloned().unwrap_or_default();
    let general = |(name, _): &(&String, &Value)| !SECTIONS.contains(&name.as_str());
    let general: Map<String, Value> = request
        .iter()
        .filter(general)
        .map(|(name, member)| (name.clone(), member.clone()))
        .collect();
    html! {
        section {
            h2 { "Inputs as given" }
            (part("Request", "#", &Value::Object(general)))
            @if let Some(machine) = request.get("machine") { (part("Machine", "#/machine", machine)) }
            @for (index, entry) in list("fitted").iter().enumerate() {
                (part(&sheet.brake_name(index), &format!("#/fitted/{index}"), entry))
            }
            @for (index, duty) in list("duties").iter().enumerate() {
                (part(&sheet.duty_name(index), &format!("#/duties/{index}"), duty))
            }
        }
    }
}

fn part(title: &str, pointer: &str, given: &Value) -> Markup {
    let mut groups = vec![Group { title: String::new(), rows: Vec::new() }];
    collect(given, &mut groups, 0, "");
    groups.retain(|group| !group.rows.is_empty());
    html! {
        h3 { (title) " " code { (pointer) } }
        div.groups {
            @for group in &groups {
                table.inputs {
                    caption { (if group.title.is_empty() { "General" } else { &group.title }) }
                    tbody {
                        @for (name, written) in &group.rows {
                            tr { th scope="row" { (name) } td { (written) } }
                        }
                    }
                }
            }
        }
    }
}

/// Adds the members of an object: those with a value to its own group, others in groups of their own.
fn collect(given: &Value, groups: &mut Vec<Group>, own: usize, prefix: &str) {
    let Value::Object(members) = given else { return };
    for (name, member) in members {
        let name = format!("{prefix}{}", value::words(name));
        match member {
            Value::Object(_) if measure(member).is_none() => {
                let own = open(groups, own, &name);
                collect(member, groups, own, "");
            }
            Value::Array(items) => {
                let own = open(groups, own, &name);
                for (index, item) in items.iter().enumerate() {
                    let number = index.saturating_add(1);
                    match written(item) {
                        Some(written) => add(groups, own, number.to_string(), written),
                        None => collect(item, groups, own, &format!("{number}, ")),
                    }
                }
            }
            Value::Object(_)
            | Value::Null
            | Value::Bool(_)
            | Value::Number(_)
            | Value::String(_) => {
                if let Some(written) = written(member) {
                    add(groups, own, name, written);
                }
            }
        }
    }
}

fn open(groups: &mut Vec<Group>, parent: usize, name: &str) -> usize {
    let above = groups.get(parent).map_or("", |group| group.title.as_str());
    let title =
        if above.is_empty() { value::capitalized(name) } else { format!("{above}, {name}") };
    groups.push(Group { title, rows: Vec::new() });
    groups.len() - 1
}

fn add(groups: &mut [Group], own: usize, name: String, written: Markup) {
    if let Some(group) = groups.get_mut(own) {
        group.rows.push((name, written));
    }
}

/// A number with its unit.
fn measure(given: &Value) -> Option<Markup> {
    let (number, unit) = (given.get("value")?.as_number()?, given.get("unit")?.as_str()?);
    Some(html! { span.n { (number) "\u{a0}" (value::own(unit)) } })
}

/// A member that has no members of its own.
fn written(given: &Value) -> Option<Markup> {
    match given {
        Value::Null => Some(html! { "–" }),
        Value::Bool(is_so) => Some(html! { (if *is_so { "yes" } else { "no" }) }),
        Value::Number(number) => Some(html! { span.n { (number) } }),
        Value::String(text) => Some(html! { (value::own(text)) }),
        Value::Object(_) => measure(given),
        Value::Array(_) => None,
    }
}

/// The values that were not in the request.
pub(super) fn defaults(sheet: &Sheet<'_>) -> Markup {
    let defaults = &sheet.answer.record.defaults;
    html! {
        section {
            h2 { "Values taken where none was given" }
            @if defaults.is_empty() { p { "None: every value was given." } } @else {
                table.defaults {
                    caption { "Defaults and catalog values, with the place of the member that was left out" }
                    thead { tr { th scope="col" { "Member" } th scope="col" { "Value taken" } } }
                    tbody {
                        @for default in defaults {
                            tr {
                                th scope="row" { code { (default.pointer) } }
                                td { (taken(&default.value, default.unit.unwrap_or("1"))) }
                            }
                        }
                    }
                }
            }
        }
    }
}

fn taken(taken: &DefaultValue, unit: &str) -> Markup {
    match taken {
        DefaultValue::Count(count) => html! { (count) },
        DefaultValue::Number(number) => value::figure(&Figure::of(number.0), unit),
        DefaultValue::Text(text) => html! { (value::words(text)) },
    }
}
