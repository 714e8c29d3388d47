//! Bytes out: standard output, or a file written whole or not at all.

use super::args::{Common, Format, HandOver};
use ampledger::report::{Report, csv, html, markdown, text};
use anyhow::Context;
use std::io::{ErrorKind, IsTerminal, Write};
use std::path::Path;

/// Columns of a table that goes to a pipe or a file.
const PIPED_WIDTH: u16 = 80;
/// Columns beyond which a terminal's width is not used: lines that long are not read.
const WIDEST: u16 = 120;

/// Writes an answer in the format asked for: `report` for the formats that are read, `answer` for
/// JSON.
///
/// # Errors
/// The file exists, or cannot be written.
pub fn write(
    common: &Common,
    report: impl FnOnce() -> Report,
    answer: &impl serde::Serialize,
) -> anyhow::Result<()> {
    write_as(common, common.format, report, answer)
}

/// The same in a format of the command's own.
///
/// # Errors
/// The file exists, or cannot be written.
pub fn write_as(
    common: &Common,
    format: Format,
    report: impl FnOnce() -> Report,
    answer: &impl serde::Serialize,
) -> anyhow::Result<()> {
    let bytes = match format {
        Format::Json => json(answer)?,
        Format::Table => text::render(&report(), &style(common)),
        Format::Csv => csv::render(&report()),
        Format::Markdown => markdown::render(&report()),
        Format::Html => html::render(&report()),
    };
    put(common, &bytes)
}

/// A report with whom it goes to and its date, as far as they are given.
pub fn addressed(report: Report, to: &HandOver) -> Report {
    report.made_for(to.made_for.clone(), to.date.clone())
}

/// JSON with a final line end.
///
/// # Errors
/// A number that JSON cannot hold.
pub fn json(answer: &impl serde::Serialize) -> anyhow::Result<String> {
    let mut text =
        serde_json::to_string_pretty(answer).context("the answer cannot be written as JSON")?;
    text.push('\n');
    Ok(text)
}

/// Writes text to where the answer goes.
///
/// # Errors
/// The file exists, or cannot be written.
pub fn put(common: &Common, text: &str) -> anyhow::Result<()> {
    match &common.output {
        Some(path) => whole(path, text.as_bytes(), common.force),
        None => {
            let mut out = std::io::stdout().lock();
            out.write_all(text.as_bytes())
                .and_then(|()| out.flush())
                .context("standard output cannot be written")
        }
    }
}

/// Writes a file beside its target and renames it: the old file is there until the new one is whole. What is no file on a
/// disk, such as a device, is written to as it stands.
///
/// # Errors
/// The file exists and is not to be replaced, or cannot be written.
pub fn whole(path: &Path, bytes: &[u8], force: bool) -> anyhow::Result<()> {
    ready(path, force)?;
    let failed = || format!("`{}` cannot be written", path.display());
    if is_device(path) {
        return std::fs::write(path, bytes).with_context(failed);
    }
    // a link stays, and what it leads to is replaced
    let target = path.canonicalize().unwrap_or_else(|_| path.to_path_buf());
    let folder = match target.parent() {
        Some(folder) if !folder.as_os_str().is_empty() => folder,
        _ => Path::new("."),
    };
    let place = || -> std::io::Result<()> {
        let mut beside = new_file().tempfile_in(folder)?;
        beside.write_all(bytes)?;
        if let Ok(old) = std::fs::metadata(&target) {
            beside.as_file().set_permissions(old.permissions())?;
        }
        beside.as_file().sync_all()?;
        if force {
            beside.persist(&target)?;
        } else {
            beside.persist_noclobber(&target)?;
        }
        Ok(())
    };
    place().map_err(plain).with_context(failed)
}

/// Whether a file may be written, told before anything is worked out for it.
///
/// # Errors
/// A folder stands there; the file exists and is not to be replaced; its folder is not there.
pub fn ready(path: &Path, force: bool) -> anyhow::Result<()> {
    let shown = path.display();
    if path.is_dir() {
        anyhow::bail!("`{shown}` is a folder: name a file to write");
    }
    if !force && !is_device(path) && path.symlink_metadata().is_ok() {
        anyhow::bail!(
            "`{shown}` exists and is kept: write elsewhere, or give --force to replace it"
        );
    }
    match path.parent() {
        Some(folder) if !folder.as_os_str().is_empty() && !folder.is_dir() => {
            let folder_shown = folder.display();
            if folder.exists() {
                anyhow::bail!("`{shown}` cannot be written: `{folder_shown}` is no folder");
            }
            anyhow::bail!("`{shown}` cannot be written: there is no folder `{folder_shown}`");
        }
        _ => Ok(()),
    }
}

/// Whether something other than a file or a folder stands there.
fn is_device(path: &Path) -> bool {
    std::fs::metadata(path).is_ok_and(|there| !there.is_file() && !there.is_dir())
}

/// A file as readable as the user's settings let any new file be; a temporary one is private otherwise.
#[cfg(unix)]
fn new_file() -> tempfile::Builder<'static, 'static> {
    use std::os::unix::fs::PermissionsExt;
    let mut builder = tempfile::Builder::new();
    builder
        .prefix(".ampledger-")
        .permissions(std::fs::Permissions::from_mode(0o666));
    builder
}

#[cfg(not(unix))]
fn new_file() -> tempfile::Builder<'static, 'static> {
    let mut builder = tempfile::Builder::new();
    builder.prefix(".ampledger-");
    builder
}

/// What went wrong with a file, without the name of the temporary one.
fn plain(error: std::io::Error) -> std::io::Error {
    match error.raw_os_error() {
        Some(code) => std::io::Error::from_raw_os_error(code),
        None => error.kind().into(),
    }
}

/// How text is laid out for where it goes.
pub fn style(common: &Common) -> text::Style {
    let stdout = std::io::stdout();
    let to_terminal = common.output.is_none() && stdout.is_terminal();
    let terminal = terminal_size::terminal_size()
        .map(|(width, _)| width.0)
        .filter(|w| *w > 0);
    let fallback = if to_terminal {
        terminal.unwrap_or(PIPED_WIDTH).clamp(40, WIDEST)
    } else {
        PIPED_WIDTH
    };
    text::Style {
        width: usize::from(common.width.unwrap_or(fallback)),
        colour: common.output.is_none() && common.colours(&stdout),
        ascii: common.ascii || (to_terminal && !speaks_utf8()),
        charts: true,
    }
}

/// Whether the locale names UTF-8; one that says nothing is taken to.
fn speaks_utf8() -> bool {
    let named = ["LC_ALL", "LC_CTYPE", "LANG"]
        .iter()
        .find_map(|key| std::env::var(key).ok().filter(|v| !v.is_empty()));
    named.is_none_or(|locale| {
        let locale = locale.to_ascii_lowercase();
        locale.contains("utf-8") || locale.contains("utf8")
    })
}

/// A line to standard error.
pub fn complain(text: &str) {
    // Nothing is left to do when standard error is closed.
    let _ = writeln!(std::io::stderr().lock(), "{text}");
}

/// Whether the reader of standard output went away.
pub fn is_broken_pipe(problem: &anyhow::Error) -> bool {
    problem.chain().any(|cause| {
        cause
            .downcast_ref::<std::io::Error>()
            .is_some_and(|e| e.kind() == ErrorKind::BrokenPipe)
    })
}
