//! `charging:`.

use super::Lower;
use super::leaf::written;
use crate::description::charging::{RectifierKind, RegulatorKind};
use crate::description::raw::{self, List, Map, Node};
use crate::description::{
    AlternatorText, ChargingText, RatedText, ReadingText, RectifierText, RegulatorText,
    WindingText, Written, path,
};
use crate::problem::{Problem, SenseProblem};
use crate::quantity::parse::{self, Measured};
use crate::quantity::{Amps, Volts, bounds};
use crate::source::Magnets;

/// `magnets:`.
pub(crate) const MAGNETS: &[(&str, Magnets)] = &[
    ("ferrite", Magnets::Ferrite),
    ("rare-earth", Magnets::RareEarth),
];
/// `rectifier:`.
pub(crate) const RECTIFIERS: &[(&str, RectifierKind)] = &[
    ("half-wave", RectifierKind::HalfWave),
    ("full-wave", RectifierKind::FullWave),
    ("none", RectifierKind::None),
];
/// `regulator.kind:`.
pub(crate) const REGULATORS: &[(&str, RegulatorKind)] = &[
    ("series", RegulatorKind::Series),
    ("shunt", RegulatorKind::Shunt),
];

impl Lower<'_> {
    /// `charging:`.
    pub(super) fn charging_list(&mut self, node: &List<Map<raw::Charging>>) -> Vec<ChargingText> {
        if node.is_absent() {
            self.missing("", "charging", "charging: []");
        }
        let mut out = Vec::new();
        let mut entries = self.list(node, "charging");
        while let Some((at, entry)) = self.entry(&mut entries) {
            if let Some(raw) = self.map(&entry, &at) {
                out.push(self.charging(raw, &at));
            }
        }
        out
    }

    /// One entry, of the machine or of a catalog.
    pub(in crate::description) fn charging(
        &mut self,
        raw: &raw::Charging,
        at: &str,
    ) -> ChargingText {
        match (raw.winding.is_absent(), raw.alternator.is_absent()) {
            (false, false) => {
                let both = SenseProblem::Both {
                    one: "winding",
                    other: "alternator",
                };
                self.problem(Problem::key(path::key(at, "alternator"), both));
            }
            (true, true) if raw.part.is_absent() => {
                let keys = &["winding", "alternator", "part"];
                self.problem(Problem::value(
                    at,
                    SenseProblem::NoneOf {
                        keys,
                        example: "part: winding-16a",
                    },
                ));
            }
            _ => {}
        }
        let below = |key| path::key(at, key);
        let winding = self
            .map(&raw.winding, &below("winding"))
            .map(|w| self.winding(w, &below("winding")));
        let alternator = self
            .map(&raw.alternator, &below("alternator"))
            .map(|a| self.alternator(a, &below("alternator")));
        let regulator = self
            .map(&raw.regulator, &below("regulator"))
            .map(|r| self.regulator(r, &below("regulator")));
        ChargingText {
            path: at.to_owned(),
            name: self.name(at, "name", &raw.name),
            part: self.name(at, "part", &raw.part),
            winding,
            alternator,
            rectifier: self.rectifier(&raw.rectifier, at),
            regulator,
            price: self.quantity(at, "price", &raw.price, &bounds::PRICE),
        }
    }

    fn winding(&mut self, raw: &raw::Winding, at: &str) -> WindingText {
        let poles = (
            "number of poles",
            "even, 2 to 200",
            (|n| (2..=200).contains(&n) && n % 2 == 0) as fn(u32) -> bool,
        );
        WindingText {
            path: at.to_owned(),
            rated: self.rated(raw, at),
            open_circuit: self.open_circuit(raw, at),
            resistance: self.quantity(
                at,
                "resistance",
                &raw.resistance,
                &bounds::WINDING_RESISTANCE,
            ),
            inductance: self.quantity(at, "inductance", &raw.inductance, &bounds::INDUCTANCE),
            readings: self.readings(&raw.readings, path::key(at, "readings")),
            poles: self.count(at, "poles", &raw.poles, poles),
            phases: self.count(
                at,
                "phases",
                &raw.phases,
                ("number of phases", "1 or 3", |n| n == 1 || n == 3),
            ),
            working: self.quantity(at, "working", &raw.working, &bounds::WORKING),
            magnets: self.word(at, "magnets", &raw.magnets, ("kind of magnet", MAGNETS)),
            scale: self.factor(at, "scale", &raw.scale, &bounds::SCALE),
            feeds: self.name(at, "feeds", &raw.feeds),
            braking: self.yes_no(at, "braking", &raw.braking),
        }
    }

    fn rated(
        &mut self,
        raw: &raw::Winding,
        at: &str,
    ) -> Option<crate::description::Written<RatedText>> {
        let wanted = "amps at a speed, like `16 A at 3600 rpm`";
        let (measured, text, path) = self.parsed(at, "rated", &raw.rated, wanted, parse::rated)?;
        let (amps, rpm, volts) = measured.value;
        self.bounded(&path, &text, amps, &bounds::RATED_CURRENT)?;
        self.bounded(&path, &text, rpm, &bounds::TURNING)?;
        if let Some(volts) = volts {
            self.bounded(&path, &text, volts, &bounds::RATED_VOLTS)?;
        }
        let value = RatedText { amps, rpm, volts };
        Some(written(
            Measured {
                value,
                tolerance: measured.tolerance,
            },
            path,
        ))
    }

    fn open_circuit(
        &mut self,
        raw: &raw::Winding,
        at: &str,
    ) -> Option<crate::description::Written<(Volts, crate::quantity::Rpm)>> {
        let wanted = "volts at a speed, like `28 V at 3600 rpm`";
        let (measured, text, path) = self.parsed(
            at,
            "open_circuit",
            &raw.open_circuit,
            wanted,
            parse::at_speed::<Volts>,
        )?;
        let (volts, rpm) = measured.value;
        self.bounded(&path, &text, volts, &bounds::OPEN_CIRCUIT)?;
        self.bounded(&path, &text, rpm, &bounds::TURNING)?;
        Some(written(measured, path))
    }

    fn readings(&mut self, node: &List<Map<raw::Reading>>, at: String) -> Vec<ReadingText> {
        let mut out = Vec::new();
        let mut rows = self.list(node, &at);
        while let Some((path, row)) = self.entry(&mut rows) {
            let Some(raw) = self.map(&row, &path) else {
                continue;
            };
            for (key, leaf, example) in [
                ("rpm", &raw.rpm, "rpm: 3000 rpm"),
                ("volts", &raw.volts, "volts: 13 V"),
                ("amps", &raw.amps, "amps: 8 A"),
            ] {
                if leaf.is_absent() {
                    self.missing(&path, key, example);
                }
            }
            let rpm = self.quantity(&path, "rpm", &raw.rpm, &bounds::TURNING);
            let volts = self.quantity(&path, "volts", &raw.volts, &bounds::READING_VOLTS);
            let amps = self.quantity(&path, "amps", &raw.amps, &bounds::READING_CURRENT);
            if let (Some(rpm), Some(volts), Some(amps)) = (rpm, volts, amps) {
                out.push(ReadingText {
                    path,
                    rpm,
                    volts,
                    amps,
                });
            }
        }
        out
    }

    /// `rectifier: full-wave`, or a mapping with its drop.
    fn rectifier(&mut self, node: &Map<raw::Rectifier>, at: &str) -> Option<RectifierText> {
        let words = ("kind of rectifier", RECTIFIERS);
        let Node::Mapping(keys) = node else {
            let kind = self.word(at, "rectifier", node, words)?;
            return Some(RectifierText { kind, drop: None });
        };
        let at = path::key(at, "rectifier");
        let raw = self.keys(keys, &at);
        if raw.kind.is_absent() {
            self.missing(&at, "kind", "kind: full-wave");
        }
        let drop = self.quantity(&at, "drop", &raw.drop, &bounds::DROP);
        Some(RectifierText {
            kind: self.word(&at, "kind", &raw.kind, words)?,
            drop,
        })
    }

    fn regulator(&mut self, raw: &raw::Regulator, at: &str) -> RegulatorText {
        RegulatorText {
            path: at.to_owned(),
            holds: self.quantity(at, "holds", &raw.holds, &bounds::HOLDS),
            kind: self.word(at, "kind", &raw.kind, ("kind of regulator", REGULATORS)),
            per_degree: self.quantity(at, "per_degree", &raw.per_degree, &bounds::PER_DEGREE),
        }
    }

    fn alternator(&mut self, raw: &raw::Alternator, at: &str) -> AlternatorText {
        let curve = path::key(at, "curve");
        let mut rows: Vec<crate::description::Written<(Amps, crate::quantity::Rpm)>> = Vec::new();
        let mut points = self.list(&raw.curve, &curve);
        while let Some((path, leaf)) = self.entry(&mut points) {
            let Some(text) = self.name_at(path.clone(), &leaf) else {
                continue;
            };
            let Some(measured) = self.curve_row(&text.value, &path) else {
                continue;
            };
            let (_, rpm) = measured.value;
            if rows.last().is_some_and(|last| last.value.1 >= rpm) {
                self.problem(Problem::value(
                    path.as_str(),
                    SenseProblem::NotRising {
                        what: "the speeds of the curve",
                    },
                ));
            }
            let mut row = Written::exact(measured.value, path);
            row.tolerance = measured.tolerance;
            rows.push(row);
        }
        AlternatorText {
            path: at.to_owned(),
            curve: rows,
            ratio: self.factor(at, "ratio", &raw.ratio, &bounds::RATIO),
            at: self.quantity(at, "at", &raw.at, &bounds::CURVE_VOLTS),
            tested: self.quantity(at, "tested", &raw.tested, &bounds::WORKING),
            working: self.quantity(at, "working", &raw.working, &bounds::WORKING),
        }
    }

    /// `10 A at 2400 rpm`.
    fn curve_row(
        &mut self,
        text: &str,
        path: &str,
    ) -> Option<Measured<(Amps, crate::quantity::Rpm)>> {
        match parse::at_speed::<Amps>(text) {
            Ok(measured) => {
                let (amps, rpm) = measured.value;
                self.bounded(path, text, amps, &bounds::CURVE_CURRENT)?;
                self.bounded(path, text, rpm, &bounds::TURNING)?;
                Some(measured)
            }
            Err(e) => {
                self.not_read(path.to_owned(), e);
                None
            }
        }
    }
}
