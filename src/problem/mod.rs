//! What is wrong with an input, as data: a path or a place, a kind, and what would do.
//!
//! Each stage has its own kinds; their wording stands beside them and nowhere else.
//! [`render`] draws them on the lines of the file.

pub mod file;
pub mod render;
pub mod sense;
pub mod set;
pub mod shape;
pub mod text;
pub mod value;
pub mod words;

pub use file::FileProblem;
pub use render::{Source, Splice};
pub use sense::SenseProblem;
pub use set::{SetKind, SetProblem};
pub use shape::{Shape, ShapeProblem};
pub use text::TextProblem;
pub use value::ValueProblem;

use crate::description::Description;
use crate::resolve::Fault;
use std::fmt;
use std::ops::Range;

/// One thing that is wrong.
#[derive(Clone, Debug, PartialEq)]
pub struct Problem {
    /// Path of the value, as `--set` takes it; empty for the file as a whole.
    pub path: String,
    /// What of it to mark.
    pub part: Part,
    /// What is wrong.
    pub kind: ProblemKind,
    /// What would do, where the kind alone does not say.
    pub help: Option<String>,
}

/// What of a path to mark on its line.
#[derive(Clone, Debug, PartialEq, Eq)]
pub enum Part {
    /// The value; of a block, its first line.
    Value,
    /// The key.
    Key,
    /// Bytes of the value's text.
    Within(Range<usize>),
    /// Bytes of the file, whatever the path.
    Bytes(Range<usize>),
    /// Nothing: the file cannot be shown.
    Nothing,
}

/// What is wrong, by the stage that finds it.
#[derive(Clone, Debug, PartialEq)]
pub enum ProblemKind {
    /// The file cannot be read.
    File(FileProblem),
    /// The file is not the YAML that is understood here.
    Text(TextProblem),
    /// A key or a list where none belongs, or none where one does.
    Shape(ShapeProblem),
    /// A value that is not what its key wants.
    Value(ValueProblem),
    /// Values that do not fit each other.
    Sense(SenseProblem),
    /// A `--set` that cannot be done.
    Set(SetProblem),
    /// What the build names or connects does not hold.
    Fault(Fault),
}

macro_rules! kinds {
    ($($kind:ident($problem:ident)),* $(,)?) => {
        $(impl From<$problem> for ProblemKind {
            fn from(problem: $problem) -> Self { ProblemKind::$kind(problem) }
        })*
        impl fmt::Display for ProblemKind {
            fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
                match self { $(ProblemKind::$kind(problem) => problem.fmt(f)),* }
            }
        }
    };
}
kinds!(
    File(FileProblem),
    Text(TextProblem),
    Shape(ShapeProblem),
    Value(ValueProblem),
    Sense(SenseProblem),
    Set(SetProblem),
    Fault(Fault),
);

impl ProblemKind {
    /// What to write beside the mark on the line.
    #[must_use]
    pub fn label(&self) -> String {
        match self {
            ProblemKind::File(_) => String::new(),
            ProblemKind::Text(p) => p.label().to_owned(),
            ProblemKind::Shape(p) => p.label(),
            ProblemKind::Value(p) => p.label(),
            ProblemKind::Sense(p) => p.label(),
            ProblemKind::Set(p) => p.label(),
            ProblemKind::Fault(p) => p.label(),
        }
    }

    /// What would do.
    #[must_use]
    pub fn help(&self) -> Option<String> {
        match self {
            ProblemKind::File(p) => p.help().map(str::to_owned),
            ProblemKind::Text(p) => p.help().map(str::to_owned),
            ProblemKind::Shape(p) => p.help(),
            ProblemKind::Value(p) => p.help(),
            ProblemKind::Sense(p) => p.help(),
            ProblemKind::Set(p) => p.help(),
            ProblemKind::Fault(p) => p.help(),
        }
    }
}

impl Problem {
    /// Of a value.
    #[must_use]
    pub fn value(path: impl Into<String>, kind: impl Into<ProblemKind>) -> Problem {
        Problem {
            path: path.into(),
            part: Part::Value,
            kind: kind.into(),
            help: None,
        }
    }

    /// Of a key.
    #[must_use]
    pub fn key(path: impl Into<String>, kind: impl Into<ProblemKind>) -> Problem {
        Problem {
            path: path.into(),
            part: Part::Key,
            kind: kind.into(),
            help: None,
        }
    }

