//! The data sheet of an equation: what an answer's `methods` refer to, and what documents the code.

/// How a fact was found.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Hash)]
pub enum Provenance {
    /// Read in a copy of the source.
    Seen,
    /// Entered from memory of the named source.
    Memory,
}

impl Provenance {
    /// The name on the wire.
    #[must_use]
    pub const fn as_str(self) -> &'static str {
        match self {
            Self::Seen => "seen",
            Self::Memory => "memory",
        }
    }

    /// The provenance with this name.
    #[must_use]
    pub fn named(name: &str) -> Option<Self> {
        [Self::Seen, Self::Memory].into_iter().find(|known| known.as_str() == name)
    }
}

/// A symbol of an equation.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct Symbol {
    /// As in the equation.
    pub symbol: &'static str,
    /// What it stands for.
    pub meaning: &'static str,
    /// Coherent SI unit, `1` for a ratio.
    pub unit: &'static str,
}

/// The data sheet of one equation or procedure.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct Method {
    /// Identifier, as in `record.methods`.
    pub id: &'static str,
    /// What it finds.
    pub name: &'static str,
    /// The equation, in plain characters.
    pub equation: &'static str,
    /// Its symbols.
    pub symbols: &'static [Symbol],
    /// Where it holds.
    pub valid: &'static str,
    /// How exact it is.
    pub accuracy: &'static str,
    /// Who published it.
    pub source: &'static str,
    /// Whether the source was read or remembered.
    pub provenance: Provenance,
    /// A worked value, by hand or from the source.
    pub worked: &'static str,
}

/// Declares data sheets; the same words become the documentation of the constant.
#[macro_export]
macro_rules! method_sheet {
    ($($name:ident {
        id: $id:literal,
        name: $title:literal,
        equation: $equation:literal,
        symbols: [$(($symbol:literal, $meaning:literal, $unit:literal)),* $(,)?],
        valid: $valid:literal,
        accuracy: $accuracy:literal,
        source: $source:literal,
        provenance: $provenance:ident,
        worked: $worked:literal $(,)?
    })*) => {$(
        #[doc = $title]
        #[doc = concat!("\n```text\n", $equation, "\n```\n\n| symbol | meaning | SI unit |\n|---|---|---|")]
        $(#[doc = concat!("| ", $symbol, " | ", $meaning, " | ", $unit, " |")])*
        #[doc = concat!("\n# Validity\n", $valid, "\n\n# Accuracy\n", $accuracy, "\n\n# Source\n", $source, "\n\n# Worked value\n", $worked)]
        pub static $name: $crate::calc::method::Method = $crate::calc::method::Method {
            id: $id,
            name: $title,
            equation: $equation,
            symbols: &[$($crate::calc::method::Symbol { symbol: $symbol, meaning: $meaning, unit: $unit }),*],
            valid: $valid,
            accuracy: $accuracy,
            source: $source,
            provenance: $crate::calc::method::Provenance::$provenance,
            worked: $worked,
        };
    )*};
}
