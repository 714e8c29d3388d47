//! `charging:` as serde reads it.

use super::keys;
use super::node::{Leaf, List, Map};
use crate::quantity::{Amps, Celsius, Henries, Ohms, Rpm, Volts, VoltsPerKelvin};
use crate::schema::form::{
    AtSpeed, Count, Magnets, Name, Number, Price, Quantity, Rated, RectifierForm, RectifierKind,
    RegulatorKind, YesNo,
};
use schemars::JsonSchema;
use serde::Deserialize;

keys!(
    /// A winding with its rectifier and regulator, an alternator, or a part of a catalog.
    #[schemars(extend("anyOf" = [{"required": ["part"]}, {"required": ["winding"]}, {"required": ["alternator"]}]))]
    Charging {
        /// What it is called; answers and `--set` name it so.
        #[schemars(with = "Name", example = "Charging winding")]
        name: Leaf,
        /// A winding or alternator of the catalogs; keys beside it take the place of its figures.
        #[schemars(with = "Name", example = "winding-15a")]
        part: Leaf,
        /// A winding beside the flywheel's magnets.
        winding: Map<Winding>,
        /// A belt-driven alternator with its own field and regulator.
        alternator: Map<Alternator>,
        /// `half-wave`, `full-wave` or `none`; or a mapping with the drop of one diode.
        #[schemars(with = "RectifierForm")]
        rectifier: Map<Rectifier>,
        /// The regulator. Left out, nothing holds the volts.
        regulator: Map<Regulator>,
        /// Price of all of it, in the currency of your other prices.
        #[schemars(with = "Price", example = 190)]
        price: Leaf,
    }
);

keys!(
    /// A winding. Open-circuit volts and resistance as measured between two leads at 20 °C, also of three phases; and one
    /// of `rated`, `inductance` or `readings`.
    Winding {
        /// Rectified current at a speed, at working temperature; into 14 V per 12 V of the system if no volts are given.
        #[schemars(with = "Rated")]
        rated: Leaf,
        /// AC volts, rms, at a speed, with nothing connected.
        #[schemars(with = "AtSpeed<Volts>")]
        open_circuit: Leaf,
        /// Resistance between two leads.
        #[schemars(with = "Quantity<Ohms>", example = "0.14 ohm")]
        resistance: Leaf,
        /// Inductance between two leads.
        #[schemars(with = "Quantity<Henries>", example = "0.4 mH")]
        inductance: Leaf,
        /// Bench readings of the rectified current.
        readings: List<Map<Reading>>,
        /// Magnet poles of the flywheel: even, 2 to 200.
        #[schemars(with = "Count", example = 12)]
        poles: Leaf,
        /// 1 (if left out) or 3.
        #[schemars(with = "Count", example = 3)]
        phases: Leaf,
        /// Temperature of the winding at work; 100 °C if left out, and 20 °C corrects nothing.
        #[schemars(with = "Quantity<Celsius>", example = "100 °C")]
        working: Leaf,
        /// What the magnets are made of: how much they weaken with heat.
        #[schemars(with = "Magnets")]
        magnets: Leaf,
        /// The same volts and so many times the current; what `ampledger size` varies.
        #[schemars(with = "Number", example = 1.3)]
        scale: Leaf,
        /// `battery` (if left out), or the name of a circuit of its own.
        #[schemars(with = "Name", example = &"lighting")]
        feeds: Leaf,
        /// Whether the interlock grounds it to stop the blades. It then carries no accessory.
        #[schemars(with = "YesNo")]
        braking: Leaf,
    }
);

keys!(
    /// One bench reading.
    #[schemars(extend("required" = ["rpm", "volts", "amps"]))]
    Reading {
        /// Speed of the engine.
        #[schemars(with = "Quantity<Rpm>", example = "3000 rpm")]
        rpm: Leaf,
        /// Bus volts.
        #[schemars(with = "Quantity<Volts>", example = "13.6 V")]
        volts: Leaf,
        /// Rectified current, mean.
        #[schemars(with = "Quantity<Amps>", example = "10.6 A")]
        amps: Leaf,
    }
);

keys!(
    /// A belt-driven alternator by its output curve.
    Alternator {
        /// Output against the alternator's own speed, rising; the first row is where it begins to charge.
        #[schemars(with = "Vec<AtSpeed<Amps>>")]
        curve: List<Leaf>,
        /// Turns of the alternator for one of the engine.
        #[schemars(with = "Number", example = 2.2)]
        ratio: Leaf,
        /// The volts at which the curve holds.
        #[schemars(with = "Quantity<Volts>", example = "13.5 V")]
        at: Leaf,
        /// Temperature at which the curve holds.
        #[schemars(with = "Quantity<Celsius>", example = "23 °C")]
        tested: Leaf,
        /// Temperature of the alternator at work: hot, it gives less.
        #[schemars(with = "Quantity<Celsius>", example = "90 °C")]
        working: Leaf,
    }
);

keys!(
    /// A rectifier with the drop of its diodes.
    #[schemars(extend("required" = ["kind"]))]
    Rectifier {
        /// `half-wave` one diode, `full-wave` a bridge, `none` alternating current.
        #[schemars(with = "RectifierKind")]
        kind: Leaf,
        /// Forward drop of one diode.
        #[schemars(with = "Quantity<Volts>", example = "0.9 V")]
        drop: Leaf,
    }
);

keys!(
    /// A regulator.
    Regulator {
        /// The voltage it holds.
        #[schemars(with = "Quantity<Volts>", example = "14.4 V")]
        holds: Leaf,
        /// `series` opens the circuit at its setpoint, `shunt` shorts the winding.
        #[schemars(with = "RegulatorKind")]
        kind: Leaf,
        /// Change of the setpoint per degree of the air above 25 °C.
        #[schemars(with = "Quantity<VoltsPerKelvin>", example = "-18 mV")]
        per_degree: Leaf,
    }
);
