//! The page in a real browser: no sideways scrolling at three widths, and one or two sheets of
//! paper. Run with `cargo test --features live --test live_browser`; it fails where no `chromium`
//! is found.

#![allow(missing_docs)]

#[path = "reports/gallery.rs"]
mod gallery;
#[path = "reports/sample.rs"]
mod sample;

use ampledger::report::html;
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

/// Every report as a page in a folder.
fn pages(folder: &Path) -> Vec<(String, PathBuf)> {
    let reports = gallery::reports().into_iter().map(|(name, report)| {
        let path = folder.join(format!("{}.html", name.replace(' ', "-")));
        std::fs::write(&path, html::render(&report)).expect("a page is written");
        (name.to_owned(), path)
    });
    reports.collect()
}

#[test]
fn no_page_scrolls_sideways() {
    let folder = tempfile::tempdir().expect("a folder");
    let mut pages = pages(folder.path());
    let wide = folder.path().join("wide.html");
    let overflowing = "<!DOCTYPE html><div style=\"width:2000px\">x</div>";
    std::fs::write(&wide, overflowing).expect("a page is written");
    pages.push(("wide".to_owned(), wide));
    // The pages hold no script; a frame about each of them measures it.
    let frames: String = pages
        .iter()
        .flat_map(|(name, path)| [360, 768, 1280].map(|width| (name, path, width)))
        .map(|(name, path, width)| {
            let url = path.display();
            format!(
                "<iframe data-name=\"{name} at {width}\" src=\"file://{url}\" width=\"{width}\" \
                 height=\"900\" style=\"border:0\"></iframe>"
            )
        })
        .collect();
    let harness = format!(
        "<!DOCTYPE html><body>{frames}<script>onload=()=>{{\
         for(const f of document.querySelectorAll('iframe')){{\
         const d=f.contentDocument.documentElement,p=document.createElement('p');\
         p.textContent=['measured',f.dataset.name,d.clientWidth,d.scrollWidth].join(';');\
         document.body.append(p)}}}}</script></body>"
    );
    let path = folder.path().join("harness.html");
    std::fs::write(&path, harness).expect("the harness is written");
    let url = format!("file://{}", path.display());
    let document = browser(folder.path(), &["--dump-dom".to_owned(), url]);
    let measured: Vec<Vec<&str>> = document
        .split("<p>measured;")
        .skip(1)
        .filter_map(|p| p.split("</p>").next())
        .map(|p| p.split(';').collect())
        .collect();
    assert_eq!(
        measured.len(),
        3 * pages.len(),
        "not every page was measured: {document}"
    );
    for fields in measured {
        let number = |index: usize| fields[index].parse::<u32>().expect("a number");
        assert!(
            fields[0].ends_with(&format!(" {}", number(1))),
            "a bar took width: {fields:?}"
        );
        // The page that is made to overflow shows that the measurement can fail.
        let overflows = fields[0].starts_with("wide ");
        assert_eq!(
            number(2) > number(1),
            overflows,
            "scrolls sideways: {fields:?}"
        );
    }
}

#[test]
fn a_page_prints_on_one_or_two_sheets() {
    let folder = tempfile::tempdir().expect("a folder");
    for (name, path) in pages(folder.path()) {
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
            let sheets = count(&bytes, b"/Type /Page\n");
            assert!(
                (1..=2).contains(&sheets),
                "{name} on {paper}: {sheets} sheets"
            );
            assert!(
                bytes.len() < 400_000,
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
