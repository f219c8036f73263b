//! One type of a record: its fields with those of its grade laid over them, and the defaults.

use std::borrow::Cow;
use std::collections::BTreeMap;

use crate::quantity::{Decimal, Exact, Quantity, Range};

use super::model::{Kind, PriceList};
use super::schema::{Fallback, Field, FieldForm, field_named};
use super::value::{Value, ValueSet};
use super::yaml::Spot;

/// A field as it was met.
#[derive(Debug)]
pub(super) struct Entry {
    /// `None` when it was faulty.
    pub(super) value: Option<Value>,
    pub(super) at: Spot,
    pub(super) path: String,
}

/// The fields of a record or of one grade.
pub(super) type Entries = BTreeMap<&'static str, Entry>;

/// One grade as it was met.
#[derive(Debug)]
pub(super) struct Grade {
    pub(super) name: String,
    pub(super) at: Spot,
    /// `grades[1]`.
    pub(super) path: String,
    pub(super) entries: Entries,
}

/// The fields of one type.
#[derive(Clone, Copy)]
pub(super) struct View<'a> {
    pub(super) kind: Kind,
    pub(super) shared: &'a Entries,
    pub(super) grade: Option<&'a Grade>,
}

impl<'a> View<'a> {
    /// The field as written, the grade's before the record's.
    pub(super) fn entry(&self, name: &str) -> Option<&'a Entry> {
        let own = self.grade.and_then(|grade| grade.entries.get(name));
        own.or_else(|| self.shared.get(name))
    }

    /// Whether the field is written in the grade.
    pub(super) fn in_grade(&self, name: &str) -> bool {
        self.grade.is_some_and(|grade| grade.entries.contains_key(name))
    }

    /// The value as written, else the default. `None` when not stated, or faulty.
    pub(super) fn value(&self, name: &str) -> Option<Cow<'a, Value>> {
        if let Some(entry) = self.entry(name) {
            return entry.value.as_ref().map(Cow::Borrowed);
        }
        let field = field_named(self.kind, name)?;
        match field.fallback {
            Fallback::Required | Fallback::Unstated => None,
            Fallback::SameAs(other) => self.value(other),
            Fallback::Text(text) => default_value(field, text).map(Cow::Owned),
            Fallback::Range(low, high) => default_range(field, low, high).map(Cow::Owned),
        }
    }

    pub(super) fn decimal(&self, name: &str) -> Option<Decimal> {
        match *self.value(name)? {
            Value::Figure(figure) => Some(figure),
            _ => None,
        }
    }

    pub(super) fn exact<Q: Quantity>(&self, name: &str) -> Option<Exact<Q>> {
        debug_assert!(self.has_dimension::<Q>(name), "{name} is another quantity");
        self.decimal(name).map(Exact::from_decimal)
    }

    pub(super) fn figure<Q: Quantity>(&self, name: &str) -> Option<Q> {
        self.exact::<Q>(name).map(Exact::value)
    }

    pub(super) fn range<Q: Quantity + PartialOrd>(&self, name: &str) -> Option<Range<Q>> {
        debug_assert!(self.has_dimension::<Q>(name), "{name} is another quantity");
        match *self.value(name)? {
            Value::Range(low, high) => Range::new(Q::from_decimal(low), Q::from_decimal(high)),
            _ => None,
        }
    }

    fn has_dimension<Q: Quantity>(&self, name: &str) -> bool {
        match field_named(self.kind, name).map(|field| field.form) {
            Some(FieldForm::Figure(dimension, _) | FieldForm::Range(dimension, _)) => {
                dimension.form.name == Q::FORM.name
            }
            _ => false,
        }
    }

    pub(super) fn text(&self, name: &str) -> Option<String> {
        match self.value(name)?.into_owned() {
            Value::Text(text) => Some(text),
            _ => None,
        }
    }

    pub(super) fn word(&self, name: &str) -> Option<&'static str> {
        match *self.value(name)? {
            Value::Word(word) => Some(word),
            _ => None,
        }
    }

    pub(super) fn date(&self, name: &str) -> Option<jiff::civil::Date> {
        match *self.value(name)? {
            Value::Date(date) => Some(date),
            _ => None,
        }
    }

    pub(super) fn count(&self, name: &str) -> Option<u64> {
        match *self.value(name)? {
            Value::Count(count) => Some(count),
            _ => None,
        }
    }

    pub(super) fn price(&self) -> Option<PriceList> {
        match self.value("price")?.into_owned() {
            Value::Price(price) => Some(price),
            _ => None,
        }
    }

    pub(super) fn values(&self) -> Option<ValueSet> {
        match self.value("values")?.into_owned() {
            Value::Values(values) => Some(values),
            _ => None,
        }
    }

    pub(super) fn drop(&self) -> Option<Vec<(Decimal, Decimal)>> {
        match self.value("drop")?.into_owned() {
            Value::Drop(points) => Some(points),
            _ => None,
        }
    }
}

fn default_value(field: &Field, text: &'static str) -> Option<Value> {
    match field.form {
        FieldForm::Word(_) => Some(Value::Word(text)),
        FieldForm::Count { .. } => text.parse().ok().map(Value::Count),
        FieldForm::Figure(dimension, sign) => (dimension.parse)(text, sign).ok().map(Value::Figure),
        _ => None,
    }
}

fn default_range(field: &Field, low: &str, high: &str) -> Option<Value> {
    let FieldForm::Range(dimension, sign) = field.form else { return None };
    let end = |text| (dimension.parse)(text, sign).ok();
    Some(Value::Range(end(low)?, end(high)?))
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::catalog::schema::fields;

    #[test]
    fn every_default_in_the_tables_can_be_read() {
        let shared = Entries::new();
        for kind in Kind::ALL {
            let view = View { kind, shared: &shared, grade: None };
            for field in fields(kind) {
                let has = !matches!(field.fallback, Fallback::Required | Fallback::Unstated);
                assert_eq!(view.value(field.name).is_some(), has, "{} {}", kind.word(), field.name);
            }
        }
    }
}
