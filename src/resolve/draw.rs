//! What one accessory draws: the amount as written turned into the law it follows.

use super::Fault;
use super::context::{Context, Layers, of_system};
use crate::build::{Draw, Figure};
use crate::description::accessory::LawName;
use crate::description::{AccessoryText, DrawText};
use crate::quantity::{Amps, Volts, format};

/// Volts at which a draw is taken where `at:` does not say, on a 12 V system.
const NOMINAL: Volts = Volts(12.0);

/// The draw of an entry; none where it has none.
pub(super) fn draw(
    context: &mut Context,
    layers: &Layers<AccessoryText>,
    (path, name): (&str, &str),
    cells: u32,
) -> Option<Figure<Draw>> {
    let path = format!("{path}.draw");
    let Some(amount) = layers.figure(&path, |t| t.draw.as_ref()) else {
        context.fault(
            path,
            Fault::Missing {
                keys: "`draw`, or a `part` that has one,",
            },
        );
        return None;
    };
    let at = layers.get(|t| t.at.as_ref());
    let law = layers
        .value(|t| t.law.as_ref())
        .unwrap_or(natural(amount.value));
    if law == natural(amount.value) {
        let lit = layers.get(|t| t.lumens.as_ref()).is_some();
        if let (Some((at, crate::build::Origin::Stated)), false) = (at, lit) {
            context.notes.push(format!(
                "`at: {}` of {name} says nothing: without `law:` its draw is the same at any volts",
                format::text(at.value)
            ));
        }
    }
    let value = match (amount.value, law) {
        (DrawText::Current(amps), LawName::Current) => Draw::Current(amps),
        (DrawText::Resistance(ohms), LawName::Resistance) => Draw::Resistance(ohms),
        (DrawText::Power(watts), LawName::Power) => Draw::Power(watts),
        (amount, law) => {
            let at = at.map(|(at, _)| at.value).unwrap_or_else(|| {
                let usual = of_system(NOMINAL, cells);
                let origin = "two volts a cell, the nominal voltage";
                context.assume_for(
                    "volts at which the draw is stated",
                    format::text(usual),
                    origin,
                    name,
                );
                usual
            });
            converted(amount, law, at)
        }
    };
    Some(Figure {
        value,
        origin: amount.origin,
        tolerance: amount.tolerance,
        path: amount.path,
    })
}

/// The law that the unit alone says.
fn natural(amount: DrawText) -> LawName {
    match amount {
        DrawText::Current(_) => LawName::Current,
        DrawText::Resistance(_) => LawName::Resistance,
        DrawText::Power(_) => LawName::Power,
    }
}

/// The draw in another law than its unit's, equal at the volts it was stated at.
///
/// ```text
/// P = V I,  R = V / I
/// ```
/// where V the stated volts, I the current there, P the power there, R the resistance. Valid for: V and I above zero,
/// which the reader's bounds hold. Source: Ohm's law.
fn converted(amount: DrawText, law: LawName, at: Volts) -> Draw {
    let amps: Amps = match amount {
        DrawText::Current(amps) => amps,
        DrawText::Resistance(ohms) => at / ohms,
        DrawText::Power(watts) => watts / at,
    };
    match law {
        LawName::Current => Draw::Current(amps),
        LawName::Resistance if amps > Amps::ZERO => Draw::Resistance(at / amps),
        LawName::Resistance => Draw::Current(Amps::ZERO),
        LawName::Power => Draw::Power(at * amps),
        LawName::Filament => Draw::Filament {
            power: at * amps,
            at,
        },
    }
}

/// Whether a draw keeps its current up as the volts fall, so that below some volts it drops out.
pub(super) fn drops_out(draw: Draw) -> bool {
    matches!(draw, Draw::Current(_) | Draw::Power(_))
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::quantity::{Ohms, Watts};

    #[test]
    fn equal_at_the_stated_volts() {
        // 48 W at 13.5 V: R = 13.5² / 48 = 3.796 875 ohm (Ohm's law).
        let heater = converted(
            DrawText::Power(Watts(48.0)),
            LawName::Resistance,
            Volts(13.5),
        );
        let Draw::Resistance(ohms) = heater else {
            panic!("{heater:?}")
        };
        assert!((ohms - Ohms(3.796_875)).abs() < Ohms(1e-12));
        // 4 A at 12 V: 3 ohm.
        let four = DrawText::Current(Amps(4.0));
        assert_eq!(
            converted(four, LawName::Resistance, Volts(12.0)),
            Draw::Resistance(Ohms(3.0))
        );
        let ohms = DrawText::Resistance(Ohms(3.0));
        assert_eq!(
            converted(ohms, LawName::Power, Volts(12.0)),
            Draw::Power(Watts(48.0))
        );
        let nothing = DrawText::Current(Amps::ZERO);
        assert_eq!(
            converted(nothing, LawName::Resistance, Volts(12.0)),
            Draw::Current(Amps::ZERO)
        );
    }
}
