//! Each check as its formula with the numbers put in.

use maud::{Markup, html};

use super::checks::{mark, status_words, worst_at};
use super::closing::anchor;
use super::summary::pointers;
use super::value::{self, Figure};
use super::{Sheet, mathml};
use crate::api::measure::AnyAmount;
use crate::api::v1::spec_check::answer::{Check, HoldResult};
use crate::calc::case::spec_check::{Criterion, Sense, subject_of};
use crate::calc::finding::CheckCode;

/// How far a quotient of rounded numbers may lie beside the one that was judged.
const SAME: f64 = 1e-9;

/// The checks, duty by duty.
pub(super) fn section(sheet: &Sheet<'_>) -> Markup {
    html! {
        section {
            h2 { "Each check with its formula" }
            p {
                (mathml::inline("u")) " is the utilization. The formulas that find a value are those of the methods \
                 whose numbers stand beside it; they follow below."
            }
            @for (index, checks) in sheet.duties() {
                h3 { (sheet.duty_name(index)) }
                div.formulas { @for check in checks { (formula(sheet, check)) } }
            }
        }
    }
}

fn formula(sheet: &Sheet<'_>, check: &Check) -> Markup {
    let criterion = Criterion::of(check.code.0);
    html! {
        div.formula {
            h4 {
                (value::title(check.code.0.as_str())) ", " (sheet.subject(check.fitted_index)) ": "
                (mark(check.status)) " " (status_words(check.status))
            }
            p.what {
                (value::capitalized(subject_of(check.code.0)))
                @if worst_at(check) != "–" { ", worst at " (worst_at(check)) } "."
            }
            @if let Some(holding) = holding(sheet, check) { (holding) }
            @else if !criterion.equation.is_empty() { (mathml::equations(criterion.equation)) }
            (relation(&criterion, check))
            (utilization(sheet, &criterion, check))
            p.where { "Here " (mathml::inline(criterion.symbols)) "." (found_by(sheet, &criterion)) }
        }
    }
}

/// The value and its limit, and how they stand to each other.
fn relation(criterion: &Criterion, check: &Check) -> Markup {
    let (Some(actual), Some(limit)) = (&check.actual, &check.limit) else {
        return unfinished(criterion, check);
    };
    let [one, other] = Figure::pair(actual.value.0, limit.value.0);
    let sign = match actual.value.0.total_cmp(&limit.value.0) {
        std::cmp::Ordering::Equal => "=",
        std::cmp::Ordering::Less if criterion.sense == Sense::AtLeast => "<",
        std::cmp::Ordering::Less => "≤",
        std::cmp::Ordering::Greater if criterion.sense == Sense::AtLeast => "≥",
        std::cmp::Ordering::Greater => ">",
    };
    html! {
        p.eq {
            math displaystyle="true" {
                (mathml::fragment(criterion.actual)) mo { "=" } (value::in_formula(&one, actual.unit))
                mo { (sign) }
                @if criterion.limit != "1" { (mathml::fragment(criterion.limit)) mo { "=" } }
                (value::in_formula(&other, limit.unit))
            }
        }
    }
}

/// What can be said where there is no value or no limit.
fn unfinished(criterion: &Criterion, check: &Check) -> Markup {
    let missing = check.missing.as_deref().unwrap_or_default();
    let limit = check.limit.as_ref().map(|limit| {
        html! {
            math displaystyle="true" {
                (mathml::fragment(criterion.limit)) mo { "=" }
                (value::in_formula(&Figure::of(limit.value.0), limit.unit))
            }
        }
    });
    html! {
        p.eq {
            @if let Some(limit) = limit {
                (limit) ", and the value found has no end."
            } @else if missing.is_empty() {
                (value::capitalized(&check.detail)) "."
            } @else {
                "Missing: " (pointers(missing)) "."
            }
        }
    }
}

