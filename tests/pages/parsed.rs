//! A page read by an HTML parser: its complaints, its text, the rows of its tables.

use html5ever::tendril::TendrilSink;
use html5ever::{ParseOpts, parse_document, tokenizer::TokenizerOpts};
use markup5ever_rcdom::{Handle, NodeData, RcDom};

/// A table's row: the text of each cell, and every number in full.
#[derive(Debug, Default)]
pub struct Row {
    pub cells: Vec<String>,
    pub numbers: Vec<f64>,
}

/// Reads a page.
pub fn parse(page: &str) -> RcDom {
    let options = ParseOpts {
        tokenizer: TokenizerOpts {
            exact_errors: true,
            ..TokenizerOpts::default()
        },
        ..ParseOpts::default()
    };
    parse_document(RcDom::default(), options).one(page)
}

/// What the parser finds wrong.
pub fn errors(page: &str) -> Vec<String> {
    let dom = parse(page);
    let found = dom.errors.borrow();
    found.iter().map(ToString::to_string).collect()
}

/// Calls on every node.
fn walk(node: &Handle, on: &mut dyn FnMut(&Handle)) {
    on(node);
    for child in node.children.borrow().iter() {
        walk(child, on);
    }
}

/// Name of an element.
pub fn name(node: &Handle) -> Option<String> {
    match &node.data {
        NodeData::Element { name, .. } => Some(name.local.to_string()),
        _ => None,
    }
}

/// Value of an attribute.
pub fn attribute(node: &Handle, wanted: &str) -> Option<String> {
    match &node.data {
        NodeData::Element { attrs, .. } => attrs
            .borrow()
            .iter()
            .find(|a| &*a.name.local == wanted)
            .map(|a| a.value.to_string()),
        _ => None,
    }
}

/// The text in a node, without what only the style sheet holds.
pub fn text(node: &Handle) -> String {
    if name(node).as_deref() == Some("style") {
        return String::new();
    }
    if let NodeData::Text { contents } = &node.data {
        return contents.borrow().replace('\u{a0}', " ");
    }
    let children = node.children.borrow();
    children.iter().map(text).collect()
}

/// Every element of a name.
pub fn elements(root: &Handle, wanted: &str) -> Vec<Handle> {
    let mut found = Vec::new();
    walk(root, &mut |node| {
        if name(node).as_deref() == Some(wanted) {
            found.push(node.clone());
        }
    });
    found
}

/// Every number that a page carries in full beneath a node.
pub fn numbers(node: &Handle) -> Vec<f64> {
    let values = elements(node, "data").into_iter();
    values
        .filter_map(|data| attribute(&data, "value")?.parse().ok())
        .collect()
}

/// The rows of all tables.
pub fn rows(page: &str) -> Vec<Row> {
    let dom = parse(page);
    let row = |tr: Handle| Row {
        cells: tr
            .children
            .borrow()
            .iter()
            .filter(|cell| attribute(cell, "class").as_deref() != Some("bar"))
            .map(text)
            .collect(),
        numbers: numbers(&tr),
    };
    elements(&dom.document, "tr").into_iter().map(row).collect()
}
