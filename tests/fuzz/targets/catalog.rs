//! Any bytes as a file of a catalog, and every entry of it taken as a part.
#![no_main]

use ampledger::catalog::{Catalogs, Kind};
use ampledger::description::{AccessoryText, BatteryText, ChargingText, StarterText};
use libfuzzer_sys::fuzz_target;

fuzz_target!(|bytes: &[u8]| {
    let catalogs = match Catalogs::with_file("fuzz.yaml", bytes) {
        Ok(catalogs) => catalogs,
        Err(refusal) => {
            assert!(!refusal.problems().is_empty());
            assert!(refusal.render(false).starts_with("error: "));
            return;
        }
    };
    for entry in catalogs.own() {
        match entry.in_full() {
            Ok(listed) => assert_eq!(listed.id, entry.id),
            Err(refusal) => assert!(refusal.render(false).starts_with("error: ")),
        }
        let found = match entry.kind {
            Kind::Charging => catalogs.part::<ChargingText>(&entry.id).is_some(),
            Kind::Battery => catalogs.part::<BatteryText>(&entry.id).is_some(),
            Kind::Starter => catalogs.part::<StarterText>(&entry.id).is_some(),
            Kind::Accessory => catalogs.part::<AccessoryText>(&entry.id).is_some(),
            Kind::Kit => true,
        };
        assert!(found, "{}", entry.id);
    }
});
