//! What is unusual or uncertain about a brake.

use super::Brake;
use crate::calc::actuation::Actuation;
use crate::calc::finding::{Caution, Notice, Remarks, Severity, Subject};
use crate::calc::friction::FrictionCase;
use crate::calc::lining::Lining;
use crate::calc::method::Provenance;
use crate::calc::pad::Pad;
use crate::calc::quantity::Si;

impl Brake {
    /// Notes the methods of the pad and its remarks, for the brake that `at` names the inputs of.
    pub fn remark(&self, remarks: &mut Remarks, fitted_index: Option<usize>) {
        remarks.method(self.0.pressure_distribution.method(self.0.pad.kind()));
        remark_pad(remarks, &self.0.pad, fitted_index);
        remark_lining(remarks, &self.0.lining, fitted_index);
        if let Some(actuation) = &self.0.actuation {
            remark_actuation(remarks, actuation, fitted_index);
        }
    }
}

/// Says what is unusual about a pad.
pub fn remark_pad(remarks: &mut Remarks, pad: &Pad, fitted_index: Option<usize>) {
    if pad.angular_width().si() > 120.0_f64.to_radians() {
        let subject = Subject::Brake { fitted_index, input: "pad" };
        let detail =
            "the pad spans more than 120 deg of the disc; even contact over that width is doubtful";
        remarks.notice(Notice::PadUnusuallyWide, Severity::Info, subject, detail);
    }
}

/// Says what is unusual or uncertain about a lining.
pub fn remark_lining(remarks: &mut Remarks, lining: &Lining, fitted_index: Option<usize>) {
    let subject = |input| Subject::Brake { fitted_index, input };
    let mut info =
        |code, input, detail: &str| remarks.notice(code, Severity::Info, subject(input), detail);
    if !lining.friction().is_range() {
        let detail =
            "one friction value serves as low, nominal and high: give a range to see the spread";
        info(Notice::FrictionRangeNotGiven, "lining/friction", detail);
    }
    if lining.friction().at(FrictionCase::High) > 0.8 {
        info(
            Notice::FrictionUnusuallyHigh,
            "lining/friction",
            "the friction coefficient is above 0.8, which few pairs reach",
        );
    }
    if lining.parts().origin.friction_code.is_some() {
        let detail = "the friction code identifies a class of lining in a bench test; it is not a rating of this brake";
        info(Notice::FrictionCodeIsNotARating, "lining/friction_code", detail);
    }
    if lining.parts().origin.provenance == Some(Provenance::Memory) {
        info(
            Notice::ValueFromMemory,
            "lining/id",
            "the lining's row was entered from memory of its source",
        );
        remarks.caution(Caution::FromMemory);
    }
    if lining.parts().origin.contains_asbestos {
        remarks.caution(Caution::Asbestos);
    }
}

fn remark_actuation(remarks: &mut Remarks, actuation: &Actuation, fitted_index: Option<usize>) {
    let subject = || Subject::Brake { fitted_index, input: "actuation" };
    if let Some(method) = actuation.method() {
        remarks.method(method);
    }
    if actuation.is_lossless() {
        let detail =
            "every efficiency of the actuation is 1: real chains lose 5 to 30 % of the force";
        remarks.notice(Notice::LosslessActuation, Severity::Info, subject(), detail);
    }
    if let Actuation::Spring(spring) = actuation
        && !spring.considers_wear()
    {
        let detail = "the spring force lost as the pads wear is not considered: give spring_rate and pad_wear_travel";
        remarks.notice(Notice::SpringWearNotConsidered, Severity::Info, subject(), detail);
    }
}
