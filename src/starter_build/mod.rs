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

/// A build with a battery and a starter: what charges it, what it feeds.
macro_rules! with_battery {
    ($charging:literal, $accessories:literal) => {
        pieces![
            "head",
            "engine",
            $charging,
            "battery",
            $accessories,
            "shift"
        ]
    };
}

/// A build without a battery, started by hand; what it feeds stands beside the winding.
macro_rules! by_hand {
    ($charging:literal) => {
        pieces!["head", "engine-by-hand", $charging, "shift-by-hand"]
    };
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
            Kind::HalfWave => with_battery!("half-wave", "accessories-few"),
            Kind::FullWave => with_battery!("full-wave", "accessories-few"),
            Kind::SeriesRegulated => with_battery!("series-regulated", "accessories"),
            Kind::ShuntRegulated => with_battery!("shunt-regulated", "accessories"),
            Kind::Lighting => by_hand!("lighting"),
            Kind::ChargingAndLighting => {
                with_battery!("charging-and-lighting", "charging-and-lighting-accessories")
            }
            Kind::ClutchOnly => by_hand!("clutch-only"),
            Kind::ThreePhase => with_battery!("three-phase", "accessories"),
            Kind::Alternator => with_battery!("alternator", "accessories"),
            Kind::Braking => with_battery!("braking", "accessories"),
        }
    }
}
