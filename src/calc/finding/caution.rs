//! Cautions that travel with an answer.

macro_rules! cautions {
    ($($(#[$doc:meta])* $name:ident = $code:literal, $text:literal;)*) => {
        /// A caution, with its words.
        #[derive(Debug, Clone, Copy, PartialEq, Eq, Hash, PartialOrd, Ord)]
        pub enum Caution { $($(#[$doc])* $name,)* }

        impl Caution {
            /// Every caution.
            pub const ALL: &'static [Self] = &[$(Self::$name,)*];

            /// The code that programs read.
            #[must_use]
            pub const fn code(self) -> &'static str {
                match self { $(Self::$name => $code,)* }
            }

            /// The words for people.
            #[must_use]
            pub const fn text(self) -> &'static str {
                match self { $(Self::$name => $text,)* }
            }
        }
    };
}

cautions! {
    /// A calculation is not a proof.
    ConfirmByTest = "confirm_by_test",
        "This is a calculation for selecting a brake, not a proof. Confirm it by test on the machine, with bedded pads, at the lowest friction to expect.";
    /// Local law decides.
    LocalCodes = "local_codes_decide",
        "Local codes and licensed practice decide what is allowed and what must be shown; they stand above this answer.";
    /// People depend on brakes.
    CompetentReview = "competent_review",
        "Brakes protect people. Have a competent engineer review the inputs, the assumptions and the result before anything is built or released.";
    /// States of the lining that are not covered.
    CleanDryBedded = "clean_dry_bedded",
        "The friction used is that of clean, dry, bedded linings. Water, oil, glazing and unbedded pads are not covered.";
    /// Dust.
    LiningDust = "lining_dust",
        "Do not breathe lining dust of any kind and do not blow it out; use suction made for it and wet cleaning.";
    /// Asbestos.
    Asbestos = "asbestos",
        "This lining contains asbestos, which is banned or restricted in most countries. It is listed only to assess old equipment. Do not machine it, do not blow out its dust, and follow the asbestos law of the place.";
    /// Remembered values.
    FromMemory = "values_from_memory",
        "Some equations or catalog values behind this answer were entered from memory of the source that they name and not re-read there: GET /v1/methods and the catalog mark them. Check them there before you rely on them.";
    /// A hanging load.
    SuspendedLoad = "suspended_load",
        "A suspended load needs a second, independent brake where codes say so. Keep people out from under it.";
    /// Heat.
    HotSurfaces = "hot_surfaces",
        "Disc, pads and caliper get hot enough to burn skin, and brake fluid may boil. Guard them, and check the fluid's boiling point and the seals.";
    /// Rules and test cycles.
    NotTheTest = "not_the_test",
        "A calculation does not replace the test that a rule or a test cycle prescribes; its own text decides.";
}

impl Caution {
    /// The cautions of every answer.
    pub const ALWAYS: &'static [Self] = &[
        Self::ConfirmByTest,
        Self::LocalCodes,
        Self::CompetentReview,
        Self::CleanDryBedded,
        Self::LiningDust,
    ];
}
