//! What is wrong with an input: every fault has a place, a code and a sentence.

use crate::calc::quantity::Si;

/// The closed set of reasons for which an input has no physical meaning.
macro_rules! fault_codes {
    ($($(#[$doc:meta])* $name:ident = $code:literal;)*) => {
        /// Why a value was refused.
        #[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
        pub enum FaultCode { $($(#[$doc])* $name,)* }

        impl FaultCode {
            /// Every code, in the order of this table.
            pub const ALL: &'static [Self] = &[$(Self::$name,)*];

            /// The code that programs read.
            #[must_use]
            pub const fn as_str(self) -> &'static str {
                match self { $(Self::$name => $code,)* }
            }
        }
    };
}

fault_codes! {
    /// A value must lie above zero.
    NotPositive = "not_positive";
    /// A value must not lie below zero.
    Negative = "negative";
    /// A value lies outside the range that has a meaning here, or a result overflows.
    OutOfRange = "out_of_range";
    /// An outer radius must exceed the inner one.
    NotAboveInnerRadius = "not_above_inner_radius";
    /// A round pad must stay clear of the disc axis.
    PadReachesAxis = "pad_reaches_axis";
    /// An outline crosses or touches itself.
    OutlineSelfIntersects = "outline_self_intersects";
    /// An outline encloses no area.
    OutlineWithoutArea = "outline_without_area";
    /// The disc axis lies inside an outline or on its edge.
    OutlineContainsAxis = "outline_contains_axis";
    /// A list has too few or too many members.
    WrongCount = "wrong_count";
    /// A pad reaches beyond its disc.
    PadBeyondDisc = "pad_beyond_disc";
    /// Lower, nominal and higher bound are not in order.
    NotInOrder = "not_in_order";
    /// A required member, or one of several of which one is required, is missing.
    Missing = "missing";
    /// Members that exclude each other were both given.
    Conflict = "conflict";
    /// A member has no meaning in this place.
    NotApplicable = "not_applicable";
    /// An identifier is not in the catalog.
    UnknownId = "unknown_id";
    /// The final speed must lie below the initial speed.
    NotBelowInitialSpeed = "not_below_initial_speed";
    /// Speed falls only in a stop.
    SpeedNotContinuous = "speed_not_continuous";
    /// Members that must agree differ.
    Differs = "differs";
    /// The friction code letter has no two bounds.
    UnboundedFrictionCode = "unbounded_friction_code";
}

/// One fault of an input.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Fault {
    /// Where: member names below the value under construction, joined by `/`; empty for the value itself.
    pub member: String,
    /// Why, for programs.
    pub code: FaultCode,
    /// Why, for people: lower case, names the limit.
    pub detail: String,
}

/// Collects faults, so that a caller sees all of them at once.
#[derive(Debug, Clone, Default, PartialEq, Eq)]
pub struct Faults(Vec<Fault>);

impl Faults {
    /// Starts without faults.
    #[must_use]
    pub const fn new() -> Self {
        Self(Vec::new())
    }

    /// Adds a fault.
    pub fn add(&mut self, member: impl Into<String>, code: FaultCode, detail: impl Into<String>) {
        self.0.push(Fault { member: member.into(), code, detail: detail.into() });
    }

    /// Adds a fault unless `holds`.
    pub fn require(&mut self, holds: bool, member: &str, code: FaultCode, detail: &str) {
        if !holds {
            self.add(member, code, detail);
        }
    }

    /// Demands a value above zero; NaN is refused.
    pub fn positive(&mut self, member: &str, value: impl Si) {
        self.require(value.si() > 0.0, member, FaultCode::NotPositive, "must be above 0");
    }

    /// Demands a value of zero or more; NaN is refused.
    pub fn not_negative(&mut self, member: &str, value: impl Si) {
        self.require(value.si() >= 0.0, member, FaultCode::Negative, "must not be below 0");
    }

    /// Demands a ratio in (0, 1].
    pub fn efficiency(&mut self, member: &str, value: f64) {
        let holds = value > 0.0 && value <= 1.0;
        self.require(holds, member, FaultCode::OutOfRange, "must lie above 0 and not above 1");
    }

    /// Takes over the faults of a part, found at `member`.
    pub fn part<T>(&mut self, member: &str, part: Result<T, Self>) -> Option<T> {
        match part {
            Ok(value) => Some(value),
            Err(faults) => {
                for fault in faults.0 {
                    let below = if fault.member.is_empty() || member.is_empty() { "" } else { "/" };
                    self.add(format!("{member}{below}{}", fault.member), fault.code, fault.detail);
                }
                None
            }
        }
    }

    /// The same faults, those at `from` placed at `to`: where another member says the same thing.
    #[must_use]
    pub fn moved(mut self, from: &str, to: &str) -> Self {
        for fault in self.0.iter_mut().filter(|fault| fault.member == from) {
            to.clone_into(&mut fault.member);
        }
        self
    }

    /// Whether nothing was found.
    #[must_use]
    pub const fn is_empty(&self) -> bool {
        self.0.is_empty()
    }

    /// The faults, in the order in which they were found.
    #[must_use]
    pub fn as_slice(&self) -> &[Fault] {
        &self.0
    }

    /// `value` if nothing was found.
    ///
    /// # Errors
    /// The faults that were found.
    pub fn into_result<T>(self, value: T) -> Result<T, Self> {
        if self.0.is_empty() { Ok(value) } else { Err(self) }
    }
}
