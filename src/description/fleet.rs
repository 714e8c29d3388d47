//! A fleet file as written: machines with their build files, and kits and seasons to try on all of them.

use super::{Assignment, Written};
use crate::quantity::Celsius;

/// A fleet file.
#[derive(Clone, Debug, Default)]
pub struct FleetText {
    /// Its name.
    pub fleet: Option<Written<String>>,
    /// Kits to try on every machine that names none of its own; `none` is the machine as it is.
    pub kits: Vec<Written<String>>,
    /// Air temperatures to try on every machine that names none of its own, by name.
    pub seasons: Vec<(String, Written<Celsius>)>,
    /// The machines, in the order written.
    pub machines: Vec<MachineText>,
}

/// An entry of `machines:`.
#[derive(Clone, Debug, Default)]
pub struct MachineText {
    /// Path of the entry.
    pub path: String,
    /// What it is called; its build file's name where it is not.
    pub machine: Option<Written<String>>,
    /// Its build file, or a pattern (`mowers/*.yaml`) of several, beside the fleet file.
    pub build: Option<Written<String>>,
    /// How many there are of it.
    pub count: Option<Written<u32>>,
    /// The kit to fit, `none` for none.
    pub kit: Option<Written<String>>,
    /// Air temperature, in place of the build's own.
    pub air: Option<Written<Celsius>>,
    /// Changes to its build, as `--set` takes them.
    pub set: Vec<Assignment>,
}
