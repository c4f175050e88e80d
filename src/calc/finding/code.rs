//! The closed sets of codes that programs read.

macro_rules! codes {
    ($(#[$meta:meta])* $set:ident { $($(#[$doc:meta])* $name:ident = $code:literal;)* }) => {
        $(#[$meta])*
        #[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
        pub enum $set { $($(#[$doc])* $name,)* }

        impl $set {
            /// Every code, in the order of the table.
            pub const ALL: &'static [Self] = &[$(Self::$name,)*];

            /// The code that programs read.
            #[must_use]
            pub const fn as_str(self) -> &'static str {
                match self { $(Self::$name => $code,)* }
            }
        }
    };
}

codes! {
    /// A comparison of a result with a limit.
    CheckCode {
        /// The brake stops the machine: driving against available effort.
        Stops = "stops";
        /// Distance of a stop.
        StoppingDistance = "stopping_distance";
        /// Time of a stop.
        StoppingTime = "stopping_time";
        /// Mean deceleration from the first torque on.
        MeanDeceleration = "mean_deceleration";
        /// Mean fully developed deceleration.
        MeanFullyDevelopedDeceleration = "mean_fully_developed_deceleration";
        /// Peak deceleration, at least.
        PeakDecelerationMinimum = "peak_deceleration_minimum";
        /// Peak deceleration, at most.
        PeakDeceleration = "peak_deceleration";
        /// Highest force of all tires on the ground over the weight.
        BrakingRatio = "braking_ratio";
        /// Peak lining pressure at the clamp force that acts.
        PadPeakPressure = "pad_peak_pressure";
        /// Highest rubbing speed at the pad's outer radius.
        RubbingSpeed = "rubbing_speed";
        /// Mean pressure times rubbing speed at the effective radius.
        PressureVelocity = "pressure_velocity";
        /// Highest friction power per pad area.
        PowerFlux = "power_flux";
        /// Friction energy per pad area and stop.
        EnergyFlux = "energy_flux";
        /// Hydraulic pressure at the caliper.
        LinePressure = "line_pressure";
        /// Force of the operator on the control.
        OperatorForce = "operator_force";
        /// Travel of the control.
        OperatorStroke = "operator_stroke";
        /// Pressure that opens a spring-applied brake.
        ReleasePressure = "release_pressure";
        /// Air pressure at the chamber.
        AirPressure = "air_pressure";
        /// What an axle's brakes demand of its tires, where no wheel may lock.
        Adhesion = "adhesion";
        /// Ground force against that which lifts the rear wheel.
        RearWheelLift = "rear_wheel_lift";
        /// Which axle reaches its adhesion first.
        AxleLockOrder = "axle_lock_order";
        /// Highest bulk temperature of the disc.
        DiscBulkTemperature = "disc_bulk_temperature";
        /// Highest temperature of the rubbed surface.
        SurfaceTemperature = "surface_temperature";
        /// Torque at rest against what it must hold.
        HoldingTorque = "holding_torque";
        /// What the tires of the braked axles hold at rest.
        HoldingAdhesion = "holding_adhesion";
        /// Stops until the usable pad is worn off.
        PadLife = "pad_life";
    }
}

codes! {
    /// A remark that is not a comparison with a limit.
    Notice {
        /// One friction value serves as low, nominal and high.
        FrictionRangeNotGiven = "friction_range_not_given";
        /// The friction coefficient is unusually high.
        FrictionUnusuallyHigh = "friction_unusually_high";
        /// The friction code identifies a class; it is not a rating.
        FrictionCodeIsNotARating = "friction_code_is_not_a_rating";
        /// A value comes from memory of its source.
        ValueFromMemory = "value_from_memory";
        /// The pad is unusually wide.
        PadUnusuallyWide = "pad_unusually_wide";
        /// An actuation chain without losses.
        LosslessActuation = "lossless_actuation";
        /// A spring brake whose force loss by pad wear is not known.
        SpringWearNotConsidered = "spring_wear_not_considered";
        /// The chain given cannot give the demanded clamp force.
        DemandNotReached = "demand_not_reached";
        /// Only brakes were considered, not what the tires carry.
        AdhesionNotConsidered = "adhesion_not_considered";
        /// Axle loads are unknown: the tires' limit was taken for the whole vehicle.
        LoadTransferNotConsidered = "load_transfer_not_considered";
        /// The adhesion is unusually high.
        AdhesionUnusuallyHigh = "adhesion_unusually_high";
        /// Braking at the limit of adhesion: a sliding wheel brakes less.
        SlidingFrictionLower = "sliding_friction_lower";
        /// A wheel may lock.
        WheelLockPossible = "wheel_lock_possible";
        /// The rear axle reaches its adhesion first.
        RearAxleLocksFirst = "rear_axle_locks_first";
        /// The rear wheel is about to lift.
        RearWheelLift = "rear_wheel_lift";
        /// The asked deceleration is beyond the brakes or the tires.
        DecelerationNotReached = "deceleration_not_reached";
        /// The machine runs back before the brake holds it.
        RunsBackBeforeBrake = "runs_back_before_brake";
        /// An unusually short stop.
        StopUnusuallyShort = "stop_unusually_short";
        /// An unusually high deceleration.
        DecelerationUnusuallyHigh = "deceleration_unusually_high";
        /// No disc was given: no temperatures.
        DiscNotGiven = "disc_not_given";
        /// The mass of the rubbed ring of a ventilated disc is not given: no temperatures.
        DiscMassNotGiven = "disc_mass_not_given";
        /// The lining's thermal properties are not given: all heat was taken to enter the disc.
        HeatPartitionNotGiven = "heat_partition_not_given";
        /// The coefficient of cooling comes from a correlation.
        CoolingEstimated = "cooling_estimated";
        /// The cooling of a disc is not given: no temperatures of repeated stops.
        CoolingNotGiven = "cooling_not_given";
        /// Repeated stops heat a disc without end.
        NoSteadyState = "no_steady_state";
        /// No fade points: friction was taken not to change with temperature.
        FadeNotGiven = "fade_not_given";
        /// An event of a duty cannot be done.
        DutyNotCompleted = "duty_not_completed";
        /// A waiver that changed nothing: its check is not among those that could not be assessed.
        WithoutEffect = "without_effect";
    }
}

/// The code of a warning: that of a check, or a notice.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub enum WarningCode {
    /// A limit is reached or nearly so.
    Check(CheckCode),
    /// A remark.
    Notice(Notice),
}

impl WarningCode {
    /// The code that programs read.
    #[must_use]
    pub const fn as_str(self) -> &'static str {
        match self {
            Self::Check(code) => code.as_str(),
            Self::Notice(code) => code.as_str(),
        }
    }
}
