//! From a document to a checked request.

use std::collections::BTreeMap;
use std::fs::File;
use std::io::Read;
use std::path::Path;
use std::sync::Arc;

use crate::catalog::yaml::{Node, NodeValue, Spot, YamlFault, read_document};
use crate::catalog::{ExchangeRates, Fault, Kind, Lifecycle, stream};
use crate::quantity::{ExchangeRate, Money, Sign, shown};

use super::conditions::{read_conditions, stated_or};
use super::model::{Budget, PurchaseRules, Request, Rules, Unstated};
use super::outputs::read_outputs;
use super::reader::{Entry, Group, Reader, Voice, described};

/// Largest request file: far more than a request of ten thousand outputs.
const LARGEST_FILE: u64 = 16 << 20;

/// Where a fault of the whole file is shown.
const START: Spot = Spot { line: 1, column: 1 };

/// Reads and checks a request file.
///
/// # Errors
/// All faults of the file in one run, in the order in which they stand in it.
pub fn load(path: &Path) -> Result<Request, Vec<Fault>> {
    let mut bytes = Vec::new();
    // One byte more than allowed tells a file that is too large, whatever its kind.
    let taken =
        File::open(path).and_then(|file| file.take(LARGEST_FILE + 1).read_to_end(&mut bytes));
    let mut reader = Reader::new(Arc::new(path.to_owned()), Voice::File);
    match taken {
        Err(error) => {
            let hint = "give the path of a request file";
            reader.error(START, "", format!("the file cannot be read: {error}"), hint);
        }
        Ok(_) if bytes.len() as u64 > LARGEST_FILE => {
            let hint = "a request is a short text file; is this the right one?";
            reader.error(START, "", "the file is larger than 16 MiB", hint);
        }
        Ok(_) => return read(path, &bytes),
    }
    Err(reader.into_faults())
}

/// Reads and checks the bytes of a request file; `path` is for the places of faults.
///
/// # Errors
/// All faults of the file in one run, in the order in which they stand in it.
pub fn read(path: &Path, bytes: &[u8]) -> Result<Request, Vec<Fault>> {
    let mut reader = Reader::new(Arc::new(path.to_owned()), Voice::File);
    let request = read_bytes(bytes, &mut reader);
    let faults = reader.into_faults();
    match request {
        Some(request) if faults.is_empty() => Ok(request),
        _ => Err(faults),
    }
}

fn read_bytes(bytes: &[u8], reader: &mut Reader) -> Option<Request> {
    let text = match stream::decode(bytes) {
        Ok(text) => text,
        Err(fault) => {
            syntax_error(reader, fault);
            return None;
        }
    };
    let mut documents = Vec::new();
    let mut broken = false;
    for piece in stream::cut(text) {
        match read_document(piece.text, piece.first_line) {
            Ok(document) => documents.extend(document),
            Err(fault) => {
                broken = true;
                syntax_error(reader, fault);
            }
        }
    }
    let mut documents = documents.into_iter();
    let first = documents.next();
    if let Some(second) = documents.next() {
        let hint = "one request a file: move the others to files of their own";
        reader.error(second.at, "", "a second document", hint);
    }
    match first {
        Some(document) => read_request(&document, reader),
        None if broken => None,
        None => {
            let hint = "write one that starts with `kind: request`";
            reader.error(START, "", "the file holds no request", hint);
            None
        }
    }
}

fn syntax_error(reader: &mut Reader, fault: YamlFault) {
    let hint = fault.hint.unwrap_or_else(|| "see the YAML syntax at this place".to_owned());
    reader.error(fault.at, "", fault.message, hint);
}

/// Reads a request's tree. `None` only after a fault.
pub(super) fn read_request(document: &Node, reader: &mut Reader) -> Option<Request> {
    let top = reader.group(document, "", "")?;
    if !kind_is_request(&top, reader) {
        return None;
    }
    let title = reader.text(&top, "title");
    reader.require(&top, "currency");
    let currency = reader.text(&top, "currency");
    let exchange = read_exchange(&top, currency.as_deref(), reader);
    let budget = read_budget(&top, reader);
    let conditions = read_conditions(&top, reader);
    let rules = read_rules(&top, reader);
    let network_elements = stated_or(reader.count(&top, "network_elements"), 2);
    let adjustments = stated_or(reader.switch(&top, "adjustments"), true);
    let purchase = read_purchase(&top, reader);
    let outputs = read_outputs(&top, conditions.as_ref(), reader);
    Some(Request {
        title,
        currency: currency?,
        exchange: exchange?,
        budget: budget?,
        conditions: conditions?.checked,
        rules: rules?,
        network_elements: u32::try_from(network_elements).ok()?,
        adjustments,
        purchase: purchase?,
        outputs: outputs?,
    })
}

/// A document of another kind is not read any further: its fields would all be unknown.
fn kind_is_request(top: &Group<'_>, reader: &mut Reader) -> bool {
    if !reader.require(top, "kind") {
        return true;
    }
    let Some(entry) = top.entry("kind") else { return true };
    if let NodeValue::Scalar(text) = &entry.node.value
        && let Some(kind) = Kind::ALL.into_iter().find(|kind| kind.word() == text.trim())
    {
        let message = format!("{} is a kind of part record", shown(kind.word()));
        let hint = "part records belong into the catalogue folder; a request has `kind: request`";
        reader.error(entry.node.at, &entry.path, message, hint);
        return false;
    }
    reader.entry_word(&entry);
    true
}

