//! What can be wrong with a build that reads well: names that lead nowhere, figures that contradict each other,
//! connections that must not be.

use crate::catalog::Kind;
use crate::identify::IdentifyError;
use crate::problem::{Problem, ProblemKind, words};
use crate::quantity::{Fraction, format};
use crate::source::{ConstantsError, CurveError};
use std::fmt;

/// One thing wrong.
#[derive(Clone, Debug, PartialEq)]
pub enum Fault {
    /// A key without which nothing follows, on an entry that names no part that would give it.
    Missing {
        /// The keys, any of which would do.
        keys: &'static str,
    },
    /// A part that is in no catalog.
    UnknownPart {
        /// The id.
        id: String,
        /// What kind of part.
        kind: Kind,
        /// The nearest id there is.
        nearest: Option<String>,
    },
    /// Parts that name each other in a circle.
    PartCycle {
        /// The ids, in the order followed.
        ids: Vec<String>,
    },
    /// An entry of a catalog that does not read.
    BadPart {
        /// Its id.
        id: String,
        /// The file it stands in.
        file: String,
        /// What is wrong.
        why: String,
    },
    /// A name that nothing in the build has.
    UnknownName {
        /// What it should name: `speed`, `circuit`, `accessory`.
        what: &'static str,
        /// The name.
        name: String,
        /// The names there are.
        known: Vec<String>,
    },
    /// A speed named as a state that is no speed.
    ReservedName {
        /// The name.
        name: String,
    },
    /// A shift without steps.
    EmptyShift,
    /// A step without its time.
    NoTime {
        /// Its state.
        state: String,
    },
    /// A start without a starter or a battery.
    CannotCrank {
        /// What is lacking: `engine.starter` or `battery`.
        lacks: &'static str,
    },
    /// An entry with both a winding and an alternator, or with neither.
    WindingOrAlternator {
        /// Whether there are both.
        both: bool,
    },
    /// Figures of a winding that do not go together.
    Winding(ConstantsError),
    /// Bench readings that lead to no winding.
    Readings(IdentifyError),
    /// Points that make no output curve.
    Curve(CurveError),
    /// Alternating current into the battery.
    AcIntoBattery,
    /// A regulator without a rectifier.
    RegulatorOnAc,
    /// Three phases without a bridge.
    ThreePhaseNeedsBridge,
    /// A winding that should feed a battery that is not there.
    FeedsNoBattery,
    /// Two windings on one circuit of their own.
    CircuitTwice {
        /// The circuit.
        circuit: String,
    },
    /// An accessory that hangs on a battery that is not there.
    NoBus,
    /// An accessory on a braking winding.
    OnBrakingWinding {
        /// The accessory.
        name: String,
    },
    /// A braking winding on the battery.
    BrakingFeedsBattery,
    /// An accessory of direct current on alternating current.
    NeedsDc {
        /// The accessory.
        name: String,
        /// Whether it draws constant power (else constant current).
        power: bool,
    },
    /// Two accessories of one name.
    NameTwice {
        /// The name.
        name: String,
    },
    /// An accessory that is to be with or without itself.
    WithItself,
    /// An accessory in a group of coinciding duties and in one of excluding ones.
    TogetherAndApart {
        /// The accessory.
        name: String,
    },
    /// Duties that exclude each other and take more than the whole time.
    ApartOverfull {
        /// The state.
        state: String,
        /// The accessories.
        names: Vec<String>,
        /// The sum of their duties.
        sum: Fraction,
    },
}

impl fmt::Display for Fault {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Fault::Missing { keys } => write!(f, "{keys} is missing"),
            Fault::UnknownPart { id, kind, .. } => {
                write!(f, "no part `{id}` under `{}` of the catalogs", kind.key())
            }
            Fault::PartCycle { ids } => {
                write!(
                    f,
                    "parts name each other in a circle: {}",
                    list(ids, " to ")
                )
            }
            Fault::BadPart { id, file, why } => write!(f, "part `{id}` of {file}: {why}"),
            Fault::UnknownName { what, name, .. } => write!(f, "no {what} is named `{name}`"),
            Fault::ReservedName { name } => write!(f, "a speed cannot be named `{name}`"),
            Fault::EmptyShift => write!(f, "the shift has no steps"),
            Fault::NoTime { state } => write!(f, "`{state}` has no time"),
            Fault::CannotCrank { lacks } => write!(f, "`crank` needs `{lacks}`"),
            Fault::WindingOrAlternator { both: true } => {
                write!(
                    f,
                    "both `winding` and `alternator`: each is an entry of its own"
                )
            }
            Fault::WindingOrAlternator { both: false } => {
                write!(f, "neither `winding`, `alternator` nor `part`")
            }
            Fault::Winding(error) => write!(f, "{error}"),
            Fault::Readings(error) => write!(f, "{error}"),
            Fault::Curve(error) => write!(f, "{error}"),
            other => other.connection(f),
        }
    }
}

