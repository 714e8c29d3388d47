//! Files written whole or not at all: what is there stays until the new one is complete, whatever happens.

mod support;

use snapbox::cmd::Command;
use std::process::Stdio;
use support::{Folder, binary, program};

/// What a file held before.
const OLD: &str = "what was there before\n";

#[test]
fn an_existing_file_is_kept_unless_forced() {
    let folder = Folder::with_good();
    folder.write("out.txt", OLD);
    for args in [
        &["check", "good.yaml", "-o", "out.txt"][..],
        &["new", "-o", "out.txt"],
        &["parts", "--format", "json", "-o", "out.txt"],
    ] {
        let kept =
            "error: `out.txt` exists and is kept: write elsewhere, or give --force to replace it\n";
        folder
            .run(args)
            .assert()
            .code(2)
            .stdout_eq("")
            .stderr_eq(kept);
        assert_eq!(folder.read("out.txt"), OLD);
    }
    folder
        .run(&["check", "good.yaml", "-o", "out.txt", "--force"])
        .assert()
        .code(0)
        .stdout_eq("")
        .stderr_eq("");
    assert!(folder.read("out.txt").starts_with("Small mower\n"));
    assert_eq!(folder.names(), ["good.yaml", "out.txt"]);
}

/// A trace that may not be written leaves nothing written at all.
#[test]
fn a_second_file_is_kept_too() {
    let folder = Folder::with_good();
    folder.write("trace.csv", OLD);
    folder
        .run(&["check", "good.yaml", "--trace", "trace.csv", "-o", "out.txt"])
        .assert()
        .code(2)
        .stdout_eq("")
        .stderr_eq("error: `trace.csv` exists and is kept: write elsewhere, or give --force to replace it\n");
    assert_eq!(folder.names(), ["good.yaml", "trace.csv"]);
}

#[test]
fn a_folder_is_no_file() {
    let folder = Folder::with_good();
    folder.write("out/keep.txt", OLD);
    for force in [&[][..], &["--force"]] {
        let args = [&["check", "good.yaml", "-o", "out"], force].concat();
        let told = "error: `out` is a folder: name a file to write\n";
        folder
            .run(&args)
            .assert()
            .code(2)
            .stdout_eq("")
            .stderr_eq(told);
    }
    folder
        .run(&["check", "good.yaml", "-o", "none/out.txt"])
        .assert()
        .code(2)
        .stdout_eq("")
        .stderr_eq("error: `none/out.txt` cannot be written: there is no folder `none`\n");
    assert_eq!(folder.read("out/keep.txt"), OLD);
}

/// A link stays a link, a file keeps its permissions, and a device is written to as it stands.
#[cfg(unix)]
#[test]
fn what_is_replaced_keeps_what_it_is() {
    use std::os::unix::fs::{PermissionsExt, symlink};
    let folder = Folder::with_good();
    folder.write("real.txt", OLD);
    let private = std::fs::Permissions::from_mode(0o600);
    std::fs::set_permissions(folder.path("real.txt"), private).expect("permissions");
    symlink("real.txt", folder.path("link.txt")).expect("a link");
    folder
        .run(&["check", "good.yaml", "-o", "link.txt", "--force"])
        .assert()
        .code(0);
    let link = std::fs::symlink_metadata(folder.path("link.txt")).expect("the link");
    assert!(link.is_symlink());
    assert!(folder.read("real.txt").starts_with("Small mower\n"));
    let mode = std::fs::metadata(folder.path("real.txt"))
        .expect("the file")
        .permissions()
        .mode();
    assert_eq!(mode & 0o777, 0o600);
    folder
        .run(&["check", "good.yaml", "-o", "/dev/null"])
        .assert()
        .code(0)
        .stdout_eq("")
        .stderr_eq("");
    assert!(
        !std::fs::metadata("/dev/null")
            .expect("the device")
            .is_file()
    );
}

/// The program as a user without rights over every file, where the test has them; none where that cannot be.
#[cfg(unix)]
fn without_rights() -> Option<Command> {
    use std::os::unix::fs::MetadataExt;
    let is_root = std::fs::metadata("/proc/self").is_ok_and(|me| me.uid() == 0);
    if !is_root {
        return Some(program());
    }
    let setpriv = std::process::Command::new("setpriv")
        .arg("--version")
        .stdout(Stdio::null())
        .status();
    setpriv.is_ok_and(|s| s.success()).then(|| {
        let nobody = ["--reuid=65534", "--regid=65534", "--clear-groups", "--"];
        Command::new("setpriv").args(nobody).arg(binary())
    })
}

