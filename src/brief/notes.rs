//! What was assumed, in the order it was needed.

use super::defaults::Default;
use crate::answer::Assumption;
use crate::bounds::Bound;
use crate::document::{Check, Leaf, LeafValue};
use crate::units::{Measure, parse};

/// What was assumed so far, each thing once.
#[derive(Debug, Clone, std::default::Default)]
pub(super) struct Notes(Vec<Assumption>);

impl Notes {
    /// Notes a value and where it is from.
    pub fn add(
        &mut self,
        name: impl Into<String>,
        value: impl Into<String>,
        from: impl Into<String>,
    ) {
        let note = Assumption {
            name: name.into(),
            value: value.into(),
            from: from.into(),
        };
        if !self.0.contains(&note) {
            self.0.push(note);
        }
    }

    /// Notes that a default was used.
    pub fn used(&mut self, default: &Default) {
        self.add(
            default.field,
            default.value,
            format!("default: {}", default.from),
        );
    }

    /// All of them.
    pub fn into_vec(self) -> Vec<Assumption> {
        self.0
    }

    /// A quantity of the brief within its bound, or its default, noted.
    pub fn quantity<M: Measure>(
        &mut self,
        check: &mut Check,
        leaf: &Option<Leaf<M>>,
        bound: &Bound,
        default: &Default,
    ) -> Option<M> {
        if leaf.is_some() {
            return check.within(leaf, bound);
        }
        self.used(default);
        parse(default.value).ok()
    }

    /// A word of the brief, or its default, noted.
    pub fn word<T: LeafValue + Clone>(
        &mut self,
        check: &mut Check,
        leaf: &Option<Leaf<T>>,
        default: &Default,
    ) -> Option<T> {
        if leaf.is_some() {
            return check.value(leaf);
        }
        self.used(default);
        T::read(&toml::Value::String(default.value.to_owned())).ok()
    }
}
