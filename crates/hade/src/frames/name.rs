//! A short name that can be copied freely ("KF-3 at 2950 m").

use std::collections::HashSet;
use std::fmt;
use std::sync::{Mutex, PoisonError};

use serde::{Deserialize, Deserializer, Serialize, Serializer};

/// A name given to a hole, a depth, a fault. Copying it is free, so the values that carry one can
/// be used again and again in a notebook; each distinct name is kept for the life of the program.
#[derive(Clone, Copy, PartialEq, Eq, Debug)]
pub struct Name(&'static str);

static NAMES: Mutex<Option<HashSet<&'static str>>> = Mutex::new(None);

impl Name {
    /// A name.
    pub fn new(text: &str) -> Self {
        let mut names = NAMES.lock().unwrap_or_else(PoisonError::into_inner);
        let names = names.get_or_insert_with(HashSet::new);
        if let Some(known) = names.get(text) {
            return Name(known);
        }
        let kept: &'static str = Box::leak(text.to_owned().into_boxed_str());
        names.insert(kept);
        Name(kept)
    }
    /// The text.
    pub fn text(self) -> &'static str {
        self.0
    }
}

impl fmt::Display for Name {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.write_str(self.0)
    }
}
impl Serialize for Name {
    fn serialize<S: Serializer>(&self, s: S) -> Result<S::Ok, S::Error> {
        s.serialize_str(self.0)
    }
}
impl<'de> Deserialize<'de> for Name {
    fn deserialize<D: Deserializer<'de>>(d: D) -> Result<Self, D::Error> {
        String::deserialize(d).map(|text| Name::new(&text))
    }
}
