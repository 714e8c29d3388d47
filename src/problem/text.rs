//! What is wrong with a file as text: before any key means anything.

use std::fmt;
use std::ops::Range;

/// A file that is not the YAML that is understood here.
#[derive(Clone, Debug, PartialEq, Eq)]
pub enum TextProblem {
    /// Beyond the most bytes that are read.
    TooLarge {
        /// The most.
        most: u64,
    },
    /// A byte that is not UTF-8.
    NotUtf8 {
        /// The byte.
        byte: u8,
    },
    /// A character that no text holds.
    Unprintable {
        /// The character.
        found: char,
    },
    /// Nothing but space and comments.
    Empty,
    /// A tab where YAML wants spaces.
    Tab,
    /// Not the language it should be.
    Syntax {
        /// The language: `YAML`, `CSV`.
        of: &'static str,
        /// What the reader says.
        what: String,
        /// What would do.
        hint: Option<String>,
        /// Bytes of a bracket that is still open there.
        opened: Option<Range<usize>>,
    },
    /// Lists and mappings inside each other beyond the limit.
    TooDeep,
    /// More values than the limit, aliases counted as often as they are used.
    TooMany,
    /// More anchors than the limit.
    TooManyAnchors,
    /// A key given twice in a mapping.
    DuplicateKey {
        /// The key.
        key: String,
        /// Bytes where it stands first.
        first: Range<usize>,
    },
    /// The merge key `<<`.
    MergeKey,
    /// A key that is not text.
    KeyNotText,
    /// A second document in the file.
    SecondDocument,
    /// A tag, `!something`.
    Tag,
    /// An alias inside the value that it stands for.
    AliasLoop,
}

/// Most bytes of a file.
pub const MOST_BYTES: u64 = 1 << 20;
/// Most lists and mappings inside each other.
pub const MOST_DEEP: usize = 64;
/// Most values of a file: enough for 5,000 accessories with a duty by state, and few enough to be refused at once.
pub const MOST_VALUES: u64 = 60_000;

/// Most anchors of a file.
pub const MOST_ANCHORS: usize = 1000;

impl fmt::Display for TextProblem {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        use TextProblem as P;
        match self {
            P::TooLarge { most } => {
                write!(f, "the file is too large: the limit is {} MiB", most >> 20)
            }
            P::NotUtf8 { byte } => write!(f, "the file is not UTF-8: byte 0x{byte:02X}"),
            P::Unprintable { found } => {
                write!(f, "unprintable character U+{:04X}", u32::from(*found))
            }
            P::Empty => f.write_str("the file is empty"),
            P::Tab => f.write_str("tab used for indentation"),
            P::Syntax { of, what, .. } => write!(f, "not valid {of}: {what}"),
            P::TooDeep => write!(f, "nested deeper than {MOST_DEEP} levels"),
            P::TooMany => write!(
                f,
                "more than {MOST_VALUES} values, aliases counted at each use"
            ),
            P::TooManyAnchors => write!(f, "more than {MOST_ANCHORS} anchors"),
            P::DuplicateKey { key, .. } => write!(f, "`{key}` is given twice"),
            P::MergeKey => f.write_str("merge key `<<` is not understood"),
            P::KeyNotText => f.write_str("a key must be a single word or text"),
            P::SecondDocument => f.write_str("a second document in the same file"),
            P::Tag => f.write_str("a tag is not understood here"),
            P::AliasLoop => f.write_str("an alias inside the value that it stands for"),
        }
    }
}

impl TextProblem {
    /// What to write beside the mark on the line.
    pub(super) fn label(&self) -> &'static str {
        use TextProblem as P;
        match self {
            P::NotUtf8 { .. } => "from here on",
            P::Tab => "a tab",
            P::TooDeep | P::TooMany | P::TooManyAnchors => "the limit is passed here",
            P::SecondDocument => "the second begins here",
            P::Tag => "a tag",
            _ => "here",
        }
    }

    /// What would do.
    pub(super) fn help(&self) -> Option<&str> {
        use TextProblem as P;
        Some(match self {
            P::TooLarge { .. } => {
                "a build file is a few kilobytes, a fleet of a thousand machines a hundred: is this the right file?"
            }
            P::NotUtf8 { .. } => "save the file as UTF-8 text",
            P::Unprintable { .. } => "delete the character",
            P::Empty => "`ampledger new` writes a build file to start from",
            P::Tab => "YAML indents with spaces; replace the tab with spaces",
            P::Syntax { hint, .. } => return hint.as_deref(),
            P::TooDeep => "a build file needs less than ten levels",
            P::TooMany => "write the entries out, or split the build",
            P::TooManyAnchors => "put what is repeated into a catalog part, or split the build",
            P::DuplicateKey { .. } => "keep one of the two",
            P::MergeKey => "write the keys out in each entry, or put them into a catalog part",
            P::KeyNotText => "write `key: value`",
            P::SecondDocument => "put each build into a file of its own",
            P::Tag => "leave out the word that begins with `!`",
            P::AliasLoop => "write the value out",
        })
    }
}