    /// Of bytes of the file.
    #[must_use]
    pub fn text(kind: impl Into<ProblemKind>, bytes: Range<usize>) -> Problem {
        Problem {
            path: String::new(),
            part: Part::Bytes(bytes),
            kind: kind.into(),
            help: None,
        }
    }

    /// Of the file as a whole.
    #[must_use]
    pub fn whole(kind: impl Into<ProblemKind>) -> Problem {
        Problem {
            path: String::new(),
            part: Part::Nothing,
            kind: kind.into(),
            help: None,
        }
    }

    /// With a help of its own.
    #[must_use]
    pub fn with_help(mut self, help: impl Into<String>) -> Problem {
        self.help = Some(help.into());
        self
    }
}

/// Most problems that are kept of one file; of further ones is told only that there are some.
pub const MOST_KEPT: usize = 50;

/// All that is wrong with one input.
#[derive(Clone, Debug, Default, PartialEq)]
pub struct Problems {
    list: Vec<Problem>,
    more: bool,
}

impl Problems {
    /// Adds one; beyond [`MOST_KEPT`] it is only noted that there are more.
    pub fn push(&mut self, problem: Problem) {
        if self.more || self.list.contains(&problem) {
            return;
        }
        if self.list.len() < MOST_KEPT {
            self.list.push(problem);
        } else {
            self.more = true;
        }
    }

    /// Adds all of another list.
    pub fn append(&mut self, other: Problems) {
        for problem in other.list {
            self.push(problem);
        }
        self.more |= other.more;
    }

    /// Whether nothing is wrong.
    #[must_use]
    pub fn is_empty(&self) -> bool {
        self.list.is_empty()
    }

    /// Those kept.
    pub fn iter(&self) -> impl Iterator<Item = &Problem> {
        self.list.iter()
    }

    /// Whether there are more than are kept: no more need be looked for.
    #[must_use]
    pub fn more(&self) -> bool {
        self.more
    }

    /// How many are kept.
    #[must_use]
    pub fn len(&self) -> usize {
        self.list.len()
    }

    /// In the order of the file.
    pub(crate) fn sort(&mut self, source: &Source) {
        self.list
            .sort_by_cached_key(|p| source.bytes(p).map_or(0, |b| b.start));
    }
}

impl From<Problem> for Problems {
    fn from(problem: Problem) -> Self {
        Problems {
            list: vec![problem],
            more: false,
        }
    }
}

/// An input that was refused: what is wrong, and the text to show it on.
#[derive(Clone, Debug)]
pub struct Refusal(Box<Refused>);

#[derive(Clone, Debug)]
struct Refused {
    source: Source,
    problems: Problems,
    partial: Option<Description>,
}

impl Refusal {
    /// A refusal with its problems in the order of the file.
    #[must_use]
    pub fn new(source: Source, problems: impl Into<Problems>) -> Refusal {
        let mut problems = problems.into();
        problems.sort(&source);
        Refusal(Box::new(Refused {
            source,
            problems,
            partial: None,
        }))
    }

    /// With what could be read of the file all the same.
    pub(crate) fn with_partial(mut self, partial: Option<Description>) -> Refusal {
        self.0.partial = partial;
        self
    }

    /// What could be read of a build file all the same: values that are wrong are left out of it.
    /// It serves to find more of what is wrong ([`crate::resolve::more_problems`]), and nothing else.
    #[must_use]
    pub fn partial(&self) -> Option<&Description> {
        self.0.partial.as_ref()
    }

    /// With further problems, in the order of the file.
    #[must_use]
    pub fn and(mut self, more: Problems) -> Refusal {
        let Refused {
            source, problems, ..
        } = self.0.as_mut();
        problems.append(more);
        problems.sort(source);
        self
    }

    /// The text and its places.
    #[must_use]
    pub fn source(&self) -> &Source {
        &self.0.source
    }

    /// What is wrong, in the order of the file.
    #[must_use]
    pub fn problems(&self) -> &Problems {
        &self.0.problems
    }

    /// Each problem drawn on its line, with colours or plain.
    #[must_use]
    pub fn render(&self, colour: bool) -> String {
        render::render(self.source(), self.problems(), colour)
    }
}

impl fmt::Display for Refusal {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        f.write_str(self.render(false).trim_end())
    }
}

impl std::error::Error for Refusal {}
