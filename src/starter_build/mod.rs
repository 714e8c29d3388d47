//! Commented build files to start from, one for each way in which a machine is charged.
//!
//! ```
//! use ampledger::starter_build::Kind;
//! let text = Kind::ThreePhase.text();
//! assert!(text.contains("phases: 3"));
//! assert!(ampledger::description::read("mine.yaml", text.as_bytes()).is_ok());
//! ```

/// A way in which a machine is charged.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Kind {
    /// A charging winding and one diode, unregulated.
    HalfWave,
    /// A charging winding and a bridge, unregulated.
    FullWave,
    /// A bridge and a regulator that opens the circuit.
    SeriesRegulated,
    /// A bridge and a regulator that shorts the winding.
    ShuntRegulated,
    /// A lighting winding alone, alternating current, no battery.
    Lighting,
    /// A charging and a lighting winding on one core.
    ChargingAndLighting,
    /// A rectified winding that feeds a clutch coil, no battery.
    ClutchOnly,
    /// Three phases and a bridge.
    ThreePhase,
    /// A belt-driven alternator.
    Alternator,
    /// A charging winding, and one that stops the blades.
    Braking,
}

/// The pieces of a build file, in order.
macro_rules! pieces {
    ($($name:literal),*) => { concat!($(include_str!(concat!($name, ".yaml"))),*) };
}

impl Kind {
    /// Every kind, the simplest first.
    pub const ALL: [Kind; 10] = [
        Kind::HalfWave,
        Kind::FullWave,
        Kind::SeriesRegulated,
        Kind::ShuntRegulated,
        Kind::Lighting,
        Kind::ChargingAndLighting,
        Kind::ClutchOnly,
        Kind::ThreePhase,
        Kind::Alternator,
        Kind::Braking,
    ];

    /// As `ampledger new --kind` names it.
    #[must_use]
    pub const fn name(self) -> &'static str {
        match self {
            Kind::HalfWave => "half-wave",
            Kind::FullWave => "full-wave",
            Kind::SeriesRegulated => "series-regulated",
            Kind::ShuntRegulated => "shunt-regulated",
            Kind::Lighting => "lighting",
            Kind::ChargingAndLighting => "charging-and-lighting",
            Kind::ClutchOnly => "clutch-only",
            Kind::ThreePhase => "three-phase",
            Kind::Alternator => "alternator",
            Kind::Braking => "braking",
        }
    }

    /// What it is, in words.
    #[must_use]
    pub const fn about(self) -> &'static str {
        match self {
            Kind::HalfWave => "charging winding and one diode, unregulated",
            Kind::FullWave => "charging winding and bridge, unregulated",
            Kind::SeriesRegulated => "bridge and a regulator that opens the circuit",
            Kind::ShuntRegulated => "bridge and a regulator that shorts the winding",
            Kind::Lighting => "lighting winding alone, lamps on alternating current, no battery",
            Kind::ChargingAndLighting => "charging and lighting windings on one core",
            Kind::ClutchOnly => "rectified winding that feeds a clutch coil, no battery",
            Kind::ThreePhase => "three phases and a bridge of six diodes",
            Kind::Alternator => "belt-driven alternator by its output curve",
            Kind::Braking => "charging winding, and one that stops the blades",
        }
    }

    /// The build file.
    #[must_use]
    pub const fn text(self) -> &'static str {
        match self {
            Kind::HalfWave => {
                pieces![
                    "head",
                    "engine",
                    "half-wave",
                    "battery",
                    "accessories-few",
                    "shift"
                ]
            }
            Kind::FullWave => pieces![
                "head",
                "engine",
                "full-wave",
                "battery",
                "accessories-few",
                "shift"
            ],
            Kind::SeriesRegulated => {
                pieces![
                    "head",
                    "engine",
                    "series-regulated",
                    "battery",
                    "accessories",
                    "shift"
                ]
            }
            Kind::ShuntRegulated => {
                pieces![
                    "head",
                    "engine",
                    "shunt-regulated",
                    "battery",
                    "accessories",
                    "shift"
                ]
            }
            Kind::Lighting => pieces!["head", "engine-by-hand", "lighting", "shift-by-hand"],
            Kind::ChargingAndLighting => pieces![
                "head",
                "engine",
                "charging-and-lighting",
                "battery",
                "charging-and-lighting-accessories",
                "shift"
            ],
            Kind::ClutchOnly => pieces!["head", "engine-by-hand", "clutch-only", "shift-by-hand"],
            Kind::ThreePhase => {
                pieces![
                    "head",
                    "engine",
                    "three-phase",
                    "battery",
                    "accessories",
                    "shift"
                ]
            }
            Kind::Alternator => pieces![
                "head",
                "engine",
                "alternator",
                "battery",
                "accessories",
                "shift"
            ],
            Kind::Braking => pieces![
                "head",
                "engine",
                "braking",
                "battery",
                "accessories",
                "shift"
            ],
        }
    }
}
