//! The bus: where sources, accessories and battery meet.
//!
//! At a speed, a charge and a temperature the bus voltage is the one root of
//! *source current = load current + battery current*. A regulator caps the voltage at its
//! setpoint; the source then gives only what is asked.

mod cuts;
mod mean;
mod point;
mod supply;
#[cfg(test)]
mod tests;

pub use cuts::Cuts;
pub use mean::Flow;
pub use supply::{MOST_CELL_VOLTS, Supply};

use crate::battery::{BatteryCurrent, Charge, Climate};
use crate::load::Coincidences;
use crate::quantity::{Amps, Volts};
use point::{Bus, Drawn};

/// What is connected in one state of the machine.
#[derive(Clone, Debug)]
pub struct Connected {
    /// Sources at the state's speed.
    pub supply: Supply,
    /// What may be on at once.
    pub loads: Coincidences,
    /// Lower working limits of what may be on.
    pub cuts: Cuts,
}

/// One coincidence solved.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Point {
    /// Bus volts.
    pub bus: Volts,
    /// What the accessories draw.
    pub loads: Amps,
    /// Battery current.
    pub battery: BatteryCurrent,
}

impl Connected {
    /// The means over all coincidences with the battery in a state of charge.
    #[must_use]
    pub fn flow(&self, climate: &Climate, charge: Charge, cells: u32) -> Flow {
        let terminals = climate.at(charge);
        let bus = Bus::new(&self.supply, &terminals, self.loads.has_filaments(), cells);
        mean::flow(&bus, &self.loads, &self.cuts, climate)
    }

    /// Whether the bus goes under a lower working limit when everything is on that may be on at once.
    #[must_use]
    pub fn may_drop_out(&self, climate: &Climate, charge: Charge, cells: u32) -> bool {
        let terminals = climate.at(charge);
        let bus = Bus::new(&self.supply, &terminals, self.loads.has_filaments(), cells);
        mean::cuts_may_act(&bus, &self.loads, &self.cuts)
    }

    /// The operating point when everything is on that may be on at once.
    #[must_use]
    pub fn worst(&self, climate: &Climate, charge: Charge, cells: u32) -> Point {
        let terminals = climate.at(charge);
        let bus = Bus::new(&self.supply, &terminals, self.loads.has_filaments(), cells);
        let draw = self.cuts.asked(self.loads.heaviest());
        let volts = bus.operating_point(&draw);
        Point {
            bus: Volts(volts),
            loads: Amps(draw.drawn(volts, bus.filaments).0),
            battery: terminals.current(Volts(volts)),
        }
    }
}
