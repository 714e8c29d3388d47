//! The pages in a real browser, in light and in dark: no sideways scrolling at three widths, text that
//! stands out from its ground, labels of charts whole and apart; and few sheets of paper. Run with `cargo test --features live --test live_browser`; it fails where no `chromium`
//! is found.

#![allow(missing_docs)]

#[path = "reports/answers.rs"]
mod answers;
#[path = "pages/cases.rs"]
mod cases;
#[path = "reports/gallery.rs"]
mod gallery;
#[path = "reports/sample.rs"]
mod sample;

use ampledger::report::html;
use cases::{CASES, written};
use std::path::{Path, PathBuf};
use std::process::Command;

const NAMES: [&str; 2] = ["chromium", "chromium-browser"];

/// Runs the browser without a window in a fresh profile; gives its standard output.
fn browser(folder: &Path, arguments: &[String]) -> String {
    let profile = folder.join("profile");
    let fixed = [
        "--headless",
        "--no-sandbox",
        "--disable-gpu",
        "--disable-quic",
        "--no-first-run",
        "--disable-background-networking",
        "--disable-component-update",
        "--disable-sync",
        "--hide-scrollbars",
        "--allow-file-access-from-files",
        "--virtual-time-budget=2000",
    ];
    for name in NAMES {
        let run = Command::new(name)
            .args(fixed)
            .arg(format!("--user-data-dir={}", profile.display()))
            .args(arguments)
            .output();
        if let Ok(output) = run {
            assert!(
                output.status.success(),
                "{}",
                String::from_utf8_lossy(&output.stderr)
            );
            return String::from_utf8_lossy(&output.stdout).into_owned();
        }
    }
    panic!("none of {NAMES:?} is installed");
}

/// A page in a folder, and how many sheets of paper it may take.
struct Page {
    name: String,
    path: PathBuf,
    sheets: usize,
}

/// Every page of the program and every report of the gallery, in a folder.
fn pages(folder: &Path) -> Vec<Page> {
    let reports = gallery::reports().into_iter();
    let reports = reports.map(|(name, report)| {
        let sheets = if name == "sheet" { 3 } else { 2 };
        (format!("report {name}"), html::render(&report), sheets)
    });
    let cases = CASES.iter().map(|case| {
        (
            case.name.to_owned(),
            written(case.call, "html"),
            case.sheets,
        )
    });
    let write = |(name, page, sheets): (String, String, usize)| {
        let path = folder.join(format!("{}.html", name.replace(' ', "-")));
        std::fs::write(&path, page).expect("a page is written");
        Page { name, path, sheets }
    };
    reports.chain(cases).map(write).collect()
}

/// What `live/measure.js` tells of a page in a frame.
#[derive(Debug)]
struct Measured {
    name: String,
    width: u32,
    client: u32,
    scrolled: u32,
    contrast: f64,
    faintest: String,
    outside: String,
    overlapping: String,
}

/// Measures pages at three widths. They hold no script: a page about them does it.
fn measured(folder: &Path, pages: &[(&str, &Path)], dark: bool) -> Vec<Measured> {
    let frame = |(name, path): &(&str, &Path), width: u32| {
        format!(
            "<iframe data-name=\"{name};{width}\" src=\"file://{}\" width=\"{width}\" \
             height=\"900\" style=\"border:0\"></iframe>",
            path.display()
        )
    };
    let frames: String = pages
        .iter()
        .flat_map(|page| [360, 768, 1280].map(|width| frame(page, width)))
        .collect();
    let harness = format!(
        "<!DOCTYPE html><meta name=\"color-scheme\" content=\"light dark\"><body>{frames}\
         <script>{}</script></body>",
        include_str!("live/measure.js")
    );
    let path = folder.join("harness.html");
    std::fs::write(&path, harness).expect("the harness is written");
    let mut arguments = vec![
        "--dump-dom".to_owned(),
        format!("file://{}", path.display()),
    ];
    if dark {
        arguments.insert(0, "--blink-settings=preferredColorScheme=0".to_owned());
    }
    let document = browser(folder, &arguments);
    let lines = document.split("<p>measured;").skip(1);
    let read = |line: &str| {
        let fields: Vec<&str> = line
            .split("</p>")
            .next()
            .unwrap_or_default()
            .split(';')
            .collect();
        let number = |index: usize| fields[index].parse::<u32>().expect("a number");
        Measured {
            name: fields[0].to_owned(),
            width: number(1),
            client: number(2),
            scrolled: number(3),
            contrast: fields[4].parse().expect("a ratio"),
            faintest: fields[5].to_owned(),
            outside: fields[6].to_owned(),
            overlapping: fields[7].to_owned(),
        }
    };
    let all: Vec<Measured> = lines.map(read).collect();
    assert_eq!(
        all.len(),
        3 * pages.len(),
        "not every page was measured: {document}"
    );
    for one in &all {
        assert_eq!(one.client, one.width, "a bar took width: {one:?}");
    }
    all
}

