//! One thing wrong with a description, and where.

/// A fault in a supply or a request: where it is and what would be right.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct Fault {
    /// JSON Pointer (RFC 6901) of the field, relative to the thing that was read; empty for the whole of it.
    pub pointer: String,
    /// What is wrong and how to put it right, for a person.
    pub detail: String,
}

impl Fault {
    /// A fault at `pointer`.
    pub fn new(pointer: impl Into<String>, detail: impl Into<String>) -> Self {
        Self {
            pointer: pointer.into(),
            detail: detail.into(),
        }
    }

    /// The same fault seen from one level further out.
    #[must_use]
    pub fn below(mut self, prefix: &str) -> Self {
        self.pointer.insert_str(0, prefix);
        self
    }
}
