//! Cautions that apply to a build. Original wording; what each rests on stands beside it.

use crate::battery::Chemistry;
use crate::build::{Build, Draw, SourceKind};
use crate::description::accessory::LoadKind;

/// The cautions, most general last.
#[must_use]
pub fn cautions(build: &Build) -> Vec<String> {
    let mut all = Vec::new();
    let mut say = |applies: bool, text: &str| {
        if applies {
            all.push(text.to_owned());
        }
    };
    let braked = build.sources.iter().any(|s| s.braking);
    let coils = build
        .accessories
        .iter()
        .any(|a| a.kind == LoadKind::Coil && matches!(a.draw.value, Draw::Resistance(_)));
    let vented = build
        .battery
        .as_ref()
        .is_some_and(|b| b.label.chemistry == Chemistry::Flooded);
    let own = build
        .sources
        .iter()
        .any(|s| s.circuit.is_some() && !s.braking);
    // 16 CFR 1205.5 (walk-behind mowers); voluntary standards for ride-on machines.
    say(
        braked,
        "The braking winding stops the blades through the interlock. Hang nothing on it, do not lengthen, cut or bypass its lead, and test that the blades stop as the machine's maker states after any work near it.",
    );
    // Common practice, no source: a diode across the coil delays its release.
    say(
        coils,
        "Parts across a clutch coil can change how fast the blades stop: add none that the machine's maker does not allow. Never feed anything from the seat, brake or blade switches.",
    );
    say(
        own,
        "Do not join a lighting winding's circuit to the battery.",
    );
    // 29 CFR 1926.441; hydrogen is explosive from 4 % in air.
    say(
        build.battery.is_some(),
        "Lead-acid batteries give off explosive gas and hold acid: open air, eye protection, no flame or spark near them; never charge or jump one that is frozen, swollen or leaking.",
    );
    say(
        vented,
        "Look after the water of a battery with caps; add only distilled water, after charging.",
    );
    say(
        build.battery.is_some() && !build.sources.is_empty(),
        "Do not run the engine with the battery disconnected: the voltage can rise and harm regulator and electronics.",
    );
    // 33 CFR 183.455: protection at the source of power.
    say(
        !build.accessories.is_empty(),
        "Fuse every added supply wire as near the battery as it can be, with a fuse that protects the wire.",
    );
    say(
        build
            .sources
            .iter()
            .any(|s| matches!(s.kind, SourceKind::Winding(_))),
        "Engine off, key out, blades and belts still before touching any wiring. Run engines outdoors only: exhaust gas kills.",
    );
    say(
        true,
        "A planning estimate: measure amps and volts on the machine before relying on it. Local codes, the machine's maker and, where required, a licensed person come first.",
    );
    all
}
