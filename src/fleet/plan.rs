//! What is to be judged: a row for each machine, kit and season, in the order of the file.

use super::files;
use crate::description::fleet::{FleetText, MachineText};
use crate::description::{Assignment, Written};
use crate::quantity::Celsius;
use std::path::{Path, PathBuf};
use std::sync::Arc;

/// The word for no kit.
pub const NO_KIT: &str = "none";

/// All that is to be judged.
#[derive(Clone, Debug)]
pub struct Plan {
    /// Name of the fleet.
    pub name: String,
    /// Folder that build and kit files stand in.
    pub folder: PathBuf,
    /// The rows, in the order of the file.
    pub entries: Vec<Entry>,
}

/// One row to judge.
#[derive(Clone, Debug)]
pub struct Entry {
    /// What the machine is called.
    pub machine: Arc<str>,
    /// Its build file as the fleet file names it, or as its pattern found it.
    pub build: Arc<str>,
    /// How many there are of it.
    pub count: u32,
    /// The kit to fit.
    pub kit: Option<Arc<str>>,
    /// The season, where the fleet file has seasons.
    pub season: Option<Arc<str>>,
    /// Air temperature, in place of the build's own.
    pub air: Option<Celsius>,
    /// Changes to the build.
    pub set: Arc<[Assignment]>,
    /// What is wrong with the row itself.
    pub fault: Option<Arc<str>>,
}

impl Plan {
    /// Of a fleet file in YAML. `path` is where it stands: builds and kits are looked for beside it.
    #[must_use]
    pub fn of_text(text: &FleetText, path: &Path) -> Plan {
        let folder = files::folder(path);
        let shared = |w: &Written<String>| some_kit(&w.value);
        let kits: Vec<Option<Arc<str>>> = text.kits.iter().map(shared).collect();
        let seasons: Vec<(Arc<str>, Celsius)> = text
            .seasons
            .iter()
            .map(|(name, air)| (name.as_str().into(), air.value))
            .collect();
        let mut entries = Vec::new();
        for machine in &text.machines {
            for row in of_machine(machine, &folder) {
                crossed(&row, machine, &kits, &seasons, &mut entries);
            }
        }
        let stem = || files::stem(path);
        Plan {
            name: text.fleet.as_ref().map_or_else(stem, |n| n.value.clone()),
            folder,
            entries,
        }
    }

    /// The same with kits tried on every row that has none; `none` is the machine as it is.
    #[must_use]
    pub fn with_kits(mut self, kits: &[String]) -> Plan {
        if kits.is_empty() {
            return self;
        }
        let kits: Vec<Option<Arc<str>>> = kits.iter().map(|kit| some_kit(kit)).collect();
        let entries = std::mem::take(&mut self.entries);
        for entry in entries {
            if entry.kit.is_some() {
                self.entries.push(entry);
                continue;
            }
            self.entries.extend(kits.iter().map(|kit| Entry {
                kit: kit.clone(),
                ..entry.clone()
            }));
        }
        self
    }
}

/// A kit's name, or none for the word that says so.
pub(super) fn some_kit(name: &str) -> Option<Arc<str>> {
    (!name.is_empty() && name != NO_KIT).then(|| name.into())
}

/// A row for each build file of an entry, without the kits and seasons of all.
fn of_machine(machine: &MachineText, folder: &Path) -> Vec<Entry> {
    let Some(build) = &machine.build else {
        return Vec::new();
    };
    let row = Entry {
        machine: machine.machine.as_ref().map_or("", |m| &m.value).into(),
        build: build.value.as_str().into(),
        count: machine.count.as_ref().map_or(1, |c| c.value),
        kit: machine.kit.as_ref().and_then(|kit| some_kit(&kit.value)),
        season: None,
        air: machine.air.as_ref().map(|air| air.value),
        set: machine.set.as_slice().into(),
        fault: None,
    };
    files::found(row, folder)
}

/// A row in every kit and season that it does not name itself.
fn crossed(
    row: &Entry,
    machine: &MachineText,
    kits: &[Option<Arc<str>>],
    seasons: &[(Arc<str>, Celsius)],
    entries: &mut Vec<Entry>,
) {
    let own_kit = [row.kit.clone()];
    let kits = if machine.kit.is_some() || kits.is_empty() {
        &own_kit[..]
    } else {
        kits
    };
    let all_year = seasons.is_empty() || row.air.is_some();
    for kit in kits {
        let kit = kit.clone();
        if all_year {
            entries.push(Entry { kit, ..row.clone() });
            continue;
        }
        entries.extend(seasons.iter().map(|(name, air)| Entry {
            kit: kit.clone(),
            season: Some(name.clone()),
            air: Some(*air),
            ..row.clone()
        }));
    }
}
