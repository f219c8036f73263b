//! YAML documents as trees of texts with their places.
//!
//! The YAML library turns `4.10` into a number and forgets where it stood. So each document is
//! read twice: the first pass finds only its *shape* (and everything that is refused), the second
//! asks for every scalar as text, which the library hands out as a slice of the input: the slice's
//! offset is the place.

use std::borrow::Cow;
use std::fmt;

use serde::de::{
    Deserialize, DeserializeSeed, Deserializer, EnumAccess, IgnoredAny, MapAccess, SeqAccess,
    Visitor,
};

use super::places::Places;
use super::refusals::{TOO_DEEP, refuse};

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
    /// Where it starts; where the library does not tell (an empty value or list, a folded or
    /// escaped text), the place of its key. What an alias stands for has the place of its anchor.
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
/// An empty document (or one that is only `~`) is `None`.
///
/// # Errors
/// A syntax fault, with its place in the file.
pub fn read_document(text: &str, first_line: usize) -> Result<Option<Node>, YamlFault> {
    let places = Places::new(text, first_line);
    refuse(text, &places)?;
    let mut nodes_left = text.len() + SPARE_NODES;
    let shape = ShapeSeed { nodes_left: &mut nodes_left, key: false }
        .deserialize(serde_yaml::Deserializer::from_str(text))
        .map_err(|error| explain(&error, text, &places, first_line))?;
    if matches!(shape, Shape::Null) {
        return Ok(None);
    }
    let reader = NodeSeed { shape: &shape, places: &places, key: places.spot(0) };
    reader
        .deserialize(serde_yaml::Deserializer::from_str(text))
        .map(|placed| Some(placed.node))
        .map_err(|error| explain(&error, text, &places, first_line))
}

/// A text without anchors has fewer nodes than bytes; beyond this many more, aliases multiply it.
const SPARE_NODES: usize = 10_000;

/// Marks our own messages among the library's; the rest is message and hint.
const OWN: &str = "\u{1}";

/// `offset` where it is known better than to the library.
fn own<E: serde::de::Error>(message: &str, hint: &str, offset: Option<usize>) -> E {
    let offset = offset.map(|at| at.to_string()).unwrap_or_default();
    E::custom(format_args!("{OWN}{message}{OWN}{hint}{OWN}{offset}{OWN}"))
}

fn tag_refused<E: serde::de::Error>(tag: &str, offset: Option<usize>) -> E {
    own(&format!("a tag ({tag})"), "tags are not read; write the plain value", offset)
}

/// The kinds of nodes of a document, without their texts.
enum Shape {
    Null,
    Scalar,
    Sequence(Vec<Shape>),
    Mapping(Vec<Shape>),
}

/// The first pass.
struct ShapeSeed<'l> {
    nodes_left: &'l mut usize,
    /// Only plain texts are let through as keys.
    key: bool,
}

impl ShapeSeed<'_> {
    fn refuse_as_key<E: serde::de::Error>(&self, found: &str) -> Result<(), E> {
        if self.key { Err(own(found, "a key is a plain word", None)) } else { Ok(()) }
    }
}

impl<'de> DeserializeSeed<'de> for ShapeSeed<'_> {
    type Value = Shape;
    fn deserialize<D: Deserializer<'de>>(self, deserializer: D) -> Result<Shape, D::Error> {
        match self.nodes_left.checked_sub(1) {
            Some(left) => *self.nodes_left = left,
            None => {
                return Err(own(MULTIPLIED, "write the values out", None));
            }
        }
        deserializer.deserialize_any(self)
    }
}

const MULTIPLIED: &str = "aliases that multiply the document";

