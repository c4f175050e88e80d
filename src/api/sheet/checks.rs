//! All checks, one table for each duty.

use maud::{Markup, html};

use super::Sheet;
use super::summary::pair;
use super::value::{self, Figure};
use crate::api::record::FrictionCase;
use crate::api::v1::spec_check::answer::{Check, CheckStatus};
use crate::calc::case::spec_check::{Criterion, Sense};

/// What is at the right end of a bar.
const FULL_BAR: f64 = 1.25;
/// Bars are drawn this wide; the limit lies at 100.
const BAR_WIDTH: f64 = 125.0;

/// The state of a check in words.
pub(super) const fn status_words(status: CheckStatus) -> &'static str {
    match status {
        CheckStatus::Met => "met",
        CheckStatus::NearLimit => "near limit",
        CheckStatus::NotMet => "not met",
        CheckStatus::NotAssessed => "not assessed",
        CheckStatus::Waived => "waived",
    }
}

const fn class(status: CheckStatus) -> &'static str {
    match status {
        CheckStatus::Met => "met",
        CheckStatus::NearLimit => "near",
        CheckStatus::NotMet => "not-met",
        CheckStatus::NotAssessed => "open",
        CheckStatus::Waived => "waived",
    }
}

/// A sign for the state of a check, beside its words.
pub(super) fn mark(status: CheckStatus) -> Markup {
    let sign = match status {
        CheckStatus::Met => "✓",
        CheckStatus::NearLimit => "≈",
        CheckStatus::NotMet => "✕",
        CheckStatus::NotAssessed => "?",
        CheckStatus::Waived => "–",
    };
    html! { span aria-hidden="true" class={ "mark " (class(status)) } { (sign) } }
}

/// The tables.
pub(super) fn section(sheet: &Sheet<'_>) -> Markup {
    let near = Figure::of(sheet.near_limit_from);
    html! {
        section {
            h2 { "All checks" }
            p {
                "Utilization is 1 at the limit, whichever way the limit runs. In a bar the upright line is the limit; \
                 the bar ends at 1.25. From " (near.html()) " on, a check counts as near its limit."
            }
            @for (index, checks) in sheet.duties() { (table(sheet, index, &checks)) }
        }
    }
}

fn table(sheet: &Sheet<'_>, index: usize, checks: &[&Check]) -> Markup {
    html! {
        div.wide role="region" tabindex="0" aria-label={ "Checks of duty " (index.saturating_add(1)) } {
            table.checks {
                caption { (sheet.duty_name(index)) " (" (value::words(kind(sheet, index))) ")" }
                thead {
                    tr {
                        @for title in ["Check", "On", "Worst at", "Found", "Limit", "Utilization", "Status"] {
                            th scope="col" { (title) }
                        }
                    }
                }
                tbody { @for check in checks { (row(sheet, check)) } }
            }
        }
    }
}

pub(super) fn kind<'a>(sheet: &Sheet<'a>, index: usize) -> &'a str {
    sheet.answer.results.duties.get(index).map_or("", |duty| duty.kind)
}

fn row(sheet: &Sheet<'_>, check: &Check) -> Markup {
    let [actual, limit] = pair(check);
    let bound = match Criterion::of(check.code.0).sense {
        Sense::AtMost | Sense::RiseAtMost => "at most ",
        Sense::AtLeast => "at least ",
        Sense::Effort => "of ",
    };
    html! {
        tr class=(class(check.status)) {
            th scope="row" { (value::title(check.code.0.as_str())) }
            td { (sheet.subject(check.fitted_index)) }
            td { (worst_at(check)) }
            td.amount { (actual) }
            td.amount { @if check.limit.is_some() { span.bound { (bound) } } (limit) }
            td.used { (utilization(check)) }
            td.status { (mark(check.status)) " " (status_words(check.status)) }
        }
    }
}

/// The friction case in which a check is worst, and whether that is with hot linings.
pub(super) fn worst_at(check: &Check) -> String {
    let case = check.friction_case.map(|case| match case {
        FrictionCase::Low => "low friction",
        FrictionCase::Nominal => "nominal friction",
        FrictionCase::High => "high friction",
    });
    let heat = check.hot.map(|_| "hot");
    let parts: Vec<&str> = case.into_iter().chain(heat).collect();
    if parts.is_empty() { "–".to_owned() } else { parts.join(", ") }
}

fn utilization(check: &Check) -> Markup {
    let Some(used) = check.utilization else { return html! { "–" } };
    let [figure, _] = Figure::pair(used.0, 1.0);
    let length = format!("{:.1}", used.0.clamp(0.0, FULL_BAR) / FULL_BAR * BAR_WIDTH);
    html! {
        span.n { (figure.html()) } " "
        svg class="bar" viewBox="0 0 125 10" preserveAspectRatio="none" aria-hidden="true" {
            rect class="track" x="0" y="3" width="125" height="4" {}
            rect class="fill" x="0" y="2" width=(length) height="6" {}
            rect class="limit" x="99" y="0" width="2" height="10" {}
        }
    }
}
