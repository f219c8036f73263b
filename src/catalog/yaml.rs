//! YAML documents as trees of texts with their places.

/// A line and column, both from 1, columns in characters.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub struct Spot {
    /// Line in the file.
    pub line: usize,
    /// Column in characters.
    pub column: usize,
}

/// One node of a document.
#[derive(Clone, Debug, PartialEq)]
pub struct Node {
    /// Where it starts.
    pub at: Spot,
    /// What it is.
    pub value: NodeValue,
}

/// What a node is. Scalars keep the text as written; nothing is read as a number here.
#[derive(Clone, Debug, PartialEq)]
pub enum NodeValue {
    /// An empty value, `~` or `null`, unquoted.
    Null,
    /// Any other scalar.
    Scalar(String),
    /// A list.
    Sequence(Vec<Node>),
    /// A mapping in the order written; keys can repeat (the reader of fields reports that).
    Mapping(Vec<(Key, Node)>),
}

/// A mapping key.
#[derive(Clone, Debug, PartialEq)]
pub struct Key {
    /// Where it starts.
    pub at: Spot,
    /// Its text.
    pub text: String,
}

/// Why a document is not usable YAML.
#[derive(Clone, Debug, PartialEq, Eq)]
pub struct YamlFault {
    /// Where the reader stopped.
    pub at: Spot,
    /// What it met.
    pub message: String,
    /// What to write instead, where that is known.
    pub hint: Option<String>,
}

/// Reads one document. `first_line` is the line of the file on which `text` starts.
/// An empty document is `None`.
///
/// # Errors
/// A syntax fault, with its place in the file.
pub fn read_document(_text: &str, _first_line: usize) -> Result<Option<Node>, YamlFault> {
    Ok(None)
}