impl<'de> Visitor<'de> for ShapeSeed<'_> {
    type Value = Shape;
    fn expecting(&self, formatter: &mut fmt::Formatter<'_>) -> fmt::Result {
        formatter.write_str("a plain value, a list or a mapping")
    }
    fn visit_unit<E: serde::de::Error>(self) -> Result<Shape, E> {
        self.refuse_as_key("an empty key")?;
        Ok(Shape::Null)
    }
    fn visit_none<E: serde::de::Error>(self) -> Result<Shape, E> {
        self.visit_unit()
    }
    fn visit_bool<E>(self, _: bool) -> Result<Shape, E> {
        Ok(Shape::Scalar)
    }
    fn visit_i64<E>(self, _: i64) -> Result<Shape, E> {
        Ok(Shape::Scalar)
    }
    fn visit_u64<E>(self, _: u64) -> Result<Shape, E> {
        Ok(Shape::Scalar)
    }
    fn visit_i128<E>(self, _: i128) -> Result<Shape, E> {
        Ok(Shape::Scalar)
    }
    fn visit_u128<E>(self, _: u128) -> Result<Shape, E> {
        Ok(Shape::Scalar)
    }
    fn visit_f64<E>(self, _: f64) -> Result<Shape, E> {
        Ok(Shape::Scalar)
    }
    fn visit_str<E>(self, _: &str) -> Result<Shape, E> {
        Ok(Shape::Scalar)
    }
    fn visit_seq<A: SeqAccess<'de>>(self, mut items: A) -> Result<Shape, A::Error> {
        self.refuse_as_key("a list as a key")?;
        let mut shapes = Vec::new();
        let nodes_left = self.nodes_left;
        while let Some(shape) = items.next_element_seed(ShapeSeed { nodes_left, key: false })? {
            shapes.push(shape);
        }
        Ok(Shape::Sequence(shapes))
    }
    fn visit_map<A: MapAccess<'de>>(self, mut entries: A) -> Result<Shape, A::Error> {
        self.refuse_as_key("a mapping as a key")?;
        let mut shapes = Vec::new();
        let nodes_left = self.nodes_left;
        while entries.next_key_seed(ShapeSeed { nodes_left, key: true })?.is_some() {
            shapes.push(entries.next_value_seed(ShapeSeed { nodes_left, key: false })?);
        }
        Ok(Shape::Mapping(shapes))
    }
    fn visit_enum<A: EnumAccess<'de>>(self, access: A) -> Result<Shape, A::Error> {
        let (tag, _) = access.variant::<String>()?;
        Err(tag_refused(&format!("!{tag}"), None))
    }
}

/// A scalar's text and, where the library hands out a slice of the input, its offset.
struct Text<'de>(Cow<'de, str>);

impl<'de> Deserialize<'de> for Text<'de> {
    fn deserialize<D: Deserializer<'de>>(deserializer: D) -> Result<Self, D::Error> {
        struct TextVisitor;
        impl<'de> Visitor<'de> for TextVisitor {
            type Value = Text<'de>;
            fn expecting(&self, formatter: &mut fmt::Formatter<'_>) -> fmt::Result {
                formatter.write_str("a plain value")
            }
            fn visit_borrowed_str<E>(self, text: &'de str) -> Result<Text<'de>, E> {
                Ok(Text(Cow::Borrowed(text)))
            }
            fn visit_str<E>(self, text: &str) -> Result<Text<'de>, E> {
                Ok(Text(Cow::Owned(text.to_owned())))
            }
        }
        deserializer.deserialize_str(TextVisitor)
    }
}

impl Text<'_> {
    fn offset(&self, places: &Places<'_>) -> Option<usize> {
        match &self.0 {
            // An empty slice can lie anywhere between two tokens.
            Cow::Borrowed(text) if !text.is_empty() => {
                let at = places.offset_of(text)?;
                // The slice of a quoted text starts behind its quote.
                Some(if places.before(at).ends_with(['"', '\'']) { at - 1 } else { at })
            }
            _ => None,
        }
    }
}

/// The second pass: reads a node whose shape is known.
struct NodeSeed<'s> {
    shape: &'s Shape,
    places: &'s Places<'s>,
    /// Where the node counts as standing when nothing better is known.
    key: Spot,
}

/// A node and, where it is known, the byte offset at which it starts.
struct Placed {
    node: Node,
    offset: Option<usize>,
}

impl NodeSeed<'_> {
    fn place(&self, offset: Option<usize>, value: NodeValue) -> Placed {
        let at = offset.map_or(self.key, |at| self.places.spot(at));
        Placed { node: Node { at, value }, offset }
    }

    /// Where the bracket or dash before the first item stands, if that is what precedes it.
    fn opening(&self, first: Option<usize>, marks: &[char]) -> Option<usize> {
        let before = self.places.before(first?).trim_end();
        before.ends_with(marks).then(|| before.len() - 1)
    }
}

