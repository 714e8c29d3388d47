//! `accessories:`.

use super::Lower;
use super::leaf::written;
use crate::description::accessory::LoadKind;
use crate::description::raw::{self, Leaf, List, Map, Named, Node};
use crate::description::{
    AccessoryText, DrawText, DutyText, InrushText, LawName, ReturnPath, WorksText, Written, path,
};
use crate::problem::{Problem, SenseProblem};
use crate::quantity::bounds;
use crate::quantity::parse::{self, Draw, Measured};

/// `law:`.
pub(crate) const LAWS: &[(&str, LawName)] = &[
    ("resistance", LawName::Resistance),
    ("current", LawName::Current),
    ("power", LawName::Power),
    ("filament", LawName::Filament),
];
/// `kind:`.
pub(crate) const KINDS: &[(&str, LoadKind)] = &[
    ("lamp", LoadKind::Lamp),
    ("motor", LoadKind::Motor),
    ("heater", LoadKind::Heater),
    ("coil", LoadKind::Coil),
    ("electronics", LoadKind::Electronics),
];
/// `returns:`.
pub(crate) const RETURNS: &[(&str, ReturnPath)] =
    &[("frame", ReturnPath::Frame), ("wire", ReturnPath::Wire)];

impl Lower<'_> {
    /// `accessories:`, of the machine or of a kit.
    pub(in crate::description) fn accessories(
        &mut self,
        node: &List<Map<raw::Accessory>>,
        at: &str,
    ) -> Vec<AccessoryText> {
        let mut entries = self.list(node, at);
        let mut out = Vec::new();
        while let Some((at, entry)) = self.entry(&mut entries) {
            let Some(raw) = self.map(&entry, &at) else {
                continue;
            };
            if raw.part.is_absent() {
                if raw.name.is_absent() {
                    self.missing(&at, "name", "name: Work light");
                }
                if raw.draw.is_absent() {
                    self.missing(&at, "draw", "draw: 55 W");
                }
            }
            out.push(self.accessory(raw, &at));
        }
        out
    }

    /// One accessory, of the machine or of a catalog.
    pub(in crate::description) fn accessory(
        &mut self,
        raw: &raw::Accessory,
        at: &str,
    ) -> AccessoryText {
        AccessoryText {
            path: at.to_owned(),
            name: self.name(at, "name", &raw.name),
            part: self.name(at, "part", &raw.part),
            count: self.count(
                at,
                "count",
                &raw.count,
                ("count", "1 to 1000", |n| (1..=1000).contains(&n)),
            ),
            draw: self.draw(raw, at),
            law: self.word(at, "law", &raw.law, ("law of a draw", LAWS)),
            at: self.quantity(at, "at", &raw.at, &bounds::STATED_AT),
            duty: self.duty(&raw.duty, at),
            works: self.works(raw, at),
            inrush: self.inrush(raw, at),
            circuit: self.name(at, "circuit", &raw.circuit),
            parked: self.quantity(at, "parked", &raw.parked, &bounds::PARKED_DRAW),
            coil: self.quantity(at, "coil", &raw.coil, &bounds::COIL),
            together: self.names(&raw.together, at, "together"),
            apart: self.names(&raw.apart, at, "apart"),
            price: self.quantity(at, "price", &raw.price, &bounds::PRICE),
            run: self.quantity(at, "run", &raw.run, &bounds::RUN),
            feed: self.name(at, "feed", &raw.feed),
            kind: self.word(at, "kind", &raw.kind, ("kind of load", KINDS)),
            max_drop: self.quantity(at, "max_drop", &raw.max_drop, &bounds::MAX_DROP),
            returns: self.word(
                at,
                "returns",
                &raw.returns,
                ("way back of the current", RETURNS),
            ),
            insulation: self.quantity(at, "insulation", &raw.insulation, &bounds::INSULATION),
            accepts_ac: self.yes_no(at, "accepts_ac", &raw.accepts_ac),
            lumens: self.factor(at, "lumens", &raw.lumens, &bounds::LUMENS),
        }
    }

    fn draw(&mut self, raw: &raw::Accessory, at: &str) -> Option<Written<DrawText>> {
        let wanted = "a power, a current or a resistance";
        let (measured, text, path) = self.parsed(at, "draw", &raw.draw, wanted, parse::draw)?;
        let value = match measured.value {
            Draw::Current(amps) => {
                self.bounded(&path, &text, amps, &bounds::DRAW_CURRENT)?;
                DrawText::Current(amps)
            }
            Draw::Resistance(ohms) => {
                self.bounded(&path, &text, ohms, &bounds::DRAW_RESISTANCE)?;
                DrawText::Resistance(ohms)
            }
            Draw::Power(watts) => {
                self.bounded(&path, &text, watts, &bounds::DRAW_POWER)?;
                DrawText::Power(watts)
            }
        };
        Some(written(
            Measured {
                value,
                tolerance: measured.tolerance,
            },
            path,
        ))
    }

    /// One share, or a share by state.
    fn duty(&mut self, node: &Named<Leaf>, at: &str) -> Option<DutyText> {
        if matches!(node, Node::Absent) {
            return None;
        }
        let at = path::key(at, "duty");
        match node {
            Node::Mapping(names) => {
                let mut shares = Vec::new();
                let mut entries = names.0.iter();
                while let Some((state, leaf)) = self.looked_at(&mut entries) {
                    let path = path::key(&at, state);
                    if let Some(share) = self.quantity_at(path.clone(), leaf, &bounds::DUTY) {
                        shares.push((Written::exact(state.clone(), path), share));
                    }
                }
                Some(DutyText::ByState { path: at, shares })
            }
            single => self
                .quantity_at(at, single, &bounds::DUTY)
                .map(DutyText::Everywhere),
        }
    }

    fn works(&mut self, raw: &raw::Accessory, at: &str) -> Option<Written<WorksText>> {
        let wanted = "two voltages, like `10.5 V to 16 V`";
        let ((low, high), text, path) =
            self.parsed(at, "works", &raw.works, wanted, parse::between)?;
        self.bounded(&path, &text, low, &bounds::WORKS)?;
        self.bounded(&path, &text, high, &bounds::WORKS)?;
        if low >= high {
            let reversed = SenseProblem::Reversed {
                low: "the lower end",
                high: "the upper end",
            };
            self.problem(Problem::value(path, reversed));
            return None;
        }
        Some(Written::exact(WorksText { low, high }, path))
    }

    fn inrush(&mut self, raw: &raw::Accessory, at: &str) -> Option<Written<InrushText>> {
        let wanted = "a multiple and a time, like `8 x for 0.2 s`";
        let ((times, time), text, path) =
            self.parsed(at, "inrush", &raw.inrush, wanted, parse::surge)?;
        self.bounded(&path, &text, times, &bounds::INRUSH)?;
        self.bounded(&path, &text, time, &bounds::INRUSH_TIME)?;
        Some(Written::exact(InrushText { times, time }, path))
    }

    /// A name, or a list of names.
    pub(super) fn names(&mut self, node: &List<Leaf>, at: &str, key: &str) -> Vec<Written<String>> {
        if matches!(node, Node::Absent) {
            return Vec::new();
        }
        let path = path::key(at, key);
        match node {
            Node::List(_) => {
                let mut entries = self.list(node, &path);
                let mut out = Vec::new();
                while let Some((path, leaf)) = self.entry(&mut entries) {
                    out.extend(self.name_at(path, &leaf));
                }
                out
            }
            single => self.name_at(path, single).into_iter().collect(),
        }
    }
}
