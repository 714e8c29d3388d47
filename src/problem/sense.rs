//! Values that are right in themselves and do not fit each other.

use super::words::{any_of, list, nearest};
use std::fmt;
use std::sync::Arc;

/// Values of one file that do not fit each other.
#[derive(Clone, Debug, PartialEq, Eq)]
pub enum SenseProblem {
    /// A shift without a step.
    EmptyShift,
    /// A state that the file does not define.
    UnknownState {
        /// As written.
        found: String,
        /// The states that there are.
        states: Vec<String>,
    },
    /// A speed with the name of another state.
    ReservedName {
        /// The name.
        name: String,
    },
    /// A step that does not say how long.
    StepWithoutTime {
        /// Its state.
        state: String,
    },
    /// A step with more than one state.
    StepOfSeveral,
    /// A name that is already taken.
    DuplicateName {
        /// The name.
        name: String,
        /// Path of what has it.
        first: String,
    },
    /// An accessory that the file does not hold.
    UnknownAccessory {
        /// As written.
        found: String,
        /// Those that there are, shared by all problems of a file.
        names: Arc<[String]>,
    },
    /// An accessory together with or apart from itself.
    WithItself {
        /// The key.
        key: &'static str,
    },
    /// Two accessories both together and apart.
    TogetherAndApart {
        /// The other.
        name: String,
    },
    /// Two keys of which only one may be there.
    Both {
        /// The one.
        one: &'static str,
        /// The other.
        other: &'static str,
    },
    /// Keys of which one must be there.
    NoneOf {
        /// The keys.
        keys: &'static [&'static str],
        /// How one is written.
        example: &'static str,
    },
    /// A pair whose first must be below its second.
    Reversed {
        /// The first, as messages call it.
        low: &'static str,
        /// The second.
        high: &'static str,
    },
    /// A list that must rise.
    NotRising {
        /// What must rise.
        what: &'static str,
    },
}

impl fmt::Display for SenseProblem {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        use SenseProblem as P;
        match self {
            P::EmptyShift => f.write_str("the shift is empty"),
            P::UnknownState { found, .. } => write!(f, "no state `{found}` is defined"),
            P::ReservedName { name } => write!(f, "a speed may not be called `{name}`"),
            P::StepWithoutTime { state } => write!(f, "the step `{state}` does not say how long"),
            P::StepOfSeveral => f.write_str("a step has one state"),
            P::DuplicateName { name, .. } => write!(f, "the name `{name}` is given twice"),
            P::UnknownAccessory { found, .. } => write!(f, "no accessory is called `{found}`"),
            P::WithItself { key } => write!(f, "`{key}` names the accessory itself"),
            P::TogetherAndApart { name } => write!(f, "`{name}` cannot be both together and apart"),
            P::Both { one, other } => write!(f, "both `{one}` and `{other}` are given"),
            P::NoneOf { keys, .. } => write!(f, "none of {} is given", any_of(keys)),
            P::Reversed { low, high } => write!(f, "{low} is not below {high}"),
            P::NotRising { what } => write!(f, "{what} must rise from each row to the next"),
        }
    }
}

impl SenseProblem {
    /// What to write beside the mark on the line.
    pub(super) fn label(&self) -> String {
        use SenseProblem as P;
        let near = |found: &str, names: &[String]| match nearest(
            found,
            names.iter().map(String::as_str),
        ) {
            Some(near) => format!("did you mean `{near}`?"),
            None => "not defined".into(),
        };
        match self {
            P::EmptyShift => "must have at least one step".into(),
            P::UnknownState { found, states } => near(found, states),
            P::ReservedName { .. } => "the name of a state".into(),
            P::StepWithoutTime { .. } => "no time".into(),
            P::StepOfSeveral => "write each as a step of its own".into(),
            P::DuplicateName { .. } => "here again".into(),
            P::UnknownAccessory { found, names } => near(found, names),
            P::WithItself { .. } => "the accessory itself".into(),
            P::TogetherAndApart { .. } => "`together` above, `apart` here".into(),
            P::Both { .. } => "keep one of the two".into(),
            P::NoneOf { .. } => "incomplete".into(),
            P::Reversed { high, .. } => format!("must be below {high}"),
            P::NotRising { .. } => "not above the row before".into(),
        }
    }

    /// What would do.
    pub(super) fn help(&self) -> Option<String> {
        use SenseProblem as P;
        Some(match self {
            P::EmptyShift => "write the steps in order, like `- governed: 1 h 35 min`".into(),
            P::UnknownState { states, .. } => format!("states here: {}", list(states)),
            P::ReservedName { .. } => {
                "`crank`, `stopped` and `parked` are states of every machine; choose another name"
                    .into()
            }
            P::StepWithoutTime { state } => format!("write it like `{state}: 20 min`"),
            P::StepOfSeveral => "put `- ` before each state".into(),
            P::DuplicateName { .. } => "give each a name of its own, or use `count`".into(),
            P::UnknownAccessory { names, .. } => format!("accessories here: {}", list(names)),
            P::WithItself { .. } => "name another accessory".into(),
            P::TogetherAndApart { .. } | P::Both { .. } => return None,
            P::NoneOf { example, .. } => format!("add `{example}`"),
            P::Reversed { .. } | P::NotRising { .. } => return None,
        })
    }
}
