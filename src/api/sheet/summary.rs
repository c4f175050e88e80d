//! The head of the sheet: what was judged, what came of it, and what needs attention.

use maud::{Markup, html};

use super::value::{self, Figure};
use super::{Sheet, checks};
use crate::api::measure::AnyAmount;
use crate::api::v1::spec_check::answer::{Check, CheckStatus, Governing, Verdict};
use crate::calc::case::spec_check::{Criterion, Sense};

/// The verdict in a word.
pub(super) const fn verdict_word(verdict: Verdict) -> &'static str {
    match verdict {
        Verdict::Pass => "pass",
        Verdict::Fail => "fail",
        Verdict::Incomplete => "incomplete",
    }
}

/// Title, verdict and the check that governs.
pub(super) fn heading(sheet: &Sheet<'_>) -> Markup {
    let results = &sheet.answer.results;
    let reference = sheet.answer.record.reference.as_deref().map(value::own);
    html! {
        p.kind { "Brake calculation sheet" }
        h1 { (reference.as_deref().unwrap_or("Without reference")) }
        div class={ "verdict " (verdict_word(results.verdict)) } {
            p.word { (value::title(verdict_word(results.verdict))) }
            div {
                p { (in_words(sheet)) }
                p { (governing(sheet)) }
            }
        }
    }
}

fn count(sheet: &Sheet<'_>, status: CheckStatus) -> usize {
    sheet.answer.results.checks.iter().filter(|check| check.status == status).count()
}

fn in_words(sheet: &Sheet<'_>) -> String {
    let all = sheet.answer.results.checks.len();
    let of = |status| count(sheet, status);
    let waived = match of(CheckStatus::Waived) {
        0 => String::new(),
        waived => format!(" Waived with a reason: {waived}."),
    };
    match sheet.answer.results.verdict {
        Verdict::Pass => {
            let near = match of(CheckStatus::NearLimit) {
                0 => String::new(),
                near => format!(" Near their limit: {near}."),
            };
            format!("No check fails, and none is open. Checks: {all}.{near}{waived}")
        }
        Verdict::Fail => {
            let open = match of(CheckStatus::NotAssessed) {
                0 => String::new(),
                open => format!(" Not assessed: {open}."),
            };
            let failed = of(CheckStatus::NotMet);
            format!("Checks that are not met: {failed} of {all}.{open}{waived}")
        }
        Verdict::Incomplete => {
            let open = of(CheckStatus::NotAssessed);
            format!("No check fails, but {open} of {all} could not be assessed.{waived}")
        }
    }
}

fn governing(sheet: &Sheet<'_>) -> Markup {
    let results = &sheet.answer.results;
    let Some(governing) = &results.governing else {
        return html! { "No check governs: none could be assessed." };
    };
    let is_it = |check: &&Check| is_same(check, governing);
    let Some(check) = results.checks.iter().find(is_it) else { return html! {} };
    html! { "Governing: " strong { (named(sheet, check)) } ". " (compared(check)) }
}

fn is_same(check: &Check, governing: &Governing) -> bool {
    check.code == governing.code
        && check.duty_index == governing.duty_index
        && check.fitted_index == governing.fitted_index
        && check.utilization == governing.utilization
}

/// A check with its place.
fn named(sheet: &Sheet<'_>, check: &Check) -> String {
    let place = check.fitted_index.map(|index| format!("{}, ", sheet.brake_name(index)));
    format!(
        "{}, {}{}",
        value::title(check.code.0.as_str()),
        place.unwrap_or_default(),
        sheet.duty_name(check.duty_index)
    )
}

/// Value, limit and utilization of a check in a sentence.
pub(super) fn compared(check: &Check) -> Markup {
    let bound = match Criterion::of(check.code.0).sense {
        Sense::AtMost | Sense::RiseAtMost => "may be at most",
        Sense::AtLeast => "must be at least",
        Sense::Effort => "available are",
    };
    let [actual, limit] = pair(check);
    let subject = match Criterion::of(check.code.0).sense {
        Sense::Effort => "Needed are ",
        Sense::AtMost | Sense::RiseAtMost | Sense::AtLeast => "It comes to ",
    };
    html! {
        (subject) (actual) ", " (bound) " " (limit)
        @if let Some(used) = check.utilization {
            ": utilization " (Figure::pair(used.0, 1.0)[0].html())
        }
        "."
    }
}

