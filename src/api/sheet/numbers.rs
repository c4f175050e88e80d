//! The numbers behind the checks, duty by duty.

use maud::{Markup, html};
use serde_json::Value;

use super::Sheet;
use super::checks::kind;
use super::value::{self, Figure};

const LISTS: [(&str, &str); 4] = [
    ("stops", "Stops"),
    ("holds", "Holds"),
    ("descents", "Descents"),
    ("fitted", "Brakes, each entry at its hottest"),
];

/// The tables.
pub(super) fn section(sheet: &Sheet<'_>) -> Markup {
    let duties: Vec<Value> = sheet
        .answer
        .results
        .duties
        .iter()
        .map(|duty| serde_json::to_value(duty).unwrap_or_default())
        .collect();
    html! {
        section {
            h2 { "Numbers behind the checks" }
            @for (index, duty) in duties.iter().enumerate() {
                @let lists = lists(duty);
                h3 { (sheet.duty_name(index)) " (" (value::words(kind(sheet, index))) ")" }
                @if lists.is_empty() { p { "No numbers beyond those of the checks." } }
                @for (title, rows) in lists { (table(sheet, index, title, rows)) }
            }
        }
    }
}

fn lists(duty: &Value) -> Vec<(&'static str, &Vec<Value>)> {
    let found =
        LISTS.iter().filter_map(|(name, title)| Some((*title, duty.get(name)?.as_array()?)));
    found.filter(|(_, rows)| !rows.is_empty()).collect()
}

fn table(sheet: &Sheet<'_>, index: usize, title: &str, rows: &[Value]) -> Markup {
    let mut columns: Vec<&str> = Vec::new();
    for name in rows.iter().filter_map(Value::as_object).flat_map(|row| row.keys()) {
        if name != "hot" && !columns.contains(&name.as_str()) {
            columns.push(name);
        }
    }
    html! {
        div.wide role="region" tabindex="0" aria-label={ (title) " of duty " (index.saturating_add(1)) } {
            table.numbers {
                caption { (title) }
                thead { tr { @for name in &columns { th scope="col" { (heading(name)) } } } }
                tbody {
                    @for row in rows {
                        tr {
                            @for (place, name) in columns.iter().enumerate() {
                                @let cell = cell(sheet, row, name);
                                @if place == 0 { th scope="row" { (cell) } } @else { td.amount { (cell) } }
                            }
                        }
                    }
                }
            }
        }
    }
}

fn heading(name: &str) -> String {
    if name == "fitted_index" { "Brake".to_owned() } else { value::title(name) }
}

fn cell(sheet: &Sheet<'_>, row: &Value, name: &str) -> Markup {
    let is_hot = row.get("hot").and_then(Value::as_bool).unwrap_or(false);
    match row.get(name) {
        Some(Value::Number(index)) if name == "fitted_index" => {
            let index = index.as_u64().and_then(|index| usize::try_from(index).ok());
            html! { (sheet.subject(index)) }
        }
        Some(Value::String(case)) => html! { (value::title(case)) @if is_hot { ", hot" } },
        Some(Value::Bool(is_so)) => html! { (if *is_so { "yes" } else { "no" }) },
        Some(Value::Number(number)) => Figure::of(number.as_f64().unwrap_or_default()).html(),
        Some(given @ Value::Object(_)) => measured(given),
        Some(Value::Array(_) | Value::Null) | None => html! { "–" },
    }
}

fn measured(given: &Value) -> Markup {
    let number = given.get("value").and_then(Value::as_f64).unwrap_or_default();
    value::measured(number, given.get("unit").and_then(Value::as_str).unwrap_or("1"))
}
