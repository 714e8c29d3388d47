//! Six diodes on three star-connected phases, by sectors of a sixth of a cycle.
//!
//! Everything is per phase: E peak line-to-neutral volts, R and X of one phase; U = V + 2 Vf is bus volts and two
//! forward drops. In a sector of T = π/3, phases a (upper diode) and b (lower diode) conduct and phase c comes on at
//! its lower diode. A phase that floats while the other two conduct has its terminal at U/2 + 1.5 e_c between the
//! rails, so it comes on at the angle where |e_c| = U/3, whatever the currents are: that fixes the sectors.
//!
//! The modes, from weak to strong conduction:
//! - *pulses* (two phases or none, "0-2"): six separate pulses a cycle, two phases in series;
//! - *overlapping pulses* ("0-2-3"): pulses long enough that the next phase joins before they end;
//! - *commutating* ("2-3"): always two phases, three while the current changes over;
//! - *continuous*: all three phases always conduct.

use super::Conduction;
use super::segment::{Circuit, Piece, Segment, p1};
use crate::root;
use std::f64::consts::{FRAC_PI_3, FRAC_PI_6, PI};

/// T, a sixth of a cycle, rad.
const T: f64 = FRAC_PI_3;
/// √3.
const SQRT_3: f64 = 1.732_050_807_568_877_2;

/// Three-phase bridge into a stiff bus, exact over a sixth of a cycle.
///
/// Equation: [`continuous`], [`dead_time_modes`], [`commutating`] in turn, the first that fits;
/// I_dc = Q/T, I_rms² = S/π.
///
/// Valid for U ≥ 0; no current when √3 E ≤ U. Current is continuous over all borders; its slope against bus volts
/// has a real kink between commutating and overlapping pulses, where the memory of the previous pulse is lost.
///
/// Source: derived from Kirchhoff's laws.
///
/// Gives the mode, and hands each stretch of conduction to `add`.
pub(super) fn conduct(c: &Circuit, u: f64, mut add: impl FnMut(&Piece)) -> Conduction {
    let u = u.max(0.0);
    if SQRT_3 * c.e <= u {
        return Conduction::Off;
    }
    if continuous(c, u, &mut add) {
        return Conduction::Continuous;
    }
    let sector = Sector::new(c, u);
    if u > 1.5 * c.e
        && let Some(mode) = dead_time_modes(&sector, &mut add)
    {
        return mode;
    }
    commutating(&sector, &mut add);
    Conduction::Commutating
}

/// All three phases always conduct.
///
/// Equation:
/// ```text
/// each phase over its half cycle sees U/3, 2U/3, U/3, each T long, from its zero crossing
/// θ0 = φ − asin(κ),  κ = (Z U/3E) [g(π) + e^(−ρT) g(T)]/(1 + e^(−ρπ)),  g(d) = (d/X) P1(ρd)
/// I_dc = 3 Q/2π,  I_rms² = S/π
/// ```
/// where ρ = R/X and the rest as in the module. Valid while κ < 1 and E sin θ0 ≥ U/3. R → 0:
/// I_dc = (3/πX) √(E² − (2πU/9)²), U/E ≤ 1.293. Source: derived from half-wave symmetry.
fn continuous(c: &Circuit, u: f64, add: &mut impl FnMut(&Piece)) -> bool {
    let rho = c.r / c.x;
    let g = |d: f64| d / c.x * p1(rho * d);
    let kappa = c.impedance() * u / (3.0 * c.e) * (g(PI) + (-rho * T).exp() * g(T))
        / (1.0 + (-rho * PI).exp());
    if kappa >= 1.0 {
        return false;
    }
    let start = c.x.atan2(c.r) - kappa.asin();
    if c.e * start.sin() < u / 3.0 {
        return false;
    }
    let mut from = start;
    let mut current = 0.0;
    for step in [u / 3.0, 2.0 * u / 3.0, u / 3.0] {
        let segment = Segment::new(c, 0.0, step, from, current);
        from += T;
        current = segment.current(from);
        add(&Piece {
            segment,
            end: from,
            in_mean: 1.5 / PI,
            in_square: 1.0 / PI,
        });
    }
    true
}

/// What the modes of one sector share.
struct Sector<'a> {
    /// One phase.
    c: &'a Circuit,
    /// Two phases in series, as half their loop: √3 E/2, R, X.
    pair: Circuit,
    /// U.
    u: f64,
    /// t1, where phase c comes on.
    on: f64,
    /// tn, where the next phase comes on.
    next: f64,
}

impl Sector<'_> {
    fn new(c: &Circuit, u: f64) -> Sector<'_> {
        let on = T + (u / (3.0 * c.e)).min(1.0).asin();
        Sector {
            c,
            pair: Circuit {
                e: 0.5 * SQRT_3 * c.e,
                ..*c
            },
            u,
            on,
            next: on + T,
        }
    }

    /// Phases a and c in series against the bus, from `i1` at `t1`; c carries the negative of it.
    fn pair_from(&self, t1: f64, i1: f64) -> Segment {
        Segment::new(&self.pair, -FRAC_PI_6, 0.5 * self.u, t1, i1)
    }

    /// The three phases a, b, c from t1, where a and b carry ±`i0` and c nothing.
    fn three_from(&self, i0: f64) -> [Segment; 3] {
        let (c, u) = (self.c, self.u);
        [
            Segment::new(c, 0.0, 2.0 * u / 3.0, self.on, i0),
            Segment::new(c, -2.0 * T, -u / 3.0, self.on, -i0),
            Segment::new(c, 2.0 * T, -u / 3.0, self.on, 0.0),
        ]
    }
}

