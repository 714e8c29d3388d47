//! How an accessory's wire runs: its own keys over the build's `wiring:` over what is assumed.

use super::context::{Context, Layers, PRACTICE};
use crate::build::Assumed;
use crate::build::accessory::Wire;
use crate::description::{AccessoryText, ReturnPath, WiringText, Written};
use crate::quantity::{Amps, Celsius, Fraction, format};

/// What holds for every wire that does not say otherwise.
pub(super) struct Usual {
    insulation: Celsius,
    engine_space: bool,
    bundle: u32,
    returns: ReturnPath,
    max_drop: Fraction,
    switch: Amps,
}

/// The build's `wiring:`, its open keys assumed.
pub(super) fn usual(context: &mut Context, text: &WiringText) -> Usual {
    let mut rows = Vec::new();
    let usual = Usual {
        insulation: or(
            &mut rows,
            &text.insulation,
            "insulation of the wires",
            Celsius(80.0),
            format::temperature,
        ),
        engine_space: or(
            &mut rows,
            &text.engine_space,
            "wires through the engine space",
            true,
            yes,
        ),
        bundle: or(&mut rows, &text.bundle, "conductors in a bundle", 1, |n| {
            n.to_string()
        }),
        returns: or(
            &mut rows,
            &text.returns,
            "return of the current",
            ReturnPath::Frame,
            returns,
        ),
        max_drop: or(
            &mut rows,
            &text.max_drop,
            "volts lost on a wire, at most",
            Fraction(0.03),
            format::text,
        ),
        switch: or(
            &mut rows,
            &text.switch,
            "contact rating of the switches",
            Amps(10.0),
            format::text,
        ),
    };
    context.wiring_assumed.extend(rows);
    usual
}

/// The value written, else the assumed one, recorded.
fn or<V: Copy>(
    rows: &mut Vec<Assumed>,
    found: &Option<Written<V>>,
    what: &str,
    default: V,
    words: impl Fn(V) -> String,
) -> V {
    match found {
        Some(written) => written.value,
        None => {
            rows.push(Assumed {
                what: what.to_owned(),
                value: words(default),
                origin: PRACTICE.to_owned(),
            });
            default
        }
    }
}

fn yes(value: bool) -> String {
    if value { "true" } else { "false" }.to_owned()
}

fn returns(value: ReturnPath) -> String {
    match value {
        ReturnPath::Frame => "by the frame",
        ReturnPath::Wire => "by a second wire",
    }
    .to_owned()
}

/// The wire of one accessory.
pub(super) fn wire(layers: &Layers<AccessoryText>, usual: &Usual) -> Wire {
    let returns = layers
        .value(|t| t.returns.as_ref())
        .unwrap_or(usual.returns);
    Wire {
        run: layers.value(|t| t.run.as_ref()),
        feed: layers.value(|t| t.feed.as_ref()),
        return_wire: returns == ReturnPath::Wire,
        insulation: layers
            .value(|t| t.insulation.as_ref())
            .unwrap_or(usual.insulation),
        engine_space: usual.engine_space,
        bundle: usual.bundle,
        max_drop: layers
            .value(|t| t.max_drop.as_ref())
            .unwrap_or(usual.max_drop),
        switch: usual.switch,
    }
}
