//! What to buy.

use super::answer::{Buy, BuyFuse, BuyRelay, BuyWire, Wire};

/// Sums over the wires: metres by size and insulation, fuses by rating, relays by rating.
#[must_use]
pub fn buy(wires: &[Wire]) -> Buy {
    let mut buy = Buy::default();
    for wire in wires {
        add_wire(&mut buy, wire);
        add_fuse(&mut buy, wire);
        for switch in wire.switches.iter().filter(|s| s.relay) {
            let beyond = switch.relay_a.is_none().then_some(switch.amps);
            let same = |r: &&mut BuyRelay| r.relay_a == switch.relay_a && r.carries_a == beyond;
            match buy.relays.iter_mut().find(same) {
                Some(row) => row.count += 1,
                None => buy.relays.push(BuyRelay {
                    relay_a: switch.relay_a,
                    carries_a: beyond,
                    count: 1,
                }),
            }
        }
    }
    buy.wire.sort_by(|a, b| {
        (a.section_mm2.0, a.insulation_c.0)
            .partial_cmp(&(b.section_mm2.0, b.insulation_c.0))
            .unwrap_or(std::cmp::Ordering::Equal)
    });
    buy.fuses.sort_by(|a, b| a.fuse_a.0.total_cmp(&b.fuse_a.0));
    let size = |r: &BuyRelay| {
        r.relay_a
            .or(r.carries_a.map(|c| c * 1e3))
            .map_or(0.0, |a| a.0)
    };
    buy.relays.sort_by(|a, b| size(a).total_cmp(&size(b)));
    buy
}

fn add_wire(buy: &mut Buy, wire: &Wire) {
    let same = |row: &&mut BuyWire| {
        row.section_mm2 == wire.section_mm2 && row.insulation_c == wire.insulation_c
    };
    match buy.wire.iter_mut().find(same) {
        Some(row) => row.metres += wire.length_m,
        None => buy.wire.push(BuyWire {
            section_mm2: wire.section_mm2,
            gauge_awg: wire.gauge_awg.clone(),
            insulation_c: wire.insulation_c,
            metres: wire.length_m,
        }),
    }
}

fn add_fuse(buy: &mut Buy, wire: &Wire) {
    let same = |row: &&mut BuyFuse| row.fuse_a == wire.fuse_a && row.kind == wire.fuse_kind;
    match buy.fuses.iter_mut().find(same) {
        Some(row) => row.count += 1,
        None => buy.fuses.push(BuyFuse {
            fuse_a: wire.fuse_a,
            kind: wire.fuse_kind.clone(),
            colour: wire.fuse_colour.clone(),
            count: 1,
        }),
    }
}
