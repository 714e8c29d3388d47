//! Any bytes as a fleet in CSV: a plan with a row for each record, its faults in it, or a refusal.
#![no_main]

use ampledger::fleet::read_sheet;
use libfuzzer_sys::fuzz_target;
use std::path::Path;

fuzz_target!(|bytes: &[u8]| {
    // patterns look into folders, which is no part of reading
    if bytes.iter().any(|b| matches!(b, b'*' | b'?' | b'[' | b'/')) {
        return;
    }
    match read_sheet("fuzz.csv", bytes, Path::new("fuzz.csv")) {
        Ok(plan) => {
            for entry in &plan.entries {
                let whole = entry.fault.is_none() && !entry.build.is_empty() && entry.count > 0;
                assert!(entry.fault.is_some() || whole, "{entry:?}");
            }
        }
        Err(refusal) => {
            assert!(!refusal.problems().is_empty());
            assert!(refusal.render(false).starts_with("error: "));
        }
    }
});
