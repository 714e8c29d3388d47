//! Runs the program in a folder of its own, and holds its status, standard output and standard error to the letter.
#![allow(dead_code)] // each test file uses its own part

use snapbox::cmd::{Command, cargo_bin};
use std::path::{Path, PathBuf};

/// A build that keeps up, small and quick.
pub const GOOD: &str = "\
build: Small mower
air: 20 °C
engine:
  speeds: {idle: 1800 rpm, governed: 3400 rpm}
charging:
  - winding: {open_circuit: 28 V at 3600 rpm, resistance: 0.14 ohm, inductance: 0.4 mH, poles: 12}
    rectifier: full-wave
    regulator: {holds: 14.4 V}
battery: {capacity: 30 Ah, cold_cranking: 300 A, type: flooded}
accessories:
  - {name: lamp, draw: 40 W, duty: {governed: 100 %}}
shift:
  - idle: 10 min
  - governed: 2 h
parked: 12 h
";

/// A folder of its own, gone at the end.
pub struct Folder(tempfile::TempDir);

impl Folder {
    /// An empty one.
    pub fn new() -> Folder {
        Folder(tempfile::tempdir().expect("a temporary folder"))
    }

    /// One with the good build in it as `good.yaml`.
    pub fn with_good() -> Folder {
        let folder = Folder::new();
        folder.write("good.yaml", GOOD);
        folder
    }

    /// Path of a file in it.
    pub fn path(&self, name: &str) -> PathBuf {
        self.0.path().join(name)
    }

    /// Writes a file, its folders too.
    pub fn write(&self, name: &str, bytes: impl AsRef<[u8]>) {
        let path = self.path(name);
        std::fs::create_dir_all(path.parent().expect("a folder")).expect("its folder");
        std::fs::write(path, bytes).expect("written");
    }

    /// Reads a file.
    pub fn read(&self, name: &str) -> String {
        std::fs::read_to_string(self.path(name)).expect("its text")
    }

    /// Names of all that is in it, sorted.
    pub fn names(&self) -> Vec<String> {
        let entries = std::fs::read_dir(self.0.path()).expect("the folder");
        let mut names: Vec<_> = entries
            .map(|e| {
                e.expect("an entry")
                    .file_name()
                    .to_string_lossy()
                    .into_owned()
            })
            .collect();
        names.sort();
        names
    }

    /// The program with arguments, run in it.
    pub fn run(&self, args: &[&str]) -> Command {
        program().current_dir(self.0.path()).args(args)
    }
}

/// The program, deaf to the terminal and the locale that it is tested in.
pub fn program() -> Command {
    Command::new(binary())
        .env_remove("NO_COLOR")
        .env_remove("CLICOLOR_FORCE")
        .env("LC_ALL", "C.UTF-8")
}

/// Its path.
pub fn binary() -> PathBuf {
    cargo_bin!("ampledger").to_path_buf()
}

/// A folder of the project.
pub fn project(name: &str) -> PathBuf {
    Path::new(env!("CARGO_MANIFEST_DIR")).join(name)
}
