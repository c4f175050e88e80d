//! Where a finding or a fault of a duty's own calculation stands in the whole request.

use super::acting::Acting;
use crate::calc::fault::Faults;
use crate::calc::finding::{Finding, Subject, WarningCode};

/// The finding, placed in the request. Limits are told by the checks themselves.
pub(super) fn finding(finding: &Finding, duty: usize, acting: &Acting) -> Option<Finding> {
    if matches!(finding.code, WarningCode::Check(_)) {
        return None;
    }
    Some(Finding { subject: subject(&finding.subject, duty, acting), ..finding.clone() })
}

fn subject(subject: &Subject, duty: usize, acting: &Acting) -> Subject {
    match *subject {
        Subject::Request(input) if is_shared(input) => Subject::Request(input),
        // A test cycle has its events in its own row.
        Subject::Request("events") => Subject::Duty { index: duty, input: "id" },
        Subject::Request(input) => Subject::Duty { index: duty, input },
        Subject::Fitted { index, input } => Subject::Fitted { index: acting.index(index), input },
        Subject::Brake { fitted_index, input } => {
            Subject::Brake { fitted_index: fitted_index.map(|index| acting.index(index)), input }
        }
        Subject::Duty { .. } | Subject::Waiver { .. } => subject.clone(),
    }
}

/// Whether an input belongs to the request, not to the duty.
fn is_shared(path: &str) -> bool {
    path.starts_with("machine") || path.starts_with("fitted") || path == "ambient_temperature"
}

/// The faults, placed in the request.
pub(super) fn faults(faults: &Faults, duty: usize, acting: &Acting) -> Faults {
    let mut placed = Faults::new();
    for fault in faults.as_slice() {
        let member = match fault.member.strip_prefix("fitted/").map(|rest| rest.split_once('/')) {
            Some(Some((index, rest))) => {
                let index =
                    index.parse().map_or(index.to_owned(), |index| acting.index(index).to_string());
                format!("fitted/{index}/{rest}")
            }
            _ if is_shared(&fault.member) => fault.member.clone(),
            _ if fault.member.is_empty() => format!("duties/{duty}"),
            _ => format!("duties/{duty}/{}", fault.member),
        };
        placed.add(member, fault.code, fault.detail.clone());
    }
    placed
}