#[cfg(unix)]
#[test]
fn a_folder_that_may_not_be_written_is_told() {
    use std::os::unix::fs::PermissionsExt;
    let Some(program) = without_rights() else {
        return;
    };
    let folder = Folder::with_good();
    folder.write("locked/out.txt", OLD);
    let set = |name: &str, mode: u32| {
        std::fs::set_permissions(folder.path(name), std::fs::Permissions::from_mode(mode))
            .expect("permissions");
    };
    set("", 0o755);
    set("locked", 0o555);
    let output = folder.path("locked/out.txt");
    let output = program
        .args([
            "check",
            &folder.path("good.yaml").display().to_string(),
            "--force",
            "-o",
        ])
        .arg(&output)
        .output()
        .expect("it runs");
    set("locked", 0o755);
    let told = String::from_utf8_lossy(&output.stderr);
    if told.contains("cannot execute") || told.contains("failed to execute") {
        return; // the program itself stands where that user may not go
    }
    assert_eq!(output.status.code(), Some(2), "{told}");
    assert!(
        told.contains("cannot be written: permission denied"),
        "{told}"
    );
    assert!(!told.contains(".ampledger-"), "{told}");
    assert_eq!(folder.read("locked/out.txt"), OLD);
}

/// Standard output that takes nothing more is told, with the exit code of a call that failed.
#[cfg(target_os = "linux")]
#[test]
fn a_full_standard_output_is_told() {
    let folder = Folder::with_good();
    let full = std::fs::OpenOptions::new()
        .write(true)
        .open("/dev/full")
        .expect("the device");
    let output = std::process::Command::new(binary())
        .args(["check", "good.yaml"])
        .current_dir(folder.path(""))
        .stdout(full)
        .output()
        .expect("it runs");
    assert_eq!(output.status.code(), Some(2));
    let told = String::from_utf8_lossy(&output.stderr);
    assert!(
        told.starts_with("error: standard output cannot be written: No space left on device"),
        "{told}"
    );
}

/// A write cut off by the system's limit on a file's size, as a kill in the middle of it would: the old file is whole.
#[cfg(target_os = "linux")]
#[test]
fn a_write_cut_off_leaves_the_old_file() {
    let folder = Folder::with_good();
    folder.write("out.html", OLD);
    // 1024 bytes; the page is several times that
    let script = "ulimit -f 1; exec \"$0\" check good.yaml --format html --force -o out.html";
    let output = std::process::Command::new("bash")
        .args(["-c", script])
        .arg(binary())
        .current_dir(folder.path(""))
        .output()
        .expect("a shell");
    assert!(!output.status.success());
    assert_eq!(folder.read("out.html"), OLD);
}

/// Killed at any moment, the file is the old one or the new one, never a part.
#[cfg(unix)]
#[test]
fn killed_at_any_moment_the_file_is_whole() {
    let folder = Folder::with_good();
    let args = ["parts", "--format", "html", "--force", "-o", "out.html"];
    folder.run(&args).assert().code(0);
    let new = folder.read("out.html");
    let (mut old_kept, mut replaced) = (0, 0);
    for round in 0..40u64 {
        folder.write("out.html", OLD);
        let mut child = std::process::Command::new(binary())
            .args(args)
            .current_dir(folder.path(""))
            .stdout(Stdio::null())
            .spawn()
            .expect("it runs");
        std::thread::sleep(std::time::Duration::from_micros(700 * round));
        child.kill().expect("killed");
        child.wait().expect("ended");
        match folder.read("out.html") {
            text if text == OLD => old_kept += 1,
            text => {
                assert_eq!(text, new);
                replaced += 1;
            }
        }
    }
    assert!(old_kept > 0, "{old_kept} kept, {replaced} replaced");
}

/// Nothing is said when the reader goes away.
#[test]
fn a_broken_pipe_is_silent() {
    use std::io::Read;
    for args in [
        &["parts"][..],
        &["schema"],
        &["parts", "--format", "csv"],
        &["--help"],
    ] {
        let mut child = std::process::Command::new(binary())
            .args(args)
            .stdout(Stdio::piped())
            .stderr(Stdio::piped())
            .spawn()
            .expect("it runs");
        let mut out = child.stdout.take().expect("its output");
        let mut first = [0u8; 1];
        out.read_exact(&mut first).expect("a byte");
        drop(out);
        let ended = child.wait_with_output().expect("ended");
        assert_eq!(ended.status.code(), Some(0), "{args:?}");
        assert!(ended.stderr.is_empty(), "{args:?}");
    }
}

/// A script run with a small disk of its own on `disk`, 64 KiB, which is gone with it; `$0` is the program. None where
/// this user may mount nothing.
#[cfg(target_os = "linux")]
fn with_a_disk(folder: &Folder, script: &str) -> Option<std::process::Output> {
    std::fs::create_dir(folder.path("disk")).expect("a folder");
    let script = format!("mount -t tmpfs -o size=64k tmpfs disk || exit 77\n{script}");
    let output = std::process::Command::new("unshare")
        .args(["--map-root-user", "--mount", "sh", "-c", &script])
        .arg(binary())
        .current_dir(folder.path(""))
        .output()
        .ok()?;
    let ran = !output.stdout.is_empty();
    assert_eq!(ran, output.status.success(), "{output:?}");
    ran.then_some(output)
}

