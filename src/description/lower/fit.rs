//! Whether the parts of a file fit each other: states and names.

use super::Lower;
use crate::description::{AccessoryText, DutyText, EngineText, MayText, StepText, Written};
use crate::problem::{Problem, SenseProblem};
use std::collections::{BTreeMap, BTreeSet};
use std::sync::Arc;

impl Lower<'_> {
    /// States of steps and duties, names of accessories.
    pub(super) fn fit(
        &mut self,
        engine: &EngineText,
        accessories: &[AccessoryText],
        shift: &[StepText],
        may: Option<&MayText>,
    ) {
        let speeds: Vec<String> = engine.speeds.iter().map(|(name, _)| name.clone()).collect();
        // a speed whose value is wrong is defined all the same
        let written = self.places.find("engine.speeds").map(|f| f.place);
        let keys = written.map(|place| self.places.keys(place).map(str::to_owned).collect());
        let mut states: Vec<String> = keys.unwrap_or(speeds);
        let speeds = states.clone();
        states.retain(|s| s != "stopped" && s != "crank");
        states.extend(["stopped".to_owned(), "crank".to_owned()]);
        let mut steps = shift.iter();
        while let Some(step) = self.looked_at(&mut steps) {
            self.state(&step.state, &states);
        }
        let mut entries = accessories.iter();
        while let Some(accessory) = self.looked_at(&mut entries) {
            if let Some(DutyText::ByState { shares, .. }) = &accessory.duty {
                for (state, _) in shares {
                    self.state(state, &states);
                }
            }
        }
        if self.problems.more() {
            return;
        }
        let names = self.unique_names(accessories);
        self.company(accessories, &names);
        if let Some(may) = may {
            self.permissions(may, &speeds, accessories, &names);
        }
    }

    fn state(&mut self, state: &Written<String>, states: &[String]) {
        if !states.contains(&state.value) {
            let problem = SenseProblem::UnknownState {
                found: state.value.clone(),
                states: states.to_vec(),
            };
            let problem = Problem::key(state.path.as_str(), problem);
            self.problem(if state.value == "parked" {
                problem.with_help("the time between shifts is the key `parked`, beside `shift`")
            } else {
                problem
            });
        }
    }

    /// Each name once; gives what entries may be called by.
    fn unique_names(&mut self, accessories: &[AccessoryText]) -> Arc<[String]> {
        let mut first: BTreeMap<&str, &str> = BTreeMap::new();
        let mut names = Vec::new();
        for accessory in accessories {
            if let Some(name) = &accessory.name {
                if let Some(first) = first.get(name.value.as_str()) {
                    let problem = SenseProblem::DuplicateName {
                        name: name.value.clone(),
                        first: (*first).to_owned(),
                    };
                    self.problem(Problem::value(name.path.as_str(), problem));
                } else {
                    first.insert(&name.value, &name.path);
                    names.push(name.value.clone());
                }
            } else if let Some(part) = &accessory.part {
                names.push(part.value.clone());
            }
        }
        names.into()
    }

    /// `together` and `apart` name other accessories, and not the same one.
    fn company(&mut self, accessories: &[AccessoryText], names: &Arc<[String]>) {
        // a part without a name of its own is called by its catalog title, which is not known here
        let all_named = accessories.iter().all(|a| a.name.is_some());
        let known: BTreeSet<&str> = names.iter().map(String::as_str).collect();
        let mut entries = accessories.iter();
        while let Some(accessory) = self.looked_at(&mut entries) {
            let own = accessory
                .name
                .as_ref()
                .or(accessory.part.as_ref())
                .map(|n| &n.value);
            for (key, others) in [
                ("together", &accessory.together),
                ("apart", &accessory.apart),
            ] {
                let mut others = others.iter();
                while let Some(other) = self.looked_at(&mut others) {
                    if Some(&other.value) == own {
                        self.problem(Problem::value(
                            other.path.as_str(),
                            SenseProblem::WithItself { key },
                        ));
                    } else if all_named && !known.contains(other.value.as_str()) {
                        self.unknown_accessory(&other.value, Problem::value, &other.path, names);
                    }
                }
            }
            for other in &accessory.apart {
                if accessory.together.iter().any(|t| t.value == other.value) {
                    let name = other.value.clone();
                    self.problem(Problem::value(
                        other.path.as_str(),
                        SenseProblem::TogetherAndApart { name },
                    ));
                }
            }
        }
    }

    fn unknown_accessory(
        &mut self,
        found: &str,
        mark: fn(String, SenseProblem) -> Problem,
        path: &str,
        names: &Arc<[String]>,
    ) {
        let problem = SenseProblem::UnknownAccessory {
            found: found.to_owned(),
            names: names.clone(),
        };
        self.problem(mark(path.to_owned(), problem));
    }

    /// `may:` names speeds and accessories that there are.
    fn permissions(
        &mut self,
        may: &MayText,
        speeds: &[String],
        accessories: &[AccessoryText],
        names: &Arc<[String]>,
    ) {
        for (name, rpm) in &may.speeds {
            if !speeds.contains(name) {
                let problem = SenseProblem::UnknownState {
                    found: name.clone(),
                    states: speeds.to_vec(),
                };
                self.problem(Problem::key(rpm.path.as_str(), problem));
            }
        }
        let all_named = accessories.iter().all(|a| a.name.is_some());
        for (name, share) in &may.duty {
            if all_named && !names.contains(name) {
                self.unknown_accessory(name, Problem::key, &share.path, names);
            }
        }
    }
}