impl<'de> DeserializeSeed<'de> for NodeSeed<'_> {
    type Value = Placed;
    fn deserialize<D: Deserializer<'de>>(self, deserializer: D) -> Result<Placed, D::Error> {
        match self.shape {
            Shape::Null | Shape::Scalar => {
                let text = Text::deserialize(deserializer)?;
                let offset = text.offset(self.places);
                if let Some(tag) = offset.and_then(|at| tag_before(self.places.before(at))) {
                    let place = self.places.offset_of(tag);
                    return Err(tag_refused(tag, place));
                }
                let value = match self.shape {
                    Shape::Null => NodeValue::Null,
                    _ => NodeValue::Scalar(text.0.into_owned()),
                };
                Ok(self.place(offset, value))
            }
            Shape::Sequence(_) => deserializer.deserialize_seq(self),
            Shape::Mapping(_) => deserializer.deserialize_map(self),
        }
    }
}

/// The standard tags (`!!str`) do not reach a visitor; they stand right before the value.
fn tag_before(before: &str) -> Option<&str> {
    let ends_word = |c: char| c.is_whitespace() || matches!(c, '[' | '{' | ',');
    let mut rest = before;
    loop {
        rest = rest.trim_end_matches([' ', '\t']);
        let word = rest.rsplit(ends_word).next()?;
        if !word.starts_with('&') {
            return word.starts_with('!').then_some(word);
        }
        rest = rest.strip_suffix(word)?;
    }
}

impl<'de> Visitor<'de> for NodeSeed<'_> {
    type Value = Placed;
    fn expecting(&self, formatter: &mut fmt::Formatter<'_>) -> fmt::Result {
        formatter.write_str("what the first reading found")
    }
    fn visit_seq<A: SeqAccess<'de>>(self, mut items: A) -> Result<Placed, A::Error> {
        let Shape::Sequence(shapes) = self.shape else { return Err(changed()) };
        let mut nodes = Vec::with_capacity(shapes.len());
        let mut start = None;
        for (index, shape) in shapes.iter().enumerate() {
            let item = items.next_element_seed(NodeSeed { shape, ..self })?.ok_or_else(changed)?;
            if index == 0 {
                start = self.opening(item.offset, &['[', '-']);
            }
            nodes.push(item.node);
        }
        Ok(self.place(start, NodeValue::Sequence(nodes)))
    }
    fn visit_map<A: MapAccess<'de>>(self, mut entries: A) -> Result<Placed, A::Error> {
        let Shape::Mapping(shapes) = self.shape else { return Err(changed()) };
        let mut nodes = Vec::with_capacity(shapes.len());
        let mut start = None;
        for (index, shape) in shapes.iter().enumerate() {
            let text: Text<'de> = entries.next_key()?.ok_or_else(changed)?;
            let offset = text.offset(self.places);
            if text.0 == "<<" {
                let hint = "merge keys are not read; write the fields out";
                return Err(own("a merge key", hint, offset));
            }
            if index == 0 {
                start = self.opening(offset, &['{']).or(offset);
            }
            let at = offset.map_or(self.key, |at| self.places.spot(at));
            let value = entries.next_value_seed(NodeSeed { shape, key: at, ..self })?;
            nodes.push((Key { at, text: text.0.into_owned() }, value.node));
        }
        Ok(self.place(start, NodeValue::Mapping(nodes)))
    }
}

/// Both passes read the same text, so this does not happen; it is an error rather than a panic.
fn changed<E: serde::de::Error>() -> E {
    E::custom("the document was read differently twice")
}