#[test]
fn pages_fit_and_read_in_light_and_in_dark() {
    let folder = tempfile::tempdir().expect("a folder");
    let pages = pages(folder.path());
    let pages: Vec<(&str, &Path)> = pages
        .iter()
        .map(|p| (p.name.as_str(), p.path.as_path()))
        .collect();
    let mut lowest = [f64::INFINITY; 2];
    for dark in [false, true] {
        for one in measured(folder.path(), &pages, dark) {
            assert!(one.scrolled <= one.width, "scrolls sideways: {one:?}");
            // WCAG 2.2, success criterion 1.4.3
            assert!(one.contrast >= 4.5, "dark {dark}: {one:?}");
            assert_eq!(
                one.outside, "",
                "{} in dark {dark}: a label is cut: {one:?}",
                one.name
            );
            assert_eq!(one.overlapping, "", "dark {dark}: labels overlap: {one:?}");
            let least = &mut lowest[usize::from(dark)];
            *least = least.min(one.contrast);
        }
    }
    println!(
        "lowest contrast: {:.2} in light, {:.2} in dark",
        lowest[0], lowest[1]
    );
    assert!(lowest[0] != lowest[1], "dark was not dark");
}

/// A page with every fault shows that each measurement can fail.
#[test]
fn what_is_measured_can_fail() {
    let folder = tempfile::tempdir().expect("a folder");
    let path = folder.path().join("faulty.html");
    let faulty = "<!DOCTYPE html><body style=\"background:#fff\"><div style=\"width:2000px\">x</div>\
        <p style=\"color:#999\">faint</p><svg width=\"100\" height=\"50\"><title>chart</title>\
        <text x=\"10\" y=\"20\">one</text><text x=\"12\" y=\"20\">two</text>\
        <text x=\"90\" y=\"40\">cut off</text></svg>";
    std::fs::write(&path, faulty).expect("a page is written");
    for one in measured(folder.path(), &[("faulty", &path)], false) {
        assert!(one.scrolled > one.width, "{one:?}");
        // #999999 on white, by the formula of WCAG 2.2
        assert!(
            (one.contrast - 2.85).abs() < 0.01 && one.faintest.contains("faint"),
            "{one:?}"
        );
        assert!(one.outside.contains("cut off"), "{one:?}");
        assert!(one.overlapping.contains("one/two"), "{one:?}");
    }
}

#[test]
fn a_page_prints_on_few_sheets() {
    let folder = tempfile::tempdir().expect("a folder");
    for Page { name, path, sheets } in pages(folder.path()) {
        for paper in ["A4", "letter"] {
            let sized = folder.path().join("sized.html");
            let page = std::fs::read_to_string(&path).expect("the page");
            let page = page.replace("@page{", &format!("@page{{size:{paper};"));
            assert!(page.contains(&format!("size:{paper}")), "no rule for paper");
            std::fs::write(&sized, page).expect("the page is written");
            let pdf = folder.path().join("page.pdf");
            let print = format!("--print-to-pdf={}", pdf.display());
            let url = format!("file://{}", sized.display());
            browser(
                folder.path(),
                &["--no-pdf-header-footer".to_owned(), print, url],
            );
            let bytes = std::fs::read(&pdf).expect("a PDF");
            let printed = count(&bytes, b"/Type /Page\n");
            println!("{name} on {paper}: {printed}");
            assert!(
                (1..=sheets).contains(&printed),
                "{name} on {paper}: {printed} sheets"
            );
            assert!(
                bytes.len() < 500_000,
                "{name} on {paper}: {} bytes",
                bytes.len()
            );
            std::fs::remove_file(&pdf).expect("the PDF is removed");
        }
    }
}

fn count(bytes: &[u8], what: &[u8]) -> usize {
    bytes
        .windows(what.len())
        .filter(|window| *window == what)
        .count()
}