impl Fault {
    /// The faults of what is connected to what.
    fn connection(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Fault::AcIntoBattery => {
                write!(f, "a winding without a rectifier cannot feed the battery")
            }
            Fault::RegulatorOnAc => write!(f, "a regulator needs a rectifier"),
            Fault::ThreePhaseNeedsBridge => write!(f, "three phases need `rectifier: full-wave`"),
            Fault::FeedsNoBattery => write!(f, "it feeds the battery, and there is none"),
            Fault::CircuitTwice { circuit } => {
                write!(f, "two windings feed the circuit `{circuit}`")
            }
            Fault::NoBus => write!(f, "it hangs on the battery, and there is none"),
            Fault::OnBrakingWinding { name } => {
                write!(
                    f,
                    "`{name}` hangs on a braking winding, which must carry no accessory"
                )
            }
            Fault::BrakingFeedsBattery => {
                write!(
                    f,
                    "a braking winding must not feed the battery, whose accessories it would carry"
                )
            }
            Fault::NeedsDc { name, power } => {
                let what = if *power {
                    "constant power"
                } else {
                    "a constant current"
                };
                write!(f, "`{name}` draws {what} and hangs on alternating current")
            }
            Fault::NameTwice { name } => write!(f, "two accessories are named `{name}`"),
            Fault::WithItself => write!(f, "an accessory is named in its own group"),
            Fault::TogetherAndApart { name } => {
                write!(
                    f,
                    "`{name}` is both `together` and `apart`: an accessory is in one group"
                )
            }
            Fault::ApartOverfull { state, names, sum } => write!(
                f,
                "{} are never on together, yet take {} of `{state}`",
                list(names, " and "),
                format::text(*sum)
            ),
            _ => Ok(()),
        }
    }

    /// What would mend it, where that can be said.
    #[must_use]
    pub fn help(&self) -> Option<String> {
        match self {
            Fault::UnknownPart { .. } => Some("`ampledger parts` lists what there is".to_owned()),
            Fault::UnknownName { known, .. } if known.is_empty() => Some("there is none".to_owned()),
            Fault::UnknownName { known, .. } => Some(format!("names here: {}", words::list(known))),
            Fault::ReservedName { .. } => {
                Some("`crank`, `stopped` and `parked` are states of their own".to_owned())
            }
            Fault::NoTime { state } => Some(format!("write `{state}: 20 min`")),
            Fault::AcIntoBattery => Some(
                "write `rectifier: full-wave`, or `feeds:` with the name of its own circuit".to_owned(),
            ),
            Fault::FeedsNoBattery => {
                Some("add `battery:`, or `feeds:` with the name of its own circuit".to_owned())
            }
            Fault::NoBus => {
                Some("add `battery:`, or `circuit:` with the name of a winding's circuit".to_owned())
            }
            Fault::OnBrakingWinding { .. } | Fault::BrakingFeedsBattery => Some(
                "the interlock grounds that winding to stop the blades: a load on it can keep them turning".to_owned(),
            ),
            Fault::NeedsDc { .. } => Some(
                "lamps and heaters: `law: filament` or `law: resistance` with `at:`; electronics made for it: `accepts_ac: true`"
                    .to_owned(),
            ),
            Fault::NameTwice { .. } => Some("one entry with `count:`, or two names".to_owned()),
            _ => None,
        }
    }
}

impl Fault {
    /// The fault that a problem is, where it is one.
    #[must_use]
    pub fn of(problem: &Problem) -> Option<&Fault> {
        match &problem.kind {
            ProblemKind::Fault(fault) => Some(fault),
            _ => None,
        }
    }

    /// What to write beside the mark on the line.
    #[must_use]
    pub fn label(&self) -> String {
        let near = match self {
            Fault::UnknownPart { nearest, .. } => nearest.as_deref(),
            Fault::UnknownName { name, known, .. } => {
                words::nearest(name, known.iter().map(String::as_str))
            }
            _ => None,
        };
        if let Some(near) = near {
            return format!("did you mean `{near}`?");
        }
        match self {
            Fault::Missing { .. } | Fault::WindingOrAlternator { both: false } => "incomplete",
            Fault::UnknownPart { .. } | Fault::UnknownName { .. } => "not there",
            Fault::Winding(_) | Fault::Readings(_) => "these figures",
            Fault::EmptyShift | Fault::NoTime { .. } => "no time",
            Fault::NameTwice { .. } => "here again",
            Fault::OnBrakingWinding { .. } | Fault::BrakingFeedsBattery => "refused for safety",
            Fault::ApartOverfull { .. } => "more than the whole time",
            _ => "here",
        }
        .to_owned()
    }
}

/// Names in backticks.
fn list(names: &[String], between: &str) -> String {
    let quoted: Vec<String> = names.iter().map(|n| format!("`{n}`")).collect();
    quoted.join(between)
}