/// The library's error as ours: its place in the file, and its message without its own places.
fn explain(
    error: &serde_yaml::Error,
    text: &str,
    places: &Places<'_>,
    first_line: usize,
) -> YamlFault {
    let offset = error.location().map_or(0, |location| location.index());
    let full = error.to_string();
    let mut ours = full.split(OWN).skip(1);
    if let (Some(message), Some(hint), Some(known)) = (ours.next(), ours.next(), ours.next()) {
        let at = places.spot(known.parse().unwrap_or(offset));
        return YamlFault { at, message: message.to_owned(), hint: Some(hint.to_owned()) };
    }
    let at = places.spot(offset);
    if full.starts_with("repetition limit") || full.starts_with("recursion limit") {
        let (message, hint) =
            if full.starts_with("rec") { TOO_DEEP } else { (MULTIPLIED, "write the values out") };
        return YamlFault { at, message: message.to_owned(), hint: Some(hint.to_owned()) };
    }
    if full.starts_with("deserializing from YAML containing more than one document") {
        // The library says so too when what follows the document is broken.
        let second = serde_yaml::Deserializer::from_str(text).nth(1).map(IgnoredAny::deserialize);
        if let Some(Err(behind)) = second
            && behind.location().is_some()
        {
            return explain(&behind, text, places, first_line);
        }
        return YamlFault {
            at,
            message: "more than one document".to_owned(),
            hint: Some("keep one document here, without a `---` line between".to_owned()),
        };
    }
    let (problem, context) = full.split_once(", while ").unwrap_or((&full, ""));
    let problem = problem.split(" at ").next().unwrap_or(problem);
    let message = match context.split_once(" at line ") {
        Some((what, rest)) => {
            let line = rest.split(' ').next().and_then(|line| line.parse::<usize>().ok());
            let from = line.map_or(first_line, |line| line.saturating_sub(1) + first_line);
            format!("not YAML: {problem}, while {what} that starts on line {from}")
        }
        None => format!("not YAML: {problem}"),
    };
    let met = text.get(offset..).and_then(|rest| rest.chars().next());
    let hint = match met {
        Some('\t') => Some("indent with spaces, not tabs"),
        Some('@' | '`' | '%' | '*' | '&' | '!') => Some("put a text that starts so in quotes"),
        _ if problem.starts_with("mapping values are not allowed") => {
            Some("put a text with `: ` in it in quotes, or mend the indentation")
        }
        _ => None,
    };
    YamlFault { at, message, hint: hint.map(str::to_owned) }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn scalar(node: &Node) -> &str {
        match &node.value {
            NodeValue::Scalar(text) => text,
            other => panic!("not a scalar: {other:?}"),
        }
    }

    fn fields(text: &str) -> Vec<(Key, Node)> {
        match read_document(text, 1).unwrap().unwrap().value {
            NodeValue::Mapping(fields) => fields,
            other => panic!("not a mapping: {other:?}"),
        }
    }

    fn at(spot: Spot) -> (usize, usize) {
        (spot.line, spot.column)
    }

    fn fault(text: &str) -> YamlFault {
        read_document(text, 1).expect_err(text)
    }

    #[test]
    fn scalars_keep_the_text_as_written() {
        for written in ["0012", "1.0", "4.10", "1e3", "yes", "true", "0x1F", "2024-01-02", "+7"] {
            let document = format!("a: {written}\n");
            assert_eq!(scalar(&fields(&document)[0].1), written);
        }
        assert_eq!(scalar(&fields("a: '0012'")[0].1), "0012");
        assert_eq!(scalar(&fields("a: \"x\\ty\"")[0].1), "x\ty");
        assert_eq!(scalar(&fields("a: |\n  two\n  lines\n")[0].1), "two\nlines\n");
        assert_eq!(scalar(&fields("a: >-\n  two\n  lines\n")[0].1), "two lines");
    }

    #[test]
    fn an_empty_value_is_told_from_a_quoted_one() {
        for empty in ["a:", "a: ~", "a: null", "a: Null", "a: NULL"] {
            assert_eq!(fields(empty)[0].1.value, NodeValue::Null, "{empty}");
        }
        for (written, text) in [("a: '~'", "~"), ("a: \"null\"", "null"), ("a: ''", "")] {
            assert_eq!(scalar(&fields(written)[0].1), text);
        }
    }

    #[test]
    fn nodes_have_places_in_characters() {
        let text = "Ω: µV\nlist: [a, 'b', \"c\"]\nempty:\n~x: ~\nitems:\n  - d\n  - {e: f}\n";
        let found = fields(text);
        assert_eq!(at(found[0].0.at), (1, 1));
        assert_eq!(at(found[0].1.at), (1, 4));
        assert_eq!(at(found[1].1.at), (2, 7));
        let NodeValue::Sequence(items) = &found[1].1.value else { panic!() };
        assert_eq!(items.iter().map(|n| at(n.at)).collect::<Vec<_>>(), [(2, 8), (2, 11), (2, 16)]);
        assert_eq!(at(found[2].1.at), (3, 1));
        assert_eq!(at(found[3].1.at), (4, 5));
        assert_eq!(at(found[4].1.at), (6, 3));
        let NodeValue::Sequence(items) = &found[4].1.value else { panic!() };
        assert_eq!(at(items[1].at), (7, 5));
    }

    #[test]
    fn a_folded_or_escaped_text_stands_where_its_key_stands() {
        let found = fields("x: 1\n  \n\"k\": >\n  folded\n  text\nm: \"a\\tb\"\n");
        assert_eq!(at(found[1].1.at), (3, 1));
        assert_eq!(at(found[2].1.at), (6, 1));
    }

    #[test]
    fn lines_count_from_the_line_given() {
        let node = read_document("a: b", 41).unwrap().unwrap();
        assert_eq!(at(node.at), (41, 1));
        assert_eq!(at(read_document("a: b\nc: {", 41).unwrap_err().at).0, 42);
    }

    #[test]
    fn aliases_are_read_and_bombs_refused() {
        let found = fields("a: &x [1 V, 2 V]\nb: *x\n");
        assert_eq!(found[0].1.value, found[1].1.value);
        let mut bomb = String::from("a0: &a0 [x, x, x, x, x, x, x, x, x, x]\n");
        for level in 1..12 {
            let item = format!("*a{}", level - 1);
            bomb += &format!("a{level}: &a{level} [{}]\n", [item.as_str(); 10].join(", "));
        }
        assert_eq!(fault(&bomb).message, "aliases that multiply the document");
        let own = fault("a: &a [*a]");
        assert_eq!(own.message, "nested too deeply");
        let wide = format!("a: &a [{}]\nb: [{}]", "x,".repeat(20_000), "*a,".repeat(20_000));
        assert_eq!(fault(&wide).message, "aliases that multiply the document");
    }

    #[test]
    fn deep_nesting_is_a_fault() {
        assert_eq!(fault(&"[".repeat(200_000)).message, "nested too deeply");
        let closed = "[".repeat(2000) + &"]".repeat(2000);
        assert_eq!(fault(&closed).message, "nested too deeply");
    }

    #[test]
    fn an_anchor_defined_twice_is_refused_where_aliases_are_used() {
        let found = fault("a: &x 1\nb: &y 2\nc: &x 3\nd: &z 4\ne: *x\n");
        assert_eq!(found.message, "the anchor &x is defined twice");
        assert_eq!(at(found.at), (3, 4));
        assert!(read_document("a: &x 1\nb: &x 2\n", 1).is_ok());
    }

    #[test]
    fn tags_merge_keys_and_odd_keys_are_refused_with_their_place() {
        for (text, message, place) in [
            ("a: !volt 5", "a tag (!volt)", (1, 4)),
            ("a: 1\nb: !list [x]", "a tag (!list)", (2, 4)),
            ("a: !!str 12", "a tag (!!str)", (1, 4)),
            ("a: [x, !!int &n 12]", "a tag (!!int)", (1, 8)),
            ("m: &m {a: 1}\nb:\n  <<: *m\n", "a merge key", (3, 3)),
            ("? [a, b]\n: c\n", "a list as a key", (1, 3)),
            ("{? {a: b} : c}", "a mapping as a key", (1, 4)),
            ("a: 1\n~: 2\n", "an empty key", (2, 1)),
        ] {
            let found = fault(text);
            assert_eq!((found.message.as_str(), at(found.at)), (message, place), "{text}");
            assert!(found.hint.is_some());
        }
    }

    #[test]
    fn syntax_faults_say_where() {
        let tab = fault("a: 1\nb:\n\tc: 2\n");
        assert_eq!(
            (at(tab.at), tab.hint.as_deref()),
            ((3, 1), Some("indent with spaces, not tabs"))
        );
        let open = fault("µ: 1\nb: \"open\n");
        assert!(open.message.ends_with("that starts on line 2"), "{}", open.message);
        let colon = fault("µ: b: c\n");
        assert_eq!(at(colon.at), (1, 5));
        assert!(colon.hint.is_some_and(|hint| hint.contains("quotes")));
        let control = fault("a: b\nc: \u{7}\n");
        assert_eq!(
            (control.message.as_str(), at(control.at)),
            ("the control character U+0007", (2, 4))
        );
        assert_eq!(fault("a: 1\n---\nb: 2\n").message, "more than one document");
        let behind = fault("\"a\"\nb: 1\n");
        assert_eq!(behind.message, "not YAML: did not find expected <document start>");
        assert_eq!(at(behind.at), (2, 1));
        assert_eq!(at(fault("a: *nobody").at), (1, 4));
    }

    #[test]
    fn empty_documents_are_none() {
        for text in ["", "\n", "# only this\n", "---\n", "--- # c\n...\n", "~", "--- null\n"] {
            assert_eq!(read_document(text, 1), Ok(None), "{text:?}");
        }
    }
}
