//! The end of the sheet: methods, warnings, cautions, and what a record needs.

use maud::{Markup, html};

use super::value;
use super::{Sheet, mathml};
use crate::api::record::{Warning, WarningSeverity};
use crate::api::v1::spec_check::application::{RecordedWaiver, WaiverEffect};
use crate::calc::method::{Method, Provenance};

/// The place of a method on the page.
pub(super) fn anchor(id: &str) -> String {
    format!("method-{}", id.replace(['.', '_'], "-"))
}

/// The methods used.
pub(super) fn methods(sheet: &Sheet<'_>) -> Markup {
    html! {
        section {
            h2 { "Methods used" }
            @for (method, number) in sheet.methods.iter().zip(1_usize..) { (data_sheet(method, number)) }
        }
    }
}

fn data_sheet(method: &Method, number: usize) -> Markup {
    html! {
        div.method id=(anchor(method.id)) {
            h3 { (number) ". " (method.name) " " code { (method.id) } }
            (mathml::equations(method.equation))
            p.where {
                @for (place, symbol) in method.symbols.iter().enumerate() {
                    @if place > 0 { "; " }
                    (mathml::inline(symbol.symbol)) " " (symbol.meaning)
                    @if symbol.unit != "1" { ", " (value::unit(symbol.unit)) }
                }
            }
            dl {
                dt { "Holds for" } dd { (method.valid) }
                dt { "Accuracy" } dd { (method.accuracy) }
                dt { "Source" }
                dd {
                    (method.source) " "
                    @match method.provenance {
                        Provenance::Seen => span.provenance { "Read in the source" },
                        Provenance::Memory => strong class="provenance memory" { "From memory: check it in the source" },
                    }
                }
            }
        }
    }
}

/// The warnings.
pub(super) fn warnings(sheet: &Sheet<'_>) -> Markup {
    let warnings = &sheet.answer.warnings;
    html! {
        section {
            h2 { "Warnings" }
            @if warnings.is_empty() { p { "None." } } @else {
                table.warnings {
                    caption { "Remarks on the results, with the input that each is about" }
                    thead {
                        tr { th scope="col" { "Weight" } th scope="col" { "Warning" } th scope="col" { "Input" } }
                    }
                    tbody { @for warning in warnings { (warned(warning)) } }
                }
            }
        }
    }
}

fn warned(warning: &Warning) -> Markup {
    let weight = match warning.severity {
        WarningSeverity::Info => "remark",
        WarningSeverity::NearLimit => "near limit",
        WarningSeverity::Exceeded => "exceeded",
    };
    html! {
        tr {
            th scope="row" { (weight) }
            td { (value::capitalized(&value::own(&warning.detail))) "." }
            td { code { (warning.pointer) } }
        }
    }
}

/// The cautions.
pub(super) fn cautions(sheet: &Sheet<'_>) -> Markup {
    html! {
        section.cautions {
            h2 { "Cautions" }
            ul { @for caution in &sheet.answer.cautions { li { (caution.text) } } }
        }
    }
}

/// The record, and places to sign.
pub(super) fn record(sheet: &Sheet<'_>) -> Markup {
    let (record, waivers) = (&sheet.answer.record, &sheet.answer.record.waivers);
    let reference = record.reference.as_deref().map(value::own);
    html! {
        section.record {
            h2 { "Record" }
            table {
                caption { "What identifies this calculation" }
                tbody {
                    tr { th scope="row" { "Reference" } td { (reference.as_deref().unwrap_or("none given")) } }
                    tr { th scope="row" { "Service" } td { "Brakewright " (record.service_version) } }
                    tr { th scope="row" { "Digest of the input" } td { code { (record.input_digest) } } }
                }
            }
            @if !waivers.is_empty() {
                table {
                    caption { "Waivers" }
                    thead {
                        tr {
                            @for title in ["Check", "Duty", "Brakes", "Reason", "Effect"] {
                                th scope="col" { (title) }
                            }
                        }
                    }
                    tbody { @for waiver in waivers { (waived(sheet, waiver)) } }
                }
            }
            p.note {
                "Numbers are rounded to " (value::DIGITS) " significant digits, or to as many as show a difference; \
                 whole digits are all kept. The exact numbers are in the JSON answer to the same request."
            }
            div.signatures {
                @for role in ["Prepared by", "Reviewed by"] {
                    div.signature {
                        p { (role) }
                        @for line in ["Name", "Signature", "Date"] { p.line { (line) } }
                    }
                }
            }
        }
    }
}

fn waived(sheet: &Sheet<'_>, waiver: &RecordedWaiver) -> Markup {
    let index = |given: u32| usize::try_from(given).unwrap_or(usize::MAX);
    let duty = waiver.duty_index.map(|given| sheet.duty_name(index(given)));
    let brakes = waiver.fitted_index.map(|given| sheet.brake_name(index(given)));
    let effect = match waiver.effect {
        WaiverEffect::Waived => "waived",
        WaiverEffect::WithoutEffect => "without effect",
    };
    html! {
        tr {
            th scope="row" { (value::title(waiver.check.0.as_str())) }
            td { (duty.as_deref().unwrap_or("all")) }
            td { (brakes.as_deref().unwrap_or("all")) }
            td { (value::own(&waiver.reason)) }
            td { (effect) }
        }
    }
}