/// Hands over a stretch of three conducting phases: the bus carries phase a's current.
fn add_three(three: &[Segment; 3], end: f64, add: &mut impl FnMut(&Piece)) {
    for (k, segment) in three.iter().enumerate() {
        let in_mean = if k == 0 { 1.0 / T } else { 0.0 };
        add(&Piece {
            segment: *segment,
            end,
            in_mean,
            in_square: 1.0 / PI,
        });
    }
}

/// Hands over a stretch of two conducting phases: each carries the bus current.
fn add_pair(segment: Segment, end: f64, add: &mut impl FnMut(&Piece)) {
    add(&Piece {
        segment,
        end,
        in_mean: 1.0 / T,
        in_square: 2.0 / PI,
    });
}

/// The two modes with a time of no current, possible for 1.5 E < U < √3 E.
///
/// Equation:
/// ```text
/// a pair starts from nothing at ts = π/6 + asin(U/√3E); its EMF is under U again from tz = 4π/3 − ts
/// pulses:      i(tn) ≤ 0, tn > tz:  ends at β in [tz, tn]
/// overlapping: three phases from t1 with I0 = i(tn), until i_b(γ) = 0, γ in [t1, ts];
///              then the pair a-c from −i_c(γ), which ends at β in [γ, ts]
/// ```
/// where the symbols are the module's. Valid when the current has died by ts; otherwise there is no dead time and
/// nothing is handed over. Source: derived.
fn dead_time_modes(s: &Sector<'_>, add: &mut impl FnMut(&Piece)) -> Option<Conduction> {
    let start = FRAC_PI_6 + (s.u / (SQRT_3 * s.c.e)).min(1.0).asin();
    let falls_under = 4.0 * T - start;
    let pulse = s.pair_from(start, 0.0);
    let at_next = pulse.current(s.next);
    if s.next > falls_under && at_next <= 0.0 {
        add_pair(pulse, pulse.falls_to(0.0, falls_under, s.next, s.next), add);
        return Some(Conduction::Pulses);
    }
    let three = s.three_from(at_next);
    if three[1].current(start) <= 0.0 {
        return None;
    }
    let over = three[1].rises_to(0.0, s.on, start);
    let tail = s.pair_from(over, -three[2].current(over));
    if tail.current(start) > 0.0 {
        return None;
    }
    add_three(&three, over, add);
    add_pair(tail, tail.falls_to(0.0, over, start, start), add);
    add_pair(pulse, s.next, add);
    Some(Conduction::OverlappingPulses)
}

/// Always two phases, three while the current changes over from b to c: one root, the overlap d on [0, T].
///
/// Equation:
/// ```text
/// J(d)  = s_b(t1 + d) + (U/3) g(d) − s_b(t1) e^(−ρd)            = I0 e^(−ρd)
/// ic(d) = s_c(t1 + d) − s_c(t1) e^(−ρd) + (U/3) g(d)
/// In(d) = s_2(tn) + (−ic − s_2(t1 + d)) e^(−ρ(T−d)) − (U/2) g(T − d)
/// F(d)  = J − e^(−ρd) In = 0,  I0 = In
/// ```
/// where s_b, s_c, s_2 are the sinusoidal currents of phase b, phase c and the pair; I0 the bus current when c comes
/// on; In when the next phase does. J is used in place of I0 e^(ρd), which overflows as X → 0.
/// Valid when neither of the other modes holds. Source: derived from periodicity over a sector.
fn commutating(s: &Sector<'_>, add: &mut impl FnMut(&Piece)) {
    let (c, u) = (s.c, s.u);
    let (z, phi, rho) = (c.impedance(), c.x.atan2(c.r), c.r / c.x);
    let g = |d: f64| d / c.x * p1(rho * d);
    let s_b = |t: f64| c.e / z * (t - 2.0 * T - phi).sin();
    let s_c = |t: f64| c.e / z * (t + 2.0 * T - phi).sin();
    let s_2 = |t: f64| s.pair.e / z * (t - FRAC_PI_6 - phi).sin();
    let (b1, c1, p_n) = (s_b(s.on), s_c(s.on), s_2(s.next));
    let at_next = |d: f64, e1: f64, opposed: f64| {
        let i_c = s_c(s.on + d) - c1 * e1 + opposed;
        p_n + (-i_c - s_2(s.on + d)) * (-rho * (T - d)).exp() - 0.5 * u * g(T - d)
    };
    let mismatch = |d: f64| {
        let (e1, opposed) = ((-rho * d).exp(), u / 3.0 * g(d));
        s_b(s.on + d) + opposed - b1 * e1 - e1 * at_next(d, e1, opposed)
    };
    let d = root::within(mismatch, 0.0, T, 1e-13);
    let three = s.three_from(at_next(d, (-rho * d).exp(), u / 3.0 * g(d)));
    let over = s.on + d;
    add_three(&three, over, add);
    add_pair(s.pair_from(over, -three[2].current(over)), s.next, add);
}
