//! A fleet file.

use super::{Entries, Lower};
use crate::description::fleet::{FleetText, MachineText};
use crate::description::raw::{self, Leaf, List, Map};
use crate::description::{Assignment, path};
use crate::problem::{Part, Problem, SenseProblem};
use crate::quantity::bounds;

impl Lower<'_> {
    /// The whole file.
    pub(in crate::description) fn fleet(&mut self, root: &Map<raw::Fleet>) -> Option<FleetText> {
        let raw = self.map(root, "")?;
        if raw.machines.is_absent() {
            self.missing("", "machines", "machines: [{build: mower.yaml, count: 4}]");
        }
        let mut seasons = Vec::new();
        if !raw.seasons.is_absent() {
            for (name, leaf) in self.named(&raw.seasons, "seasons").unwrap_or_default() {
                let at = path::key("seasons", name);
                if let Some(air) = self.quantity_at(at, leaf, &bounds::AIR) {
                    seasons.push((name.clone(), air));
                }
            }
        }
        let mut entries = self.list(&raw.machines, "machines");
        if entries.as_ref().is_some_and(Entries::is_empty) {
            let none = SenseProblem::NoneOf {
                keys: &["build"],
                example: "- {build: mower.yaml, count: 4}",
            };
            self.problem(Problem::value("machines", none));
        }
        let mut machines = Vec::new();
        while let Some((at, entry)) = self.entry(&mut entries) {
            machines.extend(self.machine(&entry, at));
        }
        Some(FleetText {
            fleet: self.name("", "fleet", &raw.fleet),
            kits: self.names(&raw.kits, "", "kits"),
            seasons,
            machines,
        })
    }

    fn machine(&mut self, entry: &Map<raw::Machine>, at: String) -> Option<MachineText> {
        let raw = self.map(entry, &at)?;
        if raw.build.is_absent() {
            self.missing(&at, "build", "build: mower.yaml");
        }
        let count = (
            "count",
            "1 to 100000",
            (|n| (1..=100_000).contains(&n)) as fn(u32) -> bool,
        );
        Some(MachineText {
            machine: self.name(&at, "machine", &raw.machine),
            build: self.name(&at, "build", &raw.build),
            count: self.count(&at, "count", &raw.count, count),
            kit: self.name(&at, "kit", &raw.kit),
            air: self.quantity(&at, "air", &raw.air, &bounds::AIR),
            set: self.assignments(&raw.set, &at),
            path: at,
        })
    }

    /// Changes as `--set` takes them: one, or a list.
    fn assignments(&mut self, node: &List<Leaf>, at: &str) -> Vec<Assignment> {
        let mut out = Vec::new();
        for text in self.names(node, at, "set") {
            match Assignment::parse(&text.value) {
                Ok(assignment) => out.push(assignment),
                Err(problem) => self.problem(Problem {
                    path: text.path,
                    part: Part::Value,
                    kind: problem.into(),
                    help: None,
                }),
            }
        }
        out
    }
}
