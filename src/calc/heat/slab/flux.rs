//! A heat flux that runs straight between nodes in time.

use crate::calc::fault::{FaultCode, Faults};
use crate::calc::quantity::{EnergyFlux, PowerFlux, Si, Time};

/// A node: time in s, flux in W/m².
pub(super) type Node = (f64, f64);

/// A heat flux that runs straight between nodes, zero before the first and after the last.
///
/// Two nodes of the same time make a jump. Proof that the times start at 0 and do not fall, that the
/// flux lasts, and that it is finite and never negative.
#[derive(Debug, Clone, PartialEq)]
pub struct PiecewiseLinearFlux {
    nodes: Vec<Node>,
    changes: Vec<Change>,
}

impl PiecewiseLinearFlux {
    /// The flux through `nodes`.
    ///
    /// # Errors
    /// Fewer than two nodes, times that do not start at 0, fall, or do not last; a flux that is
    /// negative or not finite.
    pub fn new(nodes: &[(Time, PowerFlux)]) -> Result<Self, Faults> {
        let nodes: Vec<Node> = nodes.iter().map(|(time, flux)| (time.si(), flux.si())).collect();
        let mut faults = Faults::new();
        let detail = "needs at least two nodes";
        faults.require(nodes.len() >= 2, "", FaultCode::WrongCount, detail);
        let start = nodes.first().map_or(0.0, |node| node.0);
        let end = nodes.last().map_or(0.0, |node| node.0);
        let lasts = start.abs() <= 0.0 && end > 0.0 && end < f64::INFINITY;
        let in_order = nodes.iter().zip(nodes.iter().skip(1)).all(|(one, next)| one.0 <= next.0);
        let detail = "times must start at 0, must not fall, and must end above 0";
        faults.require(lasts && in_order, "", FaultCode::NotInOrder, detail);
        let bounded = nodes.iter().all(|node| node.1 >= 0.0 && node.1 < f64::INFINITY);
        let detail = "a flux must be finite and not below 0";
        faults.require(bounded, "", FaultCode::OutOfRange, detail);
        let changes = changes(&nodes);
        faults.into_result(Self { nodes, changes })
    }

    /// When the flux ends.
    #[must_use]
    pub fn end(&self) -> Time {
        Time::from_si(self.nodes.last().map_or(0.0, |node| node.0))
    }

    /// The heat per area that has entered until `time`.
    #[must_use]
    pub fn energy_until(&self, time: Time) -> EnergyFlux {
        EnergyFlux::from_si(self.segments().map(|segment| segment.energy_until(time.si())).sum())
    }

    /// The straight parts that last, in order.
    pub(super) fn segments(&self) -> impl Iterator<Item = Segment> + '_ {
        segments(&self.nodes)
    }

    /// Where the flux jumps or changes its slope, in order; the last is its end.
    pub(super) fn changes(&self) -> &[Change] {
        &self.changes
    }
}

fn segments(nodes: &[Node]) -> impl Iterator<Item = Segment> + '_ {
    let pairs = nodes.iter().zip(nodes.iter().skip(1));
    pairs.map(|(&from, &to)| Segment { from, to }).filter(|segment| segment.to.0 > segment.from.0)
}

fn changes(nodes: &[Node]) -> Vec<Change> {
    let mut changes: Vec<Change> = Vec::with_capacity(nodes.len());
    let (mut end, mut flux, mut slope) = (0.0, 0.0, 0.0);
    let heat = |last: Option<&Change>, until| last.map_or(0.0, |last| last.heat_until(until));
    for segment in segments(nodes) {
        changes.push(Change {
            time: segment.from.0,
            step: segment.from.1 - flux,
            bend: segment.slope() - slope,
            flux: segment.from.1,
            slope: segment.slope(),
            heat: heat(changes.last(), segment.from.0),
        });
        ((end, flux), slope) = (segment.to, segment.slope());
    }
    let heat = heat(changes.last(), end);
    changes.push(Change { time: end, step: -flux, bend: -slope, flux: 0.0, slope: 0.0, heat });
    changes
}

/// A straight part of a flux.
#[derive(Debug, Clone, Copy)]
pub(super) struct Segment {
    pub(super) from: Node,
    pub(super) to: Node,
}

impl Segment {
    fn slope(&self) -> f64 {
        (self.to.1 - self.from.1) / (self.to.0 - self.from.0)
    }

    fn energy_until(&self, time: f64) -> f64 {
        let spent = time.min(self.to.0) - self.from.0;
        if spent > 0.0 {
            let share = spent / (self.to.0 - self.from.0);
            spent * (self.from.1 + share * (self.to.1 - self.from.1) / 2.0)
        } else {
            0.0
        }
    }
}

/// A jump of the flux together with a bend, and what the flux is from then on.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(super) struct Change {
    /// When, s.
    pub(super) time: f64,
    /// Jump, W/m².
    pub(super) step: f64,
    /// Change of the slope, W/(m²·s).
    pub(super) bend: f64,
    /// Flux just after, W/m².
    pub(super) flux: f64,
    /// Slope just after, W/(m²·s).
    pub(super) slope: f64,
    /// Heat that has entered before, J/m².
    pub(super) heat: f64,
}

impl Change {
    /// Heat that has entered until `time`, no later than the next change, J/m².
    pub(super) fn heat_until(&self, time: f64) -> f64 {
        let spent = time - self.time;
        self.heat + spent * (self.flux + self.slope * spent / 2.0)
    }

    /// Flux at `time`, no later than the next change, W/m².
    pub(super) fn flux_at(&self, time: f64) -> f64 {
        self.flux + self.slope * (time - self.time)
    }
}
