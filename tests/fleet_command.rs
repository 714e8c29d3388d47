//! The command for fleets: exit codes, the same rows in every format, what is written.

mod support;

use serde_json::Value;
use std::process::Output;
use support::{Folder, GOOD, program};

/// A folder with `cart.yaml`, `lamps.yaml` (more load than the source gives), `bad.yaml` (line 15 misspelt).
fn folder() -> Folder {
    let folder = Folder::new();
    folder.write("cart.yaml", GOOD);
    folder.write("lamps.yaml", GOOD.replace("40 W", "350 W"));
    folder.write("bad.yaml", GOOD.replace("parked:", "perked:"));
    folder
}

/// What the command prints and its exit code, in a folder.
fn fleet(folder: &Folder, args: &[&str]) -> Output {
    let args: Vec<&str> = ["fleet"].iter().chain(args).copied().collect();
    folder.run(&args).output().expect("the program")
}

/// The command's exit codes: all keep up, one does not, one cannot be read.
#[test]
fn the_exit_codes() {
    let folder = folder();
    let code = |rows: &str| {
        folder.write("fleet.csv", format!("machine,build\n{rows}"));
        fleet(&folder, &["fleet.csv"]).status.code()
    };
    assert_eq!(code("a,cart.yaml\n"), Some(0));
    assert_eq!(code("a,lamps.yaml\n"), Some(1));
    assert_eq!(code("a,cart.yaml\nb,bad.yaml\nc,lamps.yaml\n"), Some(2));
}

/// The command: the same rows in every format, a file whole or not at all, no bar where nobody looks.
#[test]
fn the_command() {
    let folder = folder();
    let csv = "machine,build,count,kit\n=m1,cart.yaml,2,\nm2,bad.yaml,1,\nm3,lamps.yaml,1,\n";
    folder.write("all.csv", csv);
    let json = fleet(&folder, &["all.csv", "--format", "json"]);
    assert_eq!(String::from_utf8_lossy(&json.stderr), "");
    let json: Value = serde_json::from_slice(&json.stdout).expect("JSON");
    let rows = json["rows"].as_array().expect("rows");
    assert_eq!(rows[1]["verdict"], Value::Null);
    assert!(
        rows[1]["error"]
            .as_str()
            .is_some_and(|e| e.contains("bad.yaml:15:1"))
    );
    assert!(
        rows[2]["remedy"].as_str().is_some_and(|r| !r.is_empty()),
        "{}",
        rows[2]
    );
    for key in [
        "machine", "build", "count", "kit", "verdict", "lacks_ah", "remedy", "cost", "error",
    ] {
        assert!(rows[0].get(key).is_some(), "{key}");
    }
    let streamed = fleet(&folder, &["all.csv", "--format", "csv"]);
    let streamed = String::from_utf8(streamed.stdout).expect("text");
    let lines: Vec<&str> = streamed.lines().collect();
    let head = "machine,build,count,kit,season,verdict,lacks_ah,remedy,cost,error";
    assert_eq!(lines[0], head);
    assert_eq!(lines.len(), 4);
    assert!(
        lines[1].starts_with("'=m1,cart.yaml,2,,,keeps up,0,"),
        "{}",
        lines[1]
    );
    let lacks = rows[2]["lacks_ah"].as_f64().expect("a charge");
    assert!(lines[3].contains(&format!(",{lacks},")), "{}", lines[3]);
    let table = String::from_utf8(fleet(&folder, &["all.csv"]).stdout).expect("text");
    assert!(
        table.lines().all(|line| line.chars().count() <= 80),
        "{table}"
    );
    let args = ["all.csv", "--format", "csv", "-o", "out.csv"];
    assert_eq!(fleet(&folder, &args).status.code(), Some(2));
    assert_eq!(folder.read("out.csv"), streamed);
    assert_eq!(fleet(&folder, &args).status.code(), Some(2));
    let names = ["all.csv", "bad.yaml", "cart.yaml", "lamps.yaml", "out.csv"];
    assert_eq!(folder.names(), names, "nothing left beside");
}

#[test]
fn the_examples() {
    for file in [
        "examples/fleets/quillhaven.yaml",
        "examples/fleets/quillhaven.csv",
    ] {
        let args = ["fleet", file, "--format", "json", "--no-remedy"];
        let json = program().args(args).output().expect("the program");
        assert!(
            matches!(json.status.code(), Some(0 | 1)),
            "{file}: {json:?}"
        );
        let json: Value = serde_json::from_slice(&json.stdout).expect("JSON");
        let rows = json["rows"].as_array().expect("rows");
        assert!(rows.iter().all(|r| r["error"].is_null()), "{file}");
        assert!(rows.len() >= 4);
    }
}
