//! One file of a user's catalogs: its bytes to entries, every problem at its place.

use super::{Certainty, Entry, Kind, Origin};
use crate::description::path;
use crate::description::{open_text, refused};
use crate::problem::{Problem, Problems, Refusal, SenseProblem, Shape, ShapeProblem, Source};
use serde_yaml::{Mapping, Value};
use std::collections::BTreeMap;
use std::path::Path;

/// The entries of a file. `name` is what messages call it.
///
/// The text is scanned before any of it is built up, as a build file's is: too large, too deep, an alias bomb and the
/// like are refused there.
pub(super) fn entries(file: &Path, bytes: &[u8]) -> Result<Vec<Entry>, Refusal> {
    let (source, mut problems) = open_text(&file.display().to_string(), bytes)?;
    let top: Value = match serde_yaml::from_str(&source.text) {
        Ok(top) => top,
        Err(e) => {
            problems.push(refused(&source.text, &e));
            return Err(Refusal::new(source, problems));
        }
    };
    let mut found = Found {
        file,
        source: &source,
        entries: Vec::new(),
        ids: BTreeMap::new(),
        problems,
    };
    found.top(top);
    let Found {
        entries, problems, ..
    } = found;
    match problems.is_empty() {
        true => Ok(entries),
        false => Err(Refusal::new(source, problems)),
    }
}

/// What was found so far.
struct Found<'a> {
    file: &'a Path,
    source: &'a Source,
    entries: Vec<Entry>,
    /// Where each id of each kind stands.
    ids: BTreeMap<(Kind, String), String>,
    problems: Problems,
}

/// What a value is made of.
fn shape(value: &Value) -> Shape {
    match value {
        Value::Mapping(_) => Shape::Mapping,
        Value::Sequence(_) => Shape::List,
        _ => Shape::Single,
    }
}

impl Found<'_> {
    fn wrong_shape(&mut self, value: &Value, path: &str, wanted: &'static str) {
        let found = shape(value);
        self.problems.push(Problem::value(
            path,
            ShapeProblem::WrongShape { found, wanted },
        ));
    }

    /// The whole file: a list for each kind.
    fn top(&mut self, top: Value) {
        let Value::Mapping(top) = top else {
            return self.wrong_shape(&top, "", "a list of parts under the name of their kind");
        };
        for (key, list) in top {
            let key = text(&key).unwrap_or_default();
            let at = path::key("", &key);
            let Some(kind) = Kind::ALL.into_iter().find(|k| k.key() == key) else {
                let known = Kind::ALL.map(Kind::key).to_vec();
                let unknown = ShapeProblem::UnknownKey { found: key, known };
                self.problems.push(Problem::key(at, unknown));
                continue;
            };
            match list {
                Value::Sequence(list) => self.list(kind, &at, list),
                Value::Null => {}
                other => self.wrong_shape(&other, &at, "a list of parts"),
            }
        }
    }

    fn list(&mut self, kind: Kind, at: &str, list: Vec<Value>) {
        for (index, item) in list.into_iter().enumerate() {
            let at = path::index(at, index);
            match item {
                Value::Mapping(keys) => self.entry(kind, &at, keys),
                other => self.wrong_shape(&other, &at, "a mapping of keys"),
            }
        }
    }

    /// One entry: its own four keys apart from those of the build file.
    fn entry(&mut self, kind: Kind, at: &str, mut keys: Mapping) {
        let mut take = |key: &str| keys.remove(key).as_ref().and_then(text);
        let Some(id) = take("id").filter(|id| !id.trim().is_empty()) else {
            let missing = ShapeProblem::Missing {
                key: "id",
                example: "id: my-work-light",
            };
            self.problems.push(Problem::value(at, missing));
            return;
        };
        let title = take("title").unwrap_or_else(|| id.clone());
        let source = take("source").unwrap_or_default();
        let certainty = Certainty::from_text(&take("certainty").unwrap_or_default());
        let place = path::key(at, "id");
        if let Some(first) = self.ids.get(&(kind, id.clone())) {
            let twice = SenseProblem::DuplicateName {
                name: id,
                first: first.clone(),
            };
            self.problems.push(Problem::value(place, twice));
            return;
        }
        self.ids.insert((kind, id.clone()), place.clone());
        let body = match serde_yaml::to_string(&keys) {
            Ok(body) => body,
            // what was read as YAML can be written as YAML
            Err(e) => {
                return self
                    .problems
                    .push(Problem::whole(refused(&self.source.text, &e).kind));
            }
        };
        let line = self.source.line_of(&place);
        self.entries.push(Entry {
            kind,
            id,
            title,
            source,
            certainty,
            origin: Origin::File(self.file.to_path_buf(), line),
            body,
        });
    }
}

/// A single value as written.
fn text(value: &Value) -> Option<String> {
    match value {
        Value::String(text) => Some(text.clone()),
        Value::Number(number) => Some(number.to_string()),
        Value::Bool(answer) => Some(answer.to_string()),
        _ => None,
    }
}