/// Value and limit of a check, with enough digits to tell them apart.
pub(super) fn pair(check: &Check) -> [Markup; 2] {
    let without = |amount: Option<&AnyAmount>, words: &str| {
        amount.map_or_else(|| html! { (words) }, value::amount)
    };
    if let (Some(actual), Some(limit)) = (&check.actual, &check.limit) {
        let [one, other] = Figure::pair(actual.value.0, limit.value.0);
        return [value::figure(&one, actual.unit), value::figure(&other, limit.unit)];
    }
    let is_open = matches!(check.status, CheckStatus::NotAssessed | CheckStatus::Waived);
    let actual = if is_open { "not assessed" } else { "no end" };
    let limit = if is_open { "–" } else { "none" };
    [without(check.actual.as_ref(), actual), without(check.limit.as_ref(), limit)]
}

const GROUPS: &[(CheckStatus, &str)] = &[
    (CheckStatus::NotMet, "Not met"),
    (CheckStatus::NearLimit, "Near the limit"),
    (CheckStatus::NotAssessed, "Could not be assessed"),
    (CheckStatus::Waived, "Waived"),
];

/// The checks that are not simply met, by what they need.
pub(super) fn attention(sheet: &Sheet<'_>) -> Markup {
    let found: Vec<(CheckStatus, &str)> =
        GROUPS.iter().filter(|(status, _)| count(sheet, *status) > 0).copied().collect();
    html! {
        section {
            h2 { "What needs attention" }
            @if found.is_empty() { p { "Nothing: every check keeps clear of its limit." } }
            @for (status, title) in found {
                h3 { (checks::mark(status)) " " (title) " (" (count(sheet, status)) ")" }
                ul.attention {
                    @for check in sheet.answer.results.checks.iter().filter(|check| check.status == status) {
                        li { strong { (named(sheet, check)) } ": " (need(sheet, check)) }
                    }
                }
            }
        }
    }
}

/// What a check that is not simply met needs, or why it may go without.
fn need(sheet: &Sheet<'_>, check: &Check) -> Markup {
    let missing = check.missing.as_deref().unwrap_or_default();
    match check.status {
        CheckStatus::Met | CheckStatus::NearLimit | CheckStatus::NotMet => compared(check),
        CheckStatus::NotAssessed if missing.is_empty() => {
            html! { (value::capitalized(&check.detail)) "." }
        }
        CheckStatus::NotAssessed => html! { "missing " (pointers(missing)) "." },
        CheckStatus::Waived => html! {
            "“" (reason(sheet, check)) "”"
            @if !missing.is_empty() { " (missing " (pointers(missing)) ")" }
        },
    }
}

/// Places of a request.
pub(super) fn pointers(missing: &[String]) -> Markup {
    html! {
        @for (place, pointer) in missing.iter().enumerate() {
            @if place > 0 { ", " }
            code { (pointer) }
        }
    }
}

/// The first waiver that covers a check, as in the judgement.
fn reason(sheet: &Sheet<'_>, check: &Check) -> String {
    let is_index = |given: Option<u32>, own: Option<usize>| {
        given.is_none() || given.map(|index| usize::try_from(index).unwrap_or(usize::MAX)) == own
    };
    let covers = |waiver: &&crate::api::v1::spec_check::application::RecordedWaiver| {
        waiver.check == check.code
            && is_index(waiver.duty_index, Some(check.duty_index))
            && is_index(waiver.fitted_index, check.fitted_index)
    };
    let waiver = sheet.answer.record.waivers.iter().find(covers);
    waiver.map(|waiver| value::own(&waiver.reason)).unwrap_or_default()
}
