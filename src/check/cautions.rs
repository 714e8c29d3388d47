//! Cautions that apply to a build. Original wording; what each rests on stands beside it.

use crate::battery::Chemistry;
use crate::build::{Build, Draw, SourceKind};
use crate::description::accessory::LoadKind;

/// On parts across a clutch coil, and on feeding from safety switches.
pub const CLUTCH_PARTS: &str = "Parts across a clutch coil can change how fast the blades stop: add none that the machine's maker does not allow. Never feed anything from the seat, brake or blade switches.";
/// On fusing added wires.
pub const FUSE_WIRES: &str = "Fuse every added supply wire as near the battery as it can be, with a fuse that protects the wire.";
/// On what a planning figure is worth.
pub const ESTIMATE: &str = "A planning estimate: measure amps and volts on the machine before relying on it. Local codes, the machine's maker and, where required, a licensed person come first.";

/// The cautions, most general last.
#[must_use]
pub fn cautions(build: &Build) -> Vec<String> {
    let mut all = of_windings(build);
    all.extend(of_battery(build));
    all.extend(of_work(build));
    let applying = all.into_iter().filter(|(applies, _)| *applies);
    applying.map(|(_, text)| text.to_owned()).collect()
}

/// Whether it applies, and what it says.
type Caution = (bool, &'static str);

fn of_windings(build: &Build) -> Vec<Caution> {
    let braked = build.sources.iter().any(|s| s.braking);
    let coils = build
        .accessories
        .iter()
        .any(|a| a.kind == LoadKind::Coil && matches!(a.draw.value, Draw::Resistance(_)));
    let own = build
        .sources
        .iter()
        .any(|s| s.circuit.is_some() && !s.braking);
    vec![
        // 16 CFR 1205.5 (walk-behind mowers); voluntary standards for ride-on machines.
        (
            braked,
            "The braking winding stops the blades through the interlock. Hang nothing on it, do not lengthen, cut or bypass its lead, and test that the blades stop as the machine's maker states after any work near it.",
        ),
        // Common practice, no source: a diode across the coil delays its release.
        (coils, CLUTCH_PARTS),
        (
            own,
            "Do not join a lighting winding's circuit to the battery.",
        ),
    ]
}

fn of_battery(build: &Build) -> Vec<Caution> {
    let vented = build
        .battery
        .as_ref()
        .is_some_and(|b| b.label.chemistry == Chemistry::Flooded);
    vec![
        // 29 CFR 1926.441; hydrogen is explosive from 4 % in air.
        (
            build.battery.is_some(),
            "Lead-acid batteries give off explosive gas and hold acid: open air, eye protection, no flame or spark near them; never charge or jump one that is frozen, swollen or leaking.",
        ),
        (
            vented,
            "Look after the water of a battery with caps; add only distilled water, after charging.",
        ),
        (
            build.battery.is_some() && !build.sources.is_empty(),
            "Do not run the engine with the battery disconnected: the voltage can rise and harm regulator and electronics.",
        ),
    ]
}

fn of_work(build: &Build) -> Vec<Caution> {
    let wound = build
        .sources
        .iter()
        .any(|s| matches!(s.kind, SourceKind::Winding(_)));
    vec![
        // 33 CFR 183.455: protection at the source of power.
        (!build.accessories.is_empty(), FUSE_WIRES),
        (
            wound,
            "Engine off, key out, blades and belts still before touching any wiring. Run engines outdoors only: exhaust gas kills.",
        ),
        (true, ESTIMATE),
    ]
}
