//! Runs the simulator on a case.

use super::case::{Case, Figures};
use std::io::Write;
use std::process::{Command, Stdio};
use std::time::{Duration, Instant};

/// Longest run of one case.
const PATIENCE: Duration = Duration::from_secs(100);

/// Fails when there is no simulator: this comparison is never skipped.
pub fn must_be_there() {
    let found = Command::new("ngspice")
        .arg("-v")
        .stdout(Stdio::null())
        .stderr(Stdio::null())
        .status();
    assert!(
        found.is_ok_and(|status| status.success()),
        "`ngspice` is not on the path"
    );
}

/// The simulator's figures, and the time its run took. Where it finds no step at one tolerance, at another.
pub fn run(case: &Case) -> (Figures, Duration) {
    for tolerance in [3e-5, 1e-4, 1e-5, 3e-4] {
        let begun = Instant::now();
        if let Some(figures) = once(&case.netlist(tolerance)) {
            return (figures, begun.elapsed());
        }
    }
    panic!("ngspice gives no figures for {}", case.name());
}

fn once(netlist: &str) -> Option<Figures> {
    let folder = tempfile::tempdir().expect("a temporary folder");
    let (deck, log) = (folder.path().join("case.cir"), folder.path().join("log"));
    let mut file = std::fs::File::create(&deck).expect("a deck");
    file.write_all(netlist.as_bytes()).expect("a written deck");
    let out = std::fs::File::create(&log).expect("a log");
    let mut child = Command::new("ngspice")
        .arg("-b")
        .arg(&deck)
        .current_dir(folder.path())
        .stdout(out)
        .stderr(Stdio::null())
        .spawn()
        .expect("ngspice starts");
    let begun = Instant::now();
    while child
        .try_wait()
        .expect("ngspice can be waited for")
        .is_none()
    {
        if begun.elapsed() > PATIENCE {
            let _ = child.kill();
            let _ = child.wait();
            return None;
        }
        std::thread::sleep(Duration::from_millis(5));
    }
    figures(&std::fs::read_to_string(&log).ok()?, netlist)
}

/// Reads `name = value` lines; a measure that was asked for has to be there.
fn figures(log: &str, netlist: &str) -> Option<Figures> {
    let read = |name: &str| {
        if !netlist.contains(&format!(".meas tran {name} ")) {
            return Some(0.0);
        }
        log.lines().find_map(|line| {
            let (key, rest) = line.split_once('=')?;
            (key.trim() == name).then_some(())?;
            rest.split_whitespace().next()?.parse().ok()
        })
    };
    Some(Figures {
        dc: read("dc")?,
        rms: read("rms")?,
        volts: read("volts")?,
    })
}
