//! The delays between the wish to stop and full torque.

use serde::Deserialize;
use utoipa::ToSchema;

use crate::api::measure::Time;
use crate::api::parse::{At, Reader};
use crate::calc::motion::Delays;

/// Delays between the wish to stop and full torque; each 0 if left out.
#[derive(Debug, Clone, Copy, Default, PartialEq, Deserialize, ToSchema)]
#[serde(deny_unknown_fields)]
pub struct Response {
    /// Until the control is touched; the speed is held.
    #[schema(nullable = false)]
    pub reaction_time: Option<Time>,
    /// From the control to the first torque. The motor drive is off, but gravity, driving torque and drive force act.
    #[schema(nullable = false)]
    pub dead_time: Option<Time>,
    /// While the torque rises, linearly.
    #[schema(nullable = false)]
    pub build_up_time: Option<Time>,
}

impl Response {
    /// The delays that are meant.
    pub fn read(given: Option<&Self>, at: &At<'_>, reader: &mut Reader) -> Option<Delays> {
        let given = given.copied().unwrap_or_default();
        let mut time = |member: &str, time: Option<Time>| {
            reader.or_default(&at.member(member), time.as_ref(), 0.0, "s")
        };
        let reaction = time("reaction_time", given.reaction_time);
        let dead = time("dead_time", given.dead_time);
        let build_up = time("build_up_time", given.build_up_time);
        reader.take(at, Delays::new(reaction, dead, build_up))
    }
}
