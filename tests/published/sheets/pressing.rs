//! What presses: the chains are those of `published::actuation`.

use brakewright::calc::actuation::{cable, hydraulic, pneumatic, spring};

use super::{Worked, worked};
use crate::published::actuation::{cabled, hydraulic_check, pneumatic_check, spring_check};

pub(super) fn all() -> Vec<Worked> {
    let (pressure, clamp) = hydraulic_check();
    let (new, worn) = spring_check();
    vec![
        worked(&hydraulic::CHAIN, &[("39.7597", pressure / 1e5), ("8677.16", clamp)]),
        worked(&cable::CHAIN, &[("2880", cabled(100.0, 4.0, 0.8, 10.0, 0.9))]),
        worked(&pneumatic::CHAIN, &[("105462", pneumatic_check())]),
        worked(&spring::CHAIN, &[("9600", new), ("8000", worn)]),
    ]
}