fn read_exchange(
    top: &Group<'_>,
    currency: Option<&str>,
    reader: &mut Reader,
) -> Option<ExchangeRates> {
    let Some(entry) = top.entry("exchange") else { return Some(ExchangeRates::new()) };
    let NodeValue::Mapping(entries) = &entry.node.value else {
        let message = format!("{} where rates are wanted", described(entry.node));
        reader.error(entry.node.at, &entry.path, message, "write `exchange: {USD: 0.92}`");
        return None;
    };
    let mut rates = ExchangeRates::new();
    let mut seen: BTreeMap<&str, Spot> = BTreeMap::new();
    for (key, node) in entries {
        let path = format!("exchange.{}", key.text);
        let name = key.text.trim();
        if name.is_empty() {
            reader.error(key.at, &path, "an empty currency", "write `exchange: {USD: 0.92}`");
            continue;
        }
        if let Some(first) = seen.insert(name, key.at) {
            let hint = format!("the first is on line {}; keep one", first.line);
            reader.error(key.at, &path, format!("{} is there twice", shown(name)), hint);
            continue;
        }
        if node.value == NodeValue::Null {
            let hint = format!("write what one {name} costs, such as `{name}: 0.92`");
            reader.error(key.at, &path, format!("{} has no value", shown(name)), hint);
            continue;
        }
        let rate = Entry { node, path };
        let Some(text) = reader.scalar(&rate) else { continue };
        let Some(value) = reader.checked(&rate, ExchangeRate::parse(text)) else { continue };
        if currency == Some(name) && value.0 != crate::quantity::Decimal::new(1, 0) {
            let message = format!("{} is the request's own currency", shown(name));
            reader.error(key.at, &rate.path, message, "leave this rate out");
            continue;
        }
        rates.insert(name.to_owned(), value);
    }
    Some(rates)
}

fn read_budget(top: &Group<'_>, reader: &mut Reader) -> Option<Budget> {
    let Some(entry) = top.entry("budget") else { return Some(Budget::WorstCase) };
    if let NodeValue::Scalar(text) = &entry.node.value {
        let message = format!("{} where fields are wanted", shown(text));
        let hint = format!("write {}", shown(&format!("budget: {{method: {}}}", text.trim())));
        reader.error(entry.node.at, &entry.path, message, hint);
        return None;
    }
    let group = reader.group(entry.node, &entry.path, "budget")?;
    let method = reader.word(&group, "method");
    let coverage = reader.number(&group, "coverage");
    let read = match method {
        Some("gum") => {
            return Some(Budget::Gum { coverage: coverage.map_or(2.0, |k| k.to_f64()) });
        }
        Some("rss") => Budget::Rss,
        Some(_) => Budget::WorstCase,
        None if group.has("method") => return None,
        None => Budget::WorstCase,
    };
    if let Some(stated) = group.entry("coverage") {
        let message = format!("a coverage factor with the method {}", shown(read.word()));
        let hint = "leave it out, or choose the method `gum`";
        reader.error(stated.node.at, &stated.path, message, hint);
    }
    Some(read)
}

fn read_rules(top: &Group<'_>, reader: &mut Reader) -> Option<Rules> {
    let mut rules = Rules {
        lifecycle: vec![Lifecycle::Active, Lifecycle::LastBuy],
        lead_time_max: None,
        in_stock: false,
        makers: None,
        packages: None,
        forbid: Vec::new(),
        require: Vec::new(),
        unstated: Unstated::Note,
    };
    let Some(entry) = top.entry("rules") else { return Some(rules) };
    let group = reader.group(entry.node, &entry.path, "rules")?;
    if let Some(states) = read_lifecycle(&group, reader) {
        rules.lifecycle = states;
    }
    rules.lead_time_max = reader.figure(&group, "lead_time_max", Sign::NotNegative);
    rules.in_stock = stated_or(reader.switch(&group, "in_stock"), false);
    rules.makers = reader.texts(&group, "makers");
    rules.packages = reader.texts(&group, "packages");
    for name in ["makers", "packages"] {
        refuse_empty_list(&group, name, reader);
    }
    rules.forbid = reader.texts(&group, "forbid").unwrap_or_default();
    rules.require = reader.texts(&group, "require").unwrap_or_default();
    if reader.word(&group, "unstated") == Some("reject") {
        rules.unstated = Unstated::Reject;
    }
    Some(rules)
}

fn read_lifecycle(group: &Group<'_>, reader: &mut Reader) -> Option<Vec<Lifecycle>> {
    refuse_empty_list(group, "lifecycle", reader);
    let entry = group.entry("lifecycle")?;
    let items = reader.items(&entry)?;
    let mut states: Vec<Lifecycle> = items
        .iter()
        .filter_map(|item| {
            let word = reader.entry_word(item)?;
            Lifecycle::ALL.into_iter().find(|state| state.word() == word)
        })
        .collect();
    states.sort_unstable();
    states.dedup();
    Some(states)
}

/// A list of what is allowed that allows nothing is a mistake.
fn refuse_empty_list(group: &Group<'_>, name: &str, reader: &mut Reader) {
    let Some(entry) = group.entry(name) else { return };
    if matches!(&entry.node.value, NodeValue::Sequence(items) if items.is_empty()) {
        let hint = "name at least one, or leave the field out to allow all";
        reader.error(entry.node.at, &entry.path, "an empty list, which allows nothing", hint);
    }
}

fn read_purchase(top: &Group<'_>, reader: &mut Reader) -> Option<PurchaseRules> {
    let mut rules =
        PurchaseRules { line_cost: Money::ZERO, placement_cost: Money::ZERO, lines_max: None };
    let Some(entry) = top.entry("purchase") else { return Some(rules) };
    let group = reader.group(entry.node, &entry.path, "purchase")?;
    rules.line_cost = stated_or(reader.money(&group, "line_cost"), Money::ZERO);
    rules.placement_cost = stated_or(reader.money(&group, "placement_cost"), Money::ZERO);
    rules.lines_max = reader.count(&group, "lines_max");
    Some(rules)
}
