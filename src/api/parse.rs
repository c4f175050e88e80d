//! From wire values to physical ones: every fault with its place, every default on record.

use serde::Serialize;
use utoipa::openapi::RefOr;
use utoipa::openapi::schema::{ObjectBuilder, OneOfBuilder, Schema, Type};
use utoipa::{PartialSchema, ToSchema};

use super::measure::{Finite, Kind, Measure};
use super::pointer;
use super::problem::{ErrorItem, MOST_ERRORS, Problem};
use crate::calc::fault::{FaultCode, Faults};
use crate::calc::quantity::{Dimension, Si};
use crate::data::magnitude;

/// A place in a request. It is written down only when something is to be said about it.
#[derive(Debug, Clone, Copy)]
pub struct At<'a> {
    parent: Option<&'a At<'a>>,
    segment: Segment<'a>,
}

#[derive(Debug, Clone, Copy)]
enum Segment<'a> {
    Root,
    Member(&'a str),
    Index(usize),
}

impl At<'_> {
    /// The request itself.
    pub const ROOT: At<'static> = At { parent: None, segment: Segment::Root };

    /// A member of what is here.
    #[must_use]
    pub const fn member<'b>(&'b self, name: &'b str) -> At<'b> {
        At { parent: Some(self), segment: Segment::Member(name) }
    }

    /// An item of the list that is here.
    #[must_use]
    pub const fn index(&self, index: usize) -> At<'_> {
        At { parent: Some(self), segment: Segment::Index(index) }
    }

    /// The pointer, in fragment form.
    #[must_use]
    pub fn pointer(&self) -> String {
        self.below("")
    }

    /// The pointer of `path` below this place; its names are joined by `/`.
    #[must_use]
    pub fn below(&self, path: &str) -> String {
        let mut segments = Vec::new();
        self.collect(&mut segments);
        segments.extend(path.split('/').filter(|name| !name.is_empty()).map(str::to_owned));
        pointer::fragment(segments)
    }

    fn collect(&self, segments: &mut Vec<String>) {
        if let Some(parent) = self.parent {
            parent.collect(segments);
        }
        match self.segment {
            Segment::Root => {}
            Segment::Member(name) => segments.push(name.to_owned()),
            Segment::Index(index) => segments.push(index.to_string()),
        }
    }
}

/// A value that was not in the request.
#[derive(Debug, Clone, PartialEq, Serialize, ToSchema)]
pub struct RecordedDefault {
    /// The member that was left out.
    pub pointer: String,
    /// What was taken in its place.
    pub value: DefaultValue,
    /// Its unit, if it has one.
    #[serde(skip_serializing_if = "Option::is_none")]
    #[schema(nullable = false)]
    pub unit: Option<&'static str>,
}

/// A default: a number or a word.
#[derive(Debug, Clone, PartialEq, Serialize)]
#[serde(untagged)]
pub enum DefaultValue {
    /// A count.
    Count(u32),
    /// A number.
    Number(Finite),
    /// A word.
    Text(String),
}

impl PartialSchema for DefaultValue {
    fn schema() -> RefOr<Schema> {
        // A count is a number: told apart, it would match two of the variants.
        OneOfBuilder::new()
            .item(ObjectBuilder::new().schema_type(Type::Number))
            .item(ObjectBuilder::new().schema_type(Type::String))
            .description(Some("A default: a number or a word."))
            .into()
    }
}

impl ToSchema for DefaultValue {}

/// Reads a request. Faults do not stop it: they are collected, and the values read on are of no use then.
#[derive(Debug, Default)]
pub struct Reader {
    faults: Vec<ErrorItem>,
    total: usize,
    defaults: Vec<RecordedDefault>,
}

impl Reader {
    /// Starts without faults and defaults.
    #[must_use]
    pub fn new() -> Self {
        Self::default()
    }

    /// The quantity that is meant. One beyond its documented magnitude is a fault.
    pub fn quantity<K: Kind>(&mut self, at: &At<'_>, measure: &Measure<K>) -> K::Quantity {
        let quantity = measure.quantity();
        let accepted = Measure::<K>::accepted();
        if K::DIMENSION == Dimension::Temperature && quantity.si() < 0.0 {
            self.fault(at, FaultCode::OutOfRange, "must not lie below absolute zero");
        } else if !accepted.contains(quantity.si()) {
            self.fault(at, FaultCode::OutOfRange, format!("must be {}", accepted.text()));
        }
        quantity
    }

