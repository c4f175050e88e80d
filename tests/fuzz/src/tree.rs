//! JSON as it is written: members may repeat, and a leaf is any text. What the mutator works on.

use std::fmt::{self, Write as _};

use serde::Deserialize;
use serde::de::{Deserializer, MapAccess, Visitor};
use serde_json::value::RawValue;

/// A part of a document.
#[derive(Debug, Clone)]
pub enum Node {
    /// A number, a text, `true`, `false`, `null`, or what a mutation has made of it.
    Leaf(String),
    List(Vec<Node>),
    Object(Vec<(String, Node)>),
}

/// The members of an object, in order, with repetitions.
struct Members(Vec<(String, Box<RawValue>)>);

impl<'de> Deserialize<'de> for Members {
    fn deserialize<D: Deserializer<'de>>(deserializer: D) -> Result<Self, D::Error> {
        struct InOrder;
        impl<'de> Visitor<'de> for InOrder {
            type Value = Members;
            fn expecting(&self, formatter: &mut fmt::Formatter<'_>) -> fmt::Result {
                formatter.write_str("an object")
            }
            fn visit_map<A: MapAccess<'de>>(self, mut map: A) -> Result<Members, A::Error> {
                let mut members = Vec::new();
                while let Some(member) = map.next_entry()? {
                    members.push(member);
                }
                Ok(Members(members))
            }
        }
        deserializer.deserialize_map(InOrder)
    }
}

impl Node {
    /// Reads a text; none if it is not JSON.
    pub fn read(text: &str) -> Option<Self> {
        match text.trim_start().chars().next()? {
            '{' => {
                let Members(members) = serde_json::from_str(text).ok()?;
                let members = members.into_iter();
                members
                    .map(|(name, raw)| Some((name, Self::read(raw.get())?)))
                    .collect::<Option<_>>()
                    .map(Self::Object)
            }
            '[' => {
                let items: Vec<Box<RawValue>> = serde_json::from_str(text).ok()?;
                items.iter().map(|raw| Self::read(raw.get())).collect::<Option<_>>().map(Self::List)
            }
            _ => serde_json::from_str::<&RawValue>(text)
                .ok()
                .map(|raw| Self::Leaf(raw.get().to_owned())),
        }
    }

    /// What a JSON value is.
    pub fn of(value: &serde_json::Value) -> Self {
        Self::read(&value.to_string()).unwrap_or_else(|| Self::Leaf("null".to_owned()))
    }

    /// A text, quoted.
    pub fn text(text: &str) -> Self {
        Self::Leaf(serde_json::Value::from(text).to_string())
    }

    pub fn write(&self, out: &mut String) {
        match self {
            Self::Leaf(text) => *out += text,
            Self::List(items) => {
                out.push('[');
                for (index, item) in items.iter().enumerate() {
                    out.push_str(if index > 0 { "," } else { "" });
                    item.write(out);
                }
                out.push(']');
            }
            Self::Object(members) => {
                out.push('{');
                for (index, (name, member)) in members.iter().enumerate() {
                    out.push_str(if index > 0 { "," } else { "" });
                    let _ = write!(out, "{}:", serde_json::Value::from(name.as_str()));
                    member.write(out);
                }
                out.push('}');
            }
        }
    }

    /// Whether an object in it names a member twice.
    pub fn repeats_a_member(&self) -> bool {
        match self {
            Self::Leaf(_) => false,
            Self::List(items) => items.iter().any(Self::repeats_a_member),
            Self::Object(members) => members.iter().enumerate().any(|(index, (name, member))| {
                members[..index].iter().any(|(earlier, _)| earlier == name)
                    || member.repeats_a_member()
            }),
        }
    }

    /// How many parts it has, itself included.
    pub fn count(&self) -> usize {
        1 + match self {
            Self::Leaf(_) => 0,
            Self::List(items) => items.iter().map(Self::count).sum(),
            Self::Object(members) => members.iter().map(|(_, member)| member.count()).sum(),
        }
    }

    /// Its part number `index`, in reading order, with the name of the member it belongs to.
    pub fn part<'a>(
        &'a mut self,
        index: &mut usize,
        name: &'a str,
    ) -> Option<(&'a str, &'a mut Self)> {
        if *index == 0 {
            return Some((name, self));
        }
        *index -= 1;
        match self {
            Self::Leaf(_) => None,
            Self::List(items) => items.iter_mut().find_map(|item| item.part(index, name)),
            Self::Object(members) => {
                members.iter_mut().find_map(|(name, member)| member.part(index, name))
            }
        }
    }

    /// Calls `visit` with every member in it.
    pub fn each_member(&self, visit: &mut impl FnMut(&str, &Self)) {
        match self {
            Self::Leaf(_) => {}
            Self::List(items) => items.iter().for_each(|item| item.each_member(visit)),
            Self::Object(members) => {
                for (name, member) in members {
                    visit(name, member);
                    member.each_member(visit);
                }
            }
        }
    }
}