/// The utilization as a quotient.
fn utilization(sheet: &Sheet<'_>, criterion: &Criterion, check: &Check) -> Markup {
    let (Some(actual), Some(limit), Some(used)) = (&check.actual, &check.limit, check.utilization)
    else {
        return html! {};
    };
    let [one, other] = Figure::pair(actual.value.0, limit.value.0);
    let actual = (mathml::fragment(criterion.actual), value::in_formula(&one, actual.unit));
    let limit = (mathml::fragment(criterion.limit), value::in_formula(&other, limit.unit));
    let ((above, above_number), (below, below_number)) = match criterion.sense {
        Sense::AtLeast => (limit, actual),
        Sense::AtMost | Sense::Effort => (actual, limit),
        Sense::RiseAtMost => (rise(sheet, actual), rise(sheet, limit)),
    };
    let [used, _] = Figure::pair(used.0, 1.0);
    html! {
        p.eq {
            math displaystyle="true" {
                mi { "u" } mo { "=" }
                @if criterion.limit == "1" { (above) } @else {
                    mfrac { mrow { (above) } mrow { (below) } } mo { "=" }
                    mfrac { (above_number) (below_number) }
                }
                mo { "=" } (used.math())
            }
        }
    }
}

/// A temperature above that of the air, in symbols and in numbers.
fn rise(sheet: &Sheet<'_>, (symbol, number): (Markup, Markup)) -> (Markup, Markup) {
    let air: &AnyAmount = sheet.ambient_temperature;
    let air = value::in_formula(&Figure::of(air.value.0), air.unit);
    (
        html! { (symbol) mo { "−" } (mathml::fragment("T_a")) },
        html! { mrow { (number) mo { "−" } (air) } },
    )
}

/// A holding factor with the forces behind it.
fn holding(sheet: &Sheet<'_>, check: &Check) -> Option<Markup> {
    let factor = check.actual.as_ref().filter(|_| check.code.0 == CheckCode::HoldingTorque)?;
    let duty = sheet.answer.results.duties.get(check.duty_index)?;
    let is_it = |([held, needed], _): &([f64; 2], &str)| {
        (held / needed - factor.value.0).abs() <= SAME * factor.value.0.abs()
    };
    let ([held, needed], unit) = duty.holds.iter().filter_map(forces).find(is_it)?;
    let number = |number| value::in_formula(&Figure::of(number), unit);
    Some(html! {
        p.eq {
            math displaystyle="true" {
                (mathml::fragment(Criterion::of(check.code.0).equation))
                mo { "=" } mfrac { (number(held)) (number(needed)) } mo { "=" }
                (Figure::of(factor.value.0).math())
            }
        }
    })
}

/// What brakes hold and what they must, with the unit.
fn forces(hold: &HoldResult) -> Option<([f64; 2], &'static str)> {
    if let (Some(available), Some(required)) = (&hold.available_force, &hold.required_force) {
        return Some(([available.value(), required.value()], available.unit().symbol));
    }
    let (available, required) = (hold.available_torque.as_ref()?, hold.required_torque.as_ref()?);
    Some(([available.value(), required.value()], available.unit().symbol))
}

/// The methods of this answer that find the value.
fn found_by(sheet: &Sheet<'_>, criterion: &Criterion) -> Markup {
    let is_behind = |id: &str| criterion.methods.iter().any(|beginning| id.starts_with(beginning));
    let numbered = sheet.methods.iter().zip(1_usize..);
    let behind: Vec<(&str, usize)> = numbered
        .map(|(method, number)| (method.id, number))
        .filter(|(id, _)| is_behind(id))
        .collect();
    html! {
        @if !behind.is_empty() {
            " " (if behind.len() == 1 { "Method" } else { "Methods" }) " "
            @for (place, (id, number)) in behind.iter().enumerate() {
                @if place > 0 { ", " }
                a href={ "#" (anchor(id)) } { (number) }
            }
            "."
        }
    }
}
