//! How a measure is described.

use std::borrow::Cow;

use utoipa::openapi::RefOr;
use utoipa::openapi::extensions::Extensions;
use utoipa::openapi::schema::{AdditionalProperties, ObjectBuilder, Schema, Type};
use utoipa::{PartialSchema, ToSchema};

use super::{Kind, Measure};
use crate::data::units;

impl<K: Kind> PartialSchema for Measure<K> {
    fn schema() -> RefOr<Schema> {
        let units = units::of(K::DIMENSION);
        let variants: Vec<&str> = units.iter().map(|unit| unit.variant).collect();
        let unit = ObjectBuilder::new()
            .schema_type(Type::String)
            .enum_values(Some(units.iter().map(|unit| unit.symbol)))
            .description(Some("The unit's plain symbol. Its UCUM code and its UN/ECE Recommendation 20 common code are accepted, too; `GET /v1/units` lists them."))
            .extensions(Some(Extensions::builder().add("x-enum-varnames", variants).build()));
        let value =
            ObjectBuilder::new().schema_type(Type::Number).description(Some("How many units."));
        ObjectBuilder::new()
            .description(Some(description::<K>()))
            .property("value", value)
            .property("unit", unit)
            .required("value")
            .required("unit")
            .additional_properties(Some(AdditionalProperties::FreeForm(false)))
            .into()
    }
}

fn description<K: Kind>() -> String {
    let units = units::of(K::DIMENSION).iter();
    let units: Vec<String> = units.map(|unit| format!("`{}` {}", unit.symbol, unit.name)).collect();
    let accepted = Measure::<K>::accepted().text();
    format!("{} Units: {}. Accepted: {accepted}.", K::MEANING, units.join(", "))
}

impl<K: Kind> ToSchema for Measure<K> {
    fn name() -> Cow<'static, str> {
        Cow::Borrowed(K::NAME)
    }
}
