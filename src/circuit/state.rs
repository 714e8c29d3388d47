//! One running state of a circuit, and what each of its accessories sees in it.

use super::loads::{Coils, Loads, amps};
use super::point::{Feed, Point};
use super::select::Active;
use super::{AtState, Between, Circuit, CircuitError, InState, burnt_out, feed, is_coil};
use crate::build::{Build, Draw, State};
use crate::quantity::{Amps, Hours, Volts};
use crate::source;

/// One state being solved.
struct Solver<'a> {
    build: &'a Build,
    feed: Feed,
    active: Active<'a>,
    circuit: &'a str,
    state: &'a str,
    /// All that may be on at once, and the point with it, coils cold and hot.
    everything: Vec<usize>,
    cold: Point,
    hot: Point,
}

impl Circuit {
    /// Solves one state more.
    pub(super) fn add_state(
        &mut self,
        build: &Build,
        state: State,
        time: Hours,
    ) -> Result<(), CircuitError> {
        let circuit = self.name.clone();
        let solver = Solver::new(build, self.source, &circuit, state)?;
        self.states.push(solver.in_state(state, time)?);
        for on in &mut self.accessories {
            let Some((at, taken)) = solver.at(on.accessory)? else {
                continue;
            };
            let ah = at.amps * (time * at.duty);
            if taken {
                on.ah += ah;
            } else {
                on.missed += ah;
            }
            on.states.push(at);
        }
        let found = burnt_out::worst(build, &solver.feed, solver.state, &solver.everything);
        self.burnt_out = match (self.burnt_out.take(), found) {
            (Some(old), Some(new)) if new.life < old.life => Some(new),
            (old, new) => old.or(new),
        };
        Ok(())
    }
}

impl<'a> Solver<'a> {
    fn new(
        build: &'a Build,
        source: usize,
        circuit: &'a str,
        state: State,
    ) -> Result<Solver<'a>, CircuitError> {
        let active = Active::new(build, circuit, |a| a.duty.share(state));
        let mut solver = Solver {
            build,
            feed: feed(build, source, build.rpm(state), circuit)?,
            everything: active.all_on(),
            active,
            circuit,
            state: build.state_name(state),
            cold: Point::default(),
            hot: Point::default(),
        };
        solver.cold = solver.solve(&solver.everything, Coils::Cold)?;
        solver.hot = solver.solve(&solver.everything, Coils::Hot)?;
        Ok(solver)
    }

    fn solve(&self, on: &[usize], coils: Coils) -> Result<Point, CircuitError> {
        let solved = self.feed.solve(&Loads::of(self.build, on, coils));
        solved.map_err(|cause| CircuitError::NoPoint {
            circuit: self.circuit.to_owned(),
            state: self.state.to_owned(),
            cause,
        })
    }

    fn in_state(&self, state: State, time: Hours) -> Result<InState, CircuitError> {
        let coils = |k: &usize| self.build.accessory(*k).is_some_and(is_coil);
        let everything = Loads::of(self.build, &self.everything, Coils::Cold);
        Ok(InState {
            state,
            name: self.state.to_owned(),
            rpm: self.feed.rpm,
            time,
            open_circuit: self.solve(&[], Coils::Cold)?.volts,
            volts: self.cold.volts,
            hot: self.everything.iter().any(coils).then_some(self.hot.volts),
            freewheel: self.feed.with_freewheel(&everything),
            winding: self.cold.winding,
            copper: source::copper_loss(&self.feed.winding, self.cold.winding),
        })
    }

    /// What an accessory sees, and whether it takes its current; none where it is never on.
    fn at(&self, k: usize) -> Result<Option<(AtState, bool)>, CircuitError> {
        let duty = self.active.share(k);
        let Some(accessory) = self.build.accessories.get(k).filter(|_| duty.0 > 0.0) else {
            return Ok(None);
        };
        let with_it = self.active.all_on_with(k);
        let same = with_it == self.everything;
        let point = |coils: Coils, known: Point| {
            if same {
                Ok(known)
            } else {
                self.solve(&with_it, coils)
            }
        };
        let (cold, hot) = (point(Coils::Cold, self.cold)?, point(Coils::Hot, self.hot)?);
        let fewest = self.active.fewest_on_with(k);
        let few = [Coils::Cold, Coils::Hot].map(|coils| self.solve(&fewest, coils));
        let [few_cold, few_hot] = few;
        let all = [cold, hot, few_cold?, few_hot?];
        let low = accessory.works.low.unwrap_or(Volts::ZERO);
        let lets_go = matches!(accessory.draw.value, Draw::Current(_) | Draw::Power(_));
        let at = AtState {
            state: self.state.to_owned(),
            duty,
            amps: self.amps(k, Coils::Cold, &cold),
            volts: cold.volts,
            between: Between::of(all.iter().map(|p| p.volts)),
            heating: Between::of(all.iter().map(|p| p.heating)),
            hot: is_coil(accessory).then(|| (self.amps(k, Coils::Hot, &hot), hot.volts)),
        };
        Ok(Some((at, !(lets_go && cold.volts < low))))
    }

    fn amps(&self, k: usize, coils: Coils, point: &Point) -> Amps {
        let alone = Loads::of(self.build, &[k], coils);
        let omega = self.feed.alternating();
        let load = alone.find(k);
        load.map_or(Amps::ZERO, |l| amps(l, omega, point.volts, point.heating))
    }
}
