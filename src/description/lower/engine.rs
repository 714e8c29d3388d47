//! `engine:` and `shift:`.

use super::{Entries, Lower};
use crate::description::raw::{self, Leaf, List, Map, Named, Node};
use crate::description::{EngineText, StarterText, StepText, Written, path};
use crate::problem::words::space_after_colon;
use crate::problem::{Problem, SenseProblem};
use crate::quantity::parse::parse;
use crate::quantity::{Hours, Rpm, bounds};

impl Lower<'_> {
    /// `engine:`.
    pub(super) fn engine(&mut self, node: &Map<raw::Engine>) -> EngineText {
        let example = "engine: {speeds: {idle: 1800 rpm, governed: 3400 rpm}}";
        if node.is_absent() {
            self.missing("", "engine", example);
        }
        let Some(engine) = self.map(node, "engine") else {
            return EngineText::default();
        };
        if engine.speeds.is_absent() {
            self.missing(
                "engine",
                "speeds",
                "speeds: {idle: 1800 rpm, governed: 3400 rpm}",
            );
        }
        let speeds = self.speeds(&engine.speeds, "engine.speeds");
        for (name, rpm) in &speeds {
            if matches!(name.as_str(), "crank" | "stopped" | "parked") {
                self.problem(Problem::key(
                    rpm.path.as_str(),
                    SenseProblem::ReservedName { name: name.clone() },
                ));
            }
        }
        let starter = self
            .map(&engine.starter, "engine.starter")
            .map(|s| self.starter(s, "engine.starter"));
        EngineText { speeds, starter }
    }

    /// Named speeds.
    pub(super) fn speeds(&mut self, node: &Named<Leaf>, at: &str) -> Vec<(String, Written<Rpm>)> {
        let mut out = Vec::new();
        for (name, leaf) in self.named(node, at).unwrap_or_default() {
            if let Some(rpm) = self.quantity_at(path::key(at, name), leaf, &bounds::SPEED) {
                out.push((name.clone(), rpm));
            }
        }
        out
    }

    /// A starter, of the engine or of a catalog.
    pub(in crate::description) fn starter(&mut self, raw: &raw::Starter, at: &str) -> StarterText {
        StarterText {
            path: at.to_owned(),
            part: self.name(at, "part", &raw.part),
            draw: self.quantity(at, "draw", &raw.draw, &bounds::STARTER_DRAW),
            time: self.quantity(at, "time", &raw.time, &bounds::START_TIME),
            starts: self.count(
                at,
                "starts",
                &raw.starts,
                ("number of starts", "1 to 20", |n| (1..=20).contains(&n)),
            ),
            rest: self.quantity(at, "rest", &raw.rest, &bounds::START_REST),
            cable: self.quantity(at, "cable", &raw.cable, &bounds::CABLE),
            least_volts: self.quantity(at, "least_volts", &raw.least_volts, &bounds::STARTER_VOLTS),
        }
    }

    /// `shift:`.
    pub(super) fn shift(&mut self, node: &List<raw::Step>) -> Vec<StepText> {
        if node.is_absent() {
            self.missing("", "shift", "shift: [crank, {governed: 1 h 35 min}]");
        }
        let mut steps = self.list(node, "shift");
        if steps.as_ref().is_some_and(Entries::is_empty) {
            self.problem(Problem::value("shift", SenseProblem::EmptyShift));
        }
        let mut out = Vec::new();
        while let Some((at, step)) = self.entry(&mut steps) {
            out.extend(self.step(&step, at));
        }
        out
    }

    /// One step: `crank`, or a state and its time.
    fn step(&mut self, node: &raw::Step, at: String) -> Option<StepText> {
        let Node::Mapping(names) = node else {
            if let Node::List(_) | Node::Null = node {
                self.wrong_shape(node, &at, "a state and its time, like `idle: 12 min`");
                return None;
            }
            let state = self.name_at(at.clone(), node)?;
            if let Some(help) = space_after_colon(&state.value).or_else(|| colon(&state.value)) {
                let state = state.value;
                let problem = SenseProblem::StepWithoutTime { state };
                self.problem(Problem::value(at, problem).with_help(help));
                return None;
            }
            return self.timed(StepText {
                path: at,
                state,
                time: None,
            });
        };
        let [(state, time)] = names.0.as_slice() else {
            self.problem(Problem::value(at, SenseProblem::StepOfSeveral));
            return None;
        };
        let place = path::key(&at, state);
        let crank = state == "crank" && matches!(time, Node::Null);
        let time = match time {
            Node::Null => None,
            leaf => Some(self.quantity_at(place.clone(), leaf, &bounds::STEP_TIME)?),
        };
        let step = StepText {
            path: at,
            state: Written::exact(state.clone(), place),
            time,
        };
        if crank { Some(step) } else { self.timed(step) }
    }

    /// Every state but a crank must say how long.
    fn timed(&mut self, step: StepText) -> Option<StepText> {
        if step.time.is_none() && step.state.value != "crank" {
            let state = step.state.value.clone();
            self.problem(Problem::value(
                step.path.as_str(),
                SenseProblem::StepWithoutTime { state },
            ));
            // still held against the states there are
        }
        Some(step)
    }
}

/// What would do for `idle 10 min`, a state and its time without a colon.
fn colon(step: &str) -> Option<String> {
    let (state, time) = step.split_once(' ')?;
    parse::<Hours>(time).ok()?;
    Some(format!(
        "put a colon after the state: `{state}: {}`",
        time.trim()
    ))
}
