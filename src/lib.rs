//! ampledger plans the electrical load budget of engine-driven equipment: garden tractors, mowers, loaders, carts.
//! A build file goes in; out come a verdict (does the charging system keep the battery charged?), the ampere-hours
//! that are lacking, the nearest changes that mend it, wire and fuse. The program `ampledger` only parses arguments
//! and picks an exit code: all it answers is answered here.
//!
//! # One way through
//!
//! Data flows one way. Each arrow is a function that takes what is before it by reference and gives a new value; no
//! stage reads an earlier one's text, and nothing after [`resolve`](mod@resolve) invents a default.
//!
//! ```text
//! build file ──read──▶ Description ──resolve──▶ Build ──connect──▶ Machine ──walk, settle──▶ charge over shifts
//!   (YAML)             (as written,   (+ catalogs)  (every number      (what is on      (bus volts, amps, charge:
//!                       with places)                 present, typed,    in each state)   source, loads, battery)
//!                                                    with its origin)                            │
//!                                                                                              judge
//!                                                                                                ▼
//!              text · Markdown · CSV · HTML ◀──render── Report ◀──view── Check: verdict, rows, findings, cautions
//!                                                                                │
//!              JSON ◀────────────────────────────────────────────────────────────┘
//! ```
//!
//! | stage | module |
//! | --- | --- |
//! | written text, each value with its place | [`description`], [`problem`], [`schema`] |
//! | parts by name | [`catalog`] |
//! | every number present: stated, from a catalog, or assumed | [`resolve`](mod@resolve), [`build`] |
//! | the physics | [`source`], [`battery`], [`load`], [`circuit`] |
//! | one instant, one shift, shift after shift | [`bus`], [`ledger`], [`outlook`] |
//! | answers | [`check`](mod@check), [`curve`](mod@curve), [`fleet`], [`identify`](mod@identify), [`odds`](mod@odds), [`size`](mod@size), [`remedy`](mod@remedy), [`wire`](mod@wire) |
//! | wording and layout; renderers, which compute nothing | [`view`], [`chart`], [`report`] |
//! | used by all | [`quantity`], [`root`] |
//!
//! # Conventions
//!
//! - **Battery current is positive when it charges the battery**, everywhere: in the ledger, in JSON, in traces. A
//!   source's current is positive out of the source, an accessory's positive into it.
//! - A quantity is a type ([`quantity::Volts`], [`quantity::Amps`], …), each a number in the one unit that its doc names.
//! - State of charge is a fraction of the greatest charge that the battery can hold, 0 to 1; `soc` in JSON.
//! - Volts of an alternating winding are rms; volts of the bus are direct.
//! - A *finding* is an answer (the lamp is dim at idle); an *error* is no answer (the figures contradict each other).
//! - The same input gives the same output, to the bit: no clock, no global state; random draws carry their seed.
//!
//! # A worked example
//!
//! ```
//! use ampledger::catalog::Catalogs;
//! use ampledger::check::{Wanted, answer::Verdict, check};
//! use ampledger::quantity::{AmpHours, Volts};
//! use ampledger::{description, report, resolve, view};
//!
//! // an invented mower
//! let text = "
//! build: Orchard mower
//! air: 2 °C
//! engine:
//!   speeds: {idle: 1800 rpm, governed: 3400 rpm}
//!   starter: {draw: 110 A, time: 2.5 s}
//! charging:
//!   - winding: {rated: 16 A at 3600 rpm, open_circuit: 28 V at 3600 rpm, resistance: 0.14 ohm, poles: 12}
//!     rectifier: full-wave
//!     regulator: {holds: 14.4 V}
//! battery: {capacity: 30 Ah, cold_cranking: 300 A, type: flooded}
//! accessories:
//!   - {name: PTO clutch, draw: 3.1 ohm, duty: {governed: 85 %}}
//!   - {part: work-light-led-27w, count: 2, duty: 100 %}
//! shift:
//!   - crank
//!   - idle: 12 min
//!   - governed: 2 h
//! parked: 15 h
//! ";
//! let (description, _) = description::read("mower.yaml", text.as_bytes()).expect("it reads");
//! let build = resolve::resolve(&description, &Catalogs::builtin()).expect("it is complete");
//! // what was not stated is assumed, and listed with its ground
//! assert!(build.assumed.iter().any(|assumed| assumed.what == "temperature of the winding at work"));
//!
//! let answer = check(&build, Wanted::default()).expect("it has an answer").check;
//! assert_eq!(answer.verdict, Verdict::KeepsUp);
//! assert_eq!(answer.lacks_ah, Some(AmpHours(0.0)));
//! let governed = answer.states.iter().find(|row| row.state == "governed").expect("a row a state");
//! assert!(governed.bus_v <= Volts(14.4) + Volts(1e-9), "the regulator holds the bus");
//!
//! let page = report::text::render(&view::check(&answer, &view::Options::default()), &Default::default());
//! assert!(page.contains("Orchard mower") && page.contains("PTO clutch"));
//! ```
//!
//! # Where each equation stands
//!
//! Above the code of each: the equation, its symbols, the range it is valid for, its source; a worked number in a test.
//!
//! | what | equation | file |
//! | --- | --- | --- |
//! | conduction of a winding against fixed volts | X di/dθ + R i = E sin θ − U | `source/segment.rs` |
//! | one diode, a bridge, three phases | the same, with each circuit's start and end of conduction | `source/half_wave.rs`, `source/bridge.rs`, `source/three_phase.rs` |
//! | frequency; peak EMF | f = n p / 120; E = √2 k n | `source/winding.rs` |
//! | inductance from a rating | I_dc(L) = rated | `source/inductance.rs` |
//! | copper, magnets | R = R₂₀ (1 + 0.00393 (T − 20)) | `source/temperature.rs` |
//! | shorted winding; heat under a regulator | I_sc = E / (√2 Z); P = m R (D I_rms² + (1 − D) I_sc²) | `source/short_circuit.rs`, `source/regulator.rs` |
//! | belt-driven alternator | I = I_curve(ratio n) (1 − 0.002 ΔT) | `source/alternator.rs` |
//! | lamps straight across a winding | E² = (V + R I)² + (X I)² | `source/lamps.rs` |
//! | coils on a rectified winding without a battery | V = R_coil I_dc, its means exact over a cycle | `source/no_battery.rs`, `source/coil_bridge.rs`, `source/coil_half_wave.rs`, `source/coil_three_phase.rs` |
//! | circuits without a battery | G(V(G)) = G | `circuit/point.rs`, `circuit/three_phase.rs` |
//! | rest volts, knee, resistance, acceptance | E(s), e(s, d), R(s, T), Kc(s, T) | `battery/cell.rs`, `battery/climate.rs` |
//! | battery current at given volts | v = e + R I + p I / (I_k + \|I\|), gassing beside it | `battery/terminals.rs` |
//! | capacity by rate; Peukert exponent from a label | c = 1 / (1 + (κ − 1) r^0.9) | `battery/cell.rs`, `battery/calibrate.rs`, `battery/label.rs` |
//! | cranking, storage, water lost | V = v(−I) − I R_cable; t = C ∫ ds / I | `battery/crank.rs`, `battery/storage.rs`, `battery/gassing.rs` |
//! | what loads draw | I(V) = ΣI + V Σ(1/R) + ΣP/V + V^0.55 Σ(P/V₀^1.55) | `load/mod.rs` |
//! | coincidence of cycling loads | three moments kept by two draws | `load/tally.rs` |
//! | the bus | I_source(V) − I_load(V) − I_battery(V) = 0 | `bus/point.rs` |
//! | a step of the ledger | Heun's method in the charge, exact in the depletion | `ledger/step.rs` |
//! | winding constants from bench readings | (JᵀJ + λ diag JᵀJ) δ = −Jᵀr | `identify/fit.rs`, `identify/spread.rs` |
//! | tolerances | Halton points; first-order shares of variance | `odds/sequence.rs`, `odds/influence.rs` |
//! | wire: resistance, ampacity, heat, drop | R = r L (1 + 0.00393 (T − 20)); T = Tₐ + (T_ins − Tₐ)(I/I_max)² | `wire/conductor.rs`, `wire/ampacity.rs`, `wire/arrives.rs` |
//! | fuses and surges | ∫ I² dt against the fuse's shortest time | `wire/fuse.rs`, `wire/surge.rs` |

pub mod battery;
pub mod build;
pub mod bus;
pub mod catalog;
pub mod cells;
pub mod chart;
pub mod check;
pub mod circuit;
pub mod curve;
pub mod description;
pub mod fleet;
pub mod identify;
pub mod ledger;
pub mod load;
pub mod odds;
pub mod outlook;
pub mod problem;
pub mod quantity;
pub mod remedy;
pub mod report;
pub mod resolve;
pub mod root;
pub mod schema;
pub mod size;
pub mod source;
pub mod starter_build;
pub mod view;
pub mod wire;