/// A disk that is full: the old file is whole, nothing is left beside it, and the reason is told. Where no disk can be
/// mounted the device that is always full stands in; it is tried everywhere.
#[cfg(target_os = "linux")]
#[test]
fn a_full_disk_leaves_the_old_file() {
    let folder = Folder::with_good();
    folder
        .run(&["check", "good.yaml", "-o", "/dev/full"])
        .assert()
        .code(2)
        .stdout_eq("")
        .stderr_eq("error: `/dev/full` cannot be written: No space left on device (os error 28)\n");
    let script = "echo what was there before > disk/out.html
        head -c 57344 /dev/zero > disk/filler
        \"$0\" parts --format html --force -o disk/out.html
        echo code $?
        cat disk/out.html
        ls -A disk";
    if let Some(output) = with_a_disk(&folder, script) {
        let told = String::from_utf8_lossy(&output.stderr);
        assert!(
            told.starts_with("error: `disk/out.html` cannot be written: no storage space"),
            "{told}"
        );
        let said = format!("code 2\n{OLD}filler\nout.html\n");
        assert_eq!(String::from_utf8_lossy(&output.stdout), said);
    }
}

/// A disk mounted for reading only stops root too.
#[cfg(target_os = "linux")]
#[test]
fn a_disk_that_is_only_read_is_told() {
    let folder = Folder::with_good();
    let script = "echo what was there before > disk/out.txt
        mount -o remount,ro disk
        \"$0\" check good.yaml --force -o disk/out.txt
        echo code $?
        cat disk/out.txt
        ls -A disk";
    if let Some(output) = with_a_disk(&folder, script) {
        assert_eq!(
            String::from_utf8_lossy(&output.stderr),
            "error: `disk/out.txt` cannot be written: read-only filesystem or storage medium\n"
        );
        let said = format!("code 2\n{OLD}out.txt\n");
        assert_eq!(String::from_utf8_lossy(&output.stdout), said);
    }
}

/// A file where a folder is named: whoever asks, nothing can be written in it.
#[test]
fn a_file_is_no_folder() {
    let folder = Folder::with_good();
    folder.write("out.txt", OLD);
    folder
        .run(&["check", "good.yaml", "--force", "-o", "out.txt/more.txt"])
        .assert()
        .code(2)
        .stdout_eq("")
        .stderr_eq("error: `out.txt/more.txt` cannot be written: `out.txt` is no folder\n");
    assert_eq!(folder.read("out.txt"), OLD);
}

/// What a call reads it does not write, by whatever name, and no file is written twice.
#[test]
fn a_file_is_read_or_written_once() {
    let folder = Folder::with_good();
    let good = folder.read("good.yaml");
    let refused = |args: &[&str], says: &str| {
        folder
            .run(args)
            .assert()
            .code(2)
            .stdout_eq("")
            .stderr_eq(format!("error: {says}\n"));
        assert_eq!(folder.read("good.yaml"), good);
    };
    for name in ["good.yaml", "./good.yaml"] {
        let says = format!("`{name}` is read in this call: write elsewhere");
        refused(&["check", "good.yaml", "--force", "-o", name], &says);
        refused(&["check", "good.yaml", "--force", "--trace", name], &says);
        refused(&["curve", "good.yaml", "--force", "--svg", name], &says);
    }
    for (one, other) in [("new.csv", "new.csv"), ("new.csv", "./new.csv")] {
        refused(
            &["check", "good.yaml", "-o", one, "--trace", other],
            &format!("`{other}` is to be written twice: name two files"),
        );
    }
    assert_eq!(folder.names(), ["good.yaml"]);
}

/// A fleet stopped by its owner half way leaves neither the file nor a part of it beside.
#[cfg(unix)]
#[test]
fn an_interrupted_fleet_leaves_nothing() {
    let folder = Folder::with_good();
    let mut sheet = "machine,build,count,kit,set\n".to_owned();
    for k in 0..20_000 {
        sheet += &format!(
            "m{k},good.yaml,1,,accessories[0].draw={}.{k:05} W\n",
            60 + k % 300
        );
    }
    folder.write("fleet.csv", sheet);
    for format in ["csv", "json"] {
        let args = ["fleet", "fleet.csv", "--format", format, "-o", "out.txt"];
        let mut child = std::process::Command::new(binary())
            .args(args)
            .current_dir(folder.path(""))
            .spawn()
            .expect("it runs");
        std::thread::sleep(std::time::Duration::from_millis(400));
        assert!(
            child.try_wait().expect("a child").is_none(),
            "still at work"
        );
        // not INT, which a suite started in the background hands on as ignored
        let script = format!("kill -TERM {}", child.id());
        let stopped = std::process::Command::new("sh")
            .args(["-c", &script])
            .status();
        assert!(stopped.expect("a shell").success());
        assert!(!child.wait().expect("ended").success());
        assert_eq!(folder.names(), ["fleet.csv", "good.yaml"]);
    }
}
