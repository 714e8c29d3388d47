//! Single values: quantities, words, names, counts.

use super::Lower;
use crate::description::raw::Node;
use crate::description::{Written, path};
use crate::problem::{Part, Problem, ValueProblem};
use crate::quantity::Fraction;
use crate::quantity::bounds::Bounds;
use crate::quantity::parse::{self, Measured, ParseError};
use crate::quantity::unit::Unit;

/// A list of words and what each means.
pub(super) type Words<T> = [(&'static str, T)];

/// `yes` and `no`.
const YES_NO: &Words<bool> = &[
    ("yes", true),
    ("no", false),
    ("true", true),
    ("false", false),
];

impl Lower<'_> {
    /// The text of a single value and its path; none, and a problem, where something else stands.
    fn single<'n, L, M>(
        &mut self,
        at: &str,
        key: &str,
        node: &'n Node<L, M>,
        wanted: &'static str,
    ) -> Option<(&'n str, String)> {
        if matches!(node, Node::Absent) {
            return None;
        }
        self.at_path(path::key(at, key), node, wanted)
    }

    /// The same of an entry whose path is known.
    fn at_path<'n, L, M>(
        &mut self,
        path: String,
        node: &'n Node<L, M>,
        wanted: &'static str,
    ) -> Option<(&'n str, String)> {
        match node {
            Node::Text(text) => Some((text, path)),
            other => {
                self.wrong_shape(other, &path, wanted);
                None
            }
        }
    }

    /// A text read by a parser; its error marks the bytes that are wrong.
    pub(super) fn parsed<T, L, M>(
        &mut self,
        at: &str,
        key: &str,
        node: &Node<L, M>,
        wanted: &'static str,
        read: impl FnOnce(&str) -> Result<T, ParseError>,
    ) -> Option<(T, String, String)> {
        let (text, path) = self.single(at, key, node, wanted)?;
        match read(text) {
            Ok(value) => Some((value, text.to_owned(), path)),
            Err(e) => {
                self.not_read(path, e);
                None
            }
        }
    }

    pub(super) fn not_read(&mut self, path: String, e: ParseError) {
        let part = Part::Within(e.range.clone());
        self.problem(Problem {
            path,
            part,
            kind: ValueProblem::Quantity(e).into(),
            help: None,
        });
    }

    /// Holds a value against its bounds.
    pub(super) fn bounded<T: Unit>(
        &mut self,
        path: &str,
        text: &str,
        value: T,
        bounds: &Bounds<T>,
    ) -> Option<()> {
        let bounds = bounds.check(value).err();
        match bounds {
            None => Some(()),
            Some(bounds) => {
                let found = text.trim().to_owned();
                self.problem(Problem::value(
                    path,
                    ValueProblem::OutOfBounds { found, bounds },
                ));
                None
            }
        }
    }

    /// A quantity with its unit.
    pub(super) fn quantity<T: Unit, L, M>(
        &mut self,
        at: &str,
        key: &str,
        node: &Node<L, M>,
        bounds: &Bounds<T>,
    ) -> Option<Written<T>> {
        let (measured, text, path) =
            self.parsed(at, key, node, T::DIMENSION.noun(), parse::parse::<T>)?;
        self.bounded(&path, &text, measured.value, bounds)?;
        Some(written(measured, path))
    }

    /// The same of an entry of a mapping with the user's names; its path is known.
    pub(super) fn quantity_at<T: Unit, L, M>(
        &mut self,
        path: String,
        node: &Node<L, M>,
        bounds: &Bounds<T>,
    ) -> Option<Written<T>> {
        let (text, path) = self.at_path(path, node, T::DIMENSION.noun())?;
        match parse::parse::<T>(text) {
            Ok(measured) => {
                self.bounded(&path, text, measured.value, bounds)?;
                Some(written(measured, path))
            }
            Err(e) => {
                self.not_read(path, e);
                None
            }
        }
    }

    /// A plain number.
    pub(super) fn factor<L, M>(
        &mut self,
        at: &str,
        key: &str,
        node: &Node<L, M>,
        bounds: &Bounds<Fraction>,
    ) -> Option<Written<Fraction>> {
        let (measured, text, path) = self.parsed(at, key, node, "a plain number", parse::factor)?;
        self.bounded(&path, &text, measured.value, bounds)?;
        Some(written(measured, path))
    }

    /// A whole number that fits.
    pub(super) fn count<L, M>(
        &mut self,
        at: &str,
        key: &str,
        node: &Node<L, M>,
        (what, wanted, fits): (&'static str, &'static str, fn(u32) -> bool),
    ) -> Option<Written<u32>> {
        let (value, _, path) = self.parsed(at, key, node, "a whole number", parse::whole)?;
        if !fits(value) {
            self.problem(Problem::value(
                path,
                ValueProblem::Count {
                    found: value,
                    what,
                    wanted,
                },
            ));
            return None;
        }
        Some(Written::exact(value, path))
    }

    /// One of a few words.
    pub(super) fn word<T: Copy, L, M>(
        &mut self,
        at: &str,
        key: &str,
        node: &Node<L, M>,
        (what, words): (&'static str, &Words<T>),
    ) -> Option<Written<T>> {
        let (text, path) = self.single(at, key, node, "a word")?;
        match words.iter().find(|(word, _)| *word == text.trim()) {
            Some((_, value)) => Some(Written::exact(*value, path)),
            None => {
                let words = words.iter().map(|(word, _)| *word).collect();
                let found = text.trim().to_owned();
                self.problem(Problem::value(
                    path,
                    ValueProblem::Word { found, what, words },
                ));
                None
            }
        }
    }

    /// `yes` or `no`.
    pub(super) fn yes_no<L, M>(
        &mut self,
        at: &str,
        key: &str,
        node: &Node<L, M>,
    ) -> Option<Written<bool>> {
        self.word(at, key, node, ("answer to yes or no", YES_NO))
    }

    /// A name of the user's choice.
    pub(super) fn name<L, M>(
        &mut self,
        at: &str,
        key: &str,
        node: &Node<L, M>,
    ) -> Option<Written<String>> {
        let (text, path) = self.single(at, key, node, "a name")?;
        self.not_empty(text, path)
    }

    /// The same of an entry whose path is known.
    pub(super) fn name_at<L, M>(
        &mut self,
        path: String,
        node: &Node<L, M>,
    ) -> Option<Written<String>> {
        let (text, path) = self.at_path(path, node, "a name")?;
        self.not_empty(text, path)
    }

    fn not_empty(&mut self, text: &str, path: String) -> Option<Written<String>> {
        let name = text.trim();
        if name.is_empty() {
            self.problem(Problem::value(path, ValueProblem::EmptyName));
            return None;
        }
        Some(Written::exact(name.to_owned(), path))
    }
}

/// A measured value with its path.
pub(super) fn written<T>(measured: Measured<T>, path: String) -> Written<T> {
    let Measured { value, tolerance } = measured;
    Written {
        value,
        tolerance,
        path,
    }
}
