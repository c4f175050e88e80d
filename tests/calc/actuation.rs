//! What must hold for every chain: back from a clamp force to its input, and forth again, nothing is lost.

use brakewright::calc::actuation::{
    Actuation, Cable, CableParts, Hydraulic, HydraulicParts, Input, MasterCylinder,
    MasterCylinderParts, Pneumatic, PneumaticParts, Pressing, Spring, SpringParts,
};
use brakewright::calc::quantity::{Area, Force, Length, LineCompliance, Pressure, Si, Stiffness};
use proptest::prelude::*;

/// A few multiplications and divisions each way: some 1e-15 each, and the threshold may be large against the rest.
const RELATIVE: f64 = 1e-12;

prop_compose! {
    fn hydraulic()(
        bore in 5e-3..80e-3_f64, lever in 0.2..20.0_f64, master in 0.2..1.0_f64, piston in 5e-3..120e-3_f64,
        pistons in 1..6_u32, caliper in 0.2..1.0_f64, threshold in 0.0..3e5_f64, clearance in 0.0..1e-3_f64, compliance in 0.0..5e-12_f64,
    ) -> Actuation {
        let master = MasterCylinderParts {
            bore: Length::from_si(bore), lever_ratio: lever, efficiency: master,
            operator_force: None, max_operator_force: None, max_stroke: None,
        };
        Actuation::Hydraulic(Hydraulic::new(HydraulicParts {
            piston_diameter: Length::from_si(piston), pistons_per_side: pistons, efficiency: caliper,
            threshold_pressure: Pressure::from_si(threshold), line_pressure: None, max_line_pressure: None,
            running_clearance: Some(Length::from_si(clearance)), compliance: Some(LineCompliance::from_si(compliance)),
            master_cylinder: Some(MasterCylinder::new(master).unwrap()),
        }).unwrap())
    }
}

prop_compose! {
    fn cable()(lever in 0.2..20.0_f64, cable in 0.2..1.0_f64, caliper in 0.2..30.0_f64, efficiency in 0.2..1.0_f64) -> Actuation {
        Actuation::Cable(Cable::new(CableParts {
            lever_ratio: lever, cable_efficiency: cable, caliper_ratio: caliper, caliper_efficiency: efficiency,
            operator_force: None, max_operator_force: None,
        }).unwrap())
    }
}

prop_compose! {
    fn pneumatic()(area in 1e-4..0.1_f64, spring in 0.0..2000.0_f64, ratio in 0.2..30.0_f64, efficiency in 0.2..1.0_f64) -> Actuation {
        Actuation::Pneumatic(Pneumatic::new(PneumaticParts {
            chamber_area: Area::from_si(area), air_pressure: None, max_air_pressure: None,
            return_spring_force: Force::from_si(spring), force_ratio: ratio, efficiency,
        }).unwrap())
    }
}

prop_compose! {
    fn spring()(rate in 0.0..2e6_f64, worn in 0.0..5e-3_f64, opened in 0.0..5e-3_f64, ratio in 0.2..30.0_f64, efficiency in 0.2..1.0_f64) -> Actuation {
        Actuation::Spring(Spring::new(SpringParts {
            spring_force: None, spring_rate: Some(Stiffness::from_si(rate)), pad_wear_travel: Some(Length::from_si(worn)),
            release_travel: Some(Length::from_si(opened)), force_ratio: ratio, efficiency,
            release_piston_diameter: Some(Length::from_si(0.05)), max_release_pressure: None,
        }).unwrap())
    }
}

fn chain() -> impl Strategy<Value = Actuation> {
    prop_oneof![hydraulic(), cable(), pneumatic(), spring()]
}

/// The inputs that would each do what was found to be needed.
fn inputs(needed: &Pressing) -> Vec<Input> {
    [
        needed.line_pressure.map(Input::LinePressure),
        needed.operator_force.map(Input::OperatorForce),
        needed.air_pressure.map(Input::AirPressure),
        needed.spring_force.map(Input::SpringForce),
    ]
    .into_iter()
    .flatten()
    .collect()
}

fn close(actual: f64, expected: f64) -> bool {
    (actual - expected).abs() <= RELATIVE * expected.abs()
}

proptest! {
    /// What is needed for a clamp force gives that clamp force, with all that goes along with it.
    #[test]
    fn forward_undoes_inverse(chain in chain(), clamp in 1e3..1e5_f64, faces in 1..4_u32) {
        let needed = chain.needed(Force::from_si(clamp), faces);
        let inputs = inputs(&needed);
        prop_assert!(!inputs.is_empty());
        for input in inputs {
            let found = chain.press(input, 1.0, faces);
            // The spring's wear is taken off and put on again: its own size counts, not the rest.
            let scale = found.highest_clamp_force.si();
            prop_assert!((found.clamp_force.si() - clamp).abs() <= RELATIVE * scale, "{input:?}: {found:?}");
            for (found, needed) in [(found.line_pressure, needed.line_pressure), (found.release_pressure, needed.release_pressure)] {
                prop_assert!(found.zip(needed).is_none_or(|(found, needed)| close(found.si(), needed.si())));
            }
            let volumes = found.fluid_volume.zip(needed.fluid_volume);
            prop_assert!(volumes.is_none_or(|(found, needed)| close(found.si(), needed.si())));
            prop_assert!(close(found.highest_clamp_force.si(), needed.highest_clamp_force.si()));
        }
    }

    /// A share of the operator's force does what that force alone would do.
    #[test]
    fn a_share_of_the_force_is_a_smaller_force(chain in prop_oneof![hydraulic(), cable()], force in 1.0..1e4_f64, share in 0.01..1.0_f64) {
        let shared = chain.press(Input::OperatorForce(Force::from_si(force)), share, 2);
        let alone = chain.press(Input::OperatorForce(Force::from_si(force * share)), 1.0, 2);
        let scale = alone.clamp_force.si().max(1.0);
        prop_assert!((shared.clamp_force.si() - alone.clamp_force.si()).abs() <= 1e-10 * scale);
    }

    /// More pressing never presses less, and never below zero.
    #[test]
    fn more_input_never_presses_less(chain in chain(), amount in 0.0..1e6_f64, more in 0.0..1e6_f64) {
        for of in [
            |value| Input::LinePressure(Pressure::from_si(value)),
            |value| Input::OperatorForce(Force::from_si(value)),
            |value| Input::AirPressure(Pressure::from_si(value)),
            |value| Input::SpringForce(Force::from_si(value)),
        ] {
            let less = chain.press(of(amount), 1.0, 2);
            let rather = chain.press(of(amount + more), 1.0, 2);
            prop_assert!(less.clamp_force.si() >= 0.0 && rather.clamp_force >= less.clamp_force);
            prop_assert!(less.highest_clamp_force >= less.clamp_force);
        }
    }
}