    /// The quantity that is meant, if one is given.
    pub fn optional<K: Kind>(
        &mut self,
        at: &At<'_>,
        measure: Option<&Measure<K>>,
    ) -> Option<K::Quantity> {
        measure.map(|measure| self.quantity(at, measure))
    }

    /// The quantity that is meant, or `value` of the unit `symbol`, which goes on record.
    pub fn or_default<K: Kind>(
        &mut self,
        at: &At<'_>,
        measure: Option<&Measure<K>>,
        value: f64,
        symbol: &'static str,
    ) -> K::Quantity {
        if let Some(measure) = measure {
            return self.quantity(at, measure);
        }
        self.record(at, DefaultValue::Number(Finite(value)), Some(symbol));
        Measure::<K>::new(value, symbol)
            .map_or(K::Quantity::from_si(value), |measure| measure.quantity())
    }

    /// A pure ratio, or its default, which goes on record.
    pub fn ratio(&mut self, at: &At<'_>, given: Option<f64>, default: f64) -> f64 {
        let Some(ratio) = given else {
            self.record(at, DefaultValue::Number(Finite(default)), None);
            return default;
        };
        let accepted = magnitude::of(Dimension::Ratio);
        if !accepted.contains(ratio) {
            self.fault(at, FaultCode::OutOfRange, format!("must be {}", accepted.text()));
        }
        ratio
    }

    /// A count, or its default, which goes on record.
    pub fn count(&mut self, at: &At<'_>, given: Option<u32>, default: u32) -> u32 {
        given.unwrap_or_else(|| {
            self.record(at, DefaultValue::Count(default), None);
            default
        })
    }

    /// A word, or its default, which goes on record under its name on the wire.
    pub fn word<T>(&mut self, at: &At<'_>, given: Option<T>, default: T, name: &'static str) -> T {
        given.unwrap_or_else(|| {
            self.record(at, DefaultValue::Text(name.to_owned()), None);
            default
        })
    }

    /// Puts a default on record.
    pub fn record(&mut self, at: &At<'_>, value: DefaultValue, unit: Option<&'static str>) {
        self.defaults.push(RecordedDefault { pointer: at.pointer(), value, unit });
    }

    /// Puts a default on record that a calculation found out, in coherent SI units of `K`.
    pub fn record_si<K: Kind>(&mut self, pointer: String, measure: &Measure<K>) {
        let value = DefaultValue::Number(Finite(measure.value()));
        self.defaults.push(RecordedDefault { pointer, value, unit: Some(measure.unit().symbol) });
    }

    /// Adds a fault, unless its place has one already.
    pub fn fault(&mut self, at: &At<'_>, code: FaultCode, detail: impl Into<String>) {
        self.fault_at(at.pointer(), code, detail.into());
    }

    fn fault_at(&mut self, pointer: String, code: FaultCode, detail: String) {
        if self.faults.iter().any(|known| known.pointer == pointer) {
            return;
        }
        self.total += 1;
        if self.faults.len() < MOST_ERRORS {
            self.faults.push(ErrorItem { pointer, code: code.as_str(), detail });
        }
    }

    /// What was made here, or its faults.
    pub fn take<T>(&mut self, at: &At<'_>, made: Result<T, Faults>) -> Option<T> {
        match made {
            Ok(made) => Some(made),
            Err(faults) => {
                for fault in faults.as_slice() {
                    self.fault_at(at.below(&fault.member), fault.code, fault.detail.clone());
                }
                None
            }
        }
    }

    /// Refuses a member that is given but has no meaning here.
    pub fn not_applicable(&mut self, at: &At<'_>, is_given: bool, detail: &str) {
        if is_given {
            self.fault(at, FaultCode::NotApplicable, detail);
        }
    }

    /// A member that is required here although the schema leaves it open.
    pub fn required<T>(&mut self, at: &At<'_>, given: Option<T>, detail: &str) -> Option<T> {
        if given.is_none() {
            self.fault(at, FaultCode::Missing, detail);
        }
        given
    }

    /// What was read, with the defaults taken.
    ///
    /// # Errors
    /// 422 with every fault.
    pub fn finish<T>(self, read: Option<T>) -> Result<(T, Vec<RecordedDefault>), Problem> {
        match read {
            Some(read) if self.total == 0 => Ok((read, self.defaults)),
            _ => Err(Problem::invalid(self.faults, self.total)),
        }
    }
}
