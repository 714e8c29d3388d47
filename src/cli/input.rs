//! Bytes in: build files, standard input, catalogs, values given as arguments.

use super::args::mend::Kitted;
use super::args::{BuildArgs, Common};
use ampledger::build::Build;
use ampledger::catalog::Catalogs;
use ampledger::description::set::Assignment;
use ampledger::description::{Description, bytes_of, read_file, read_set};
use ampledger::problem::{Problem, Refusal, Source};
use ampledger::quantity::bounds::{self, Bounds};
use ampledger::quantity::parse::parse;
use ampledger::quantity::unit::Unit;
use ampledger::remedy::{Asked, Prices, read_prices};
use ampledger::resolve;
use anyhow::{Context, anyhow};
use std::io::Read;
use std::path::{Path, PathBuf};

/// A build as read, kept so that more can be made of it.
pub struct Opened {
    /// What the user wrote.
    pub description: Description,
    /// Where everything stands.
    pub source: Source,
    /// The build.
    pub build: Build,
    /// Accessories that stand in the file; those after them came with a kit.
    own: usize,
}

impl Opened {
    /// What remedies and sizes are asked of.
    pub fn asked<'a>(&'a self, catalogs: &'a Catalogs) -> Asked<'a> {
        Asked {
            own: self.own,
            ..Asked::new(&self.description, &self.build, catalogs)
        }
    }
}

/// The catalogs: the user's own folder first, where one is given.
///
/// # Errors
/// The folder cannot be read, or holds what is no catalog.
pub fn catalogs(common: &Common) -> anyhow::Result<Catalogs> {
    match &common.catalogs {
        Some(folder) => Ok(Catalogs::with_folder(folder)?),
        None => Ok(Catalogs::builtin()),
    }
}

/// Reads and resolves one build.
///
/// # Errors
/// [`Refusal`] with every problem found; arguments that are no values.
pub fn build(file: &str, args: &BuildArgs, catalogs: &Catalogs) -> anyhow::Result<Opened> {
    let assignments: Vec<Assignment> = args
        .set
        .iter()
        .map(|text| {
            Assignment::parse(text)
                .map_err(|problem| Refusal::new(Source::default(), Problem::whole(problem)))
        })
        .collect::<Result<_, _>>()?;
    let (mut description, source) =
        describe(file, &assignments).map_err(|refusal| whole(refusal, catalogs))?;
    if let Some(text) = &args.air {
        description.set_air(value("--air", text, &bounds::AIR)?);
    }
    match resolve::resolve(&description, catalogs) {
        Err(problems) => Err(Refusal::new(source, problems).into()),
        Ok(build) => Ok(Opened {
            own: description.accessories.len(),
            description,
            source,
            build: started(build, args)?,
        }),
    }
}

/// The build with the start as the arguments have it.
fn started(build: Build, args: &BuildArgs) -> anyhow::Result<Build> {
    match &args.start {
        Some(text) => Ok(build.starting_at(value("--start", text, &bounds::START)?)),
        None => Ok(build),
    }
}

/// A refused file with the parts that are in no catalog among its problems, so that all is told at once.
fn whole(problem: anyhow::Error, catalogs: &Catalogs) -> anyhow::Error {
    match problem.downcast::<Refusal>() {
        Err(other) => other,
        Ok(refusal) => {
            let more = refusal
                .partial()
                .map(|partial| resolve::more_problems(partial, catalogs));
            refusal.and(more.unwrap_or_default()).into()
        }
    }
}

/// The files that arguments name: a pattern that no file has as its name is every file it matches, for shells that leave
/// patterns as they are.
///
/// # Errors
/// A pattern that matches nothing, or is none.
pub fn files(named: &[String]) -> anyhow::Result<Vec<String>> {
    let mut files = Vec::new();
    for name in named {
        if !name.contains(['*', '?', '[']) || Path::new(name).exists() {
            files.push(name.clone());
            continue;
        }
        let pattern = glob::glob(name).map_err(|e| anyhow!("`{name}` is no pattern: {}", e.msg))?;
        let before = files.len();
        // a folder that cannot be read holds no file to check
        files.extend(pattern.flatten().map(|path| path.display().to_string()));
        if files.len() == before {
            return Err(anyhow!("`{name}` matches no file"));
        }
    }
    Ok(files)
}

/// The build with a kit's accessories added.
///
/// # Errors
/// No such kit; the kit does not fit the build.
pub fn with_kit(
    opened: &Opened,
    kit: &str,
    args: &BuildArgs,
    catalogs: &Catalogs,
) -> anyhow::Result<Opened> {
    let kit = resolve::find_kit(catalogs, kit)?;
    let (alone, source) = (&opened.description, &opened.source);
    let description = resolve::with_kit(alone, &kit);
    let build = resolve::resolve(&description, catalogs)
        .map_err(|problems| resolve::misfit(alone, source, &kit, catalogs, problems))?;
    Ok(Opened {
        description,
        source: source.clone(),
        build: started(build, args)?,
        own: opened.own,
    })
}

/// The build of a file, with a kit's accessories added where one is named.
///
/// # Errors
/// Those of [`build`] and [`with_kit`].
pub fn kitted(of: &Kitted, catalogs: &Catalogs) -> anyhow::Result<Opened> {
    let opened = build(&of.file, &of.build, catalogs)?;
    match &of.with {
        Some(kit) => with_kit(&opened, kit, &of.build, catalogs),
        None => Ok(opened),
    }
}

/// The user's price list; without one, the catalogs' prices.
///
/// # Errors
/// [`Refusal`]: the list is not understood.
pub fn prices(list: Option<&PathBuf>) -> anyhow::Result<Prices> {
    match list {
        Some(path) => Ok(read_prices(path)?),
        None => Ok(Prices::default()),
    }
}

fn describe(file: &str, assignments: &[Assignment]) -> anyhow::Result<(Description, Source)> {
    if file != "-" {
        return Ok(read_file(Path::new(file), assignments)?);
    }
    Ok(read_set("standard input", &standard_input()?, assignments)?)
}

/// The bytes of standard input, no more than tell that they are too many.
fn standard_input() -> anyhow::Result<Vec<u8>> {
    let mut bytes = Vec::new();
    let most = ampledger::problem::text::MOST_BYTES + 1;
    std::io::stdin()
        .lock()
        .take(most)
        .read_to_end(&mut bytes)
        .context("standard input cannot be read")?;
    Ok(bytes)
}

/// A file's name in messages and its text; `-` is standard input.
///
/// # Errors
/// [`Refusal`]: it is missing, too large, not UTF-8.
pub fn text(file: &str) -> anyhow::Result<(String, String)> {
    let (name, bytes) = if file == "-" {
        ("standard input".to_owned(), standard_input()?)
    } else {
        (file.to_owned(), bytes_of(Path::new(file), file)?)
    };
    match String::from_utf8(bytes) {
        Ok(text) => Ok((
            name,
            text.trim_start_matches('\u{feff}').replace("\r\n", "\n"),
        )),
        Err(problem) => Err(anyhow!(
            "`{name}` is not UTF-8 text (byte {})",
            problem.utf8_error().valid_up_to() + 1
        )),
    }
}

/// A quantity given as an argument.
///
/// # Errors
/// It is none, or more or less than it may be.
pub fn value<Q: Unit>(name: &str, text: &str, may_be: &Bounds<Q>) -> anyhow::Result<Q> {
    let measured = parse::<Q>(text).map_err(|problem| anyhow!("{name} `{text}`: {problem}"))?;
    within(name, text, measured.value, may_be)
}

/// A number given as an argument, if it may be.
///
/// # Errors
/// It may not.
pub fn within<Q: Unit>(name: &str, text: &str, value: Q, may_be: &Bounds<Q>) -> anyhow::Result<Q> {
    match may_be.check(value) {
        Ok(()) => Ok(value),
        Err(beyond) => Err(anyhow!("{name} `{text}`: {beyond}")),
    }
}
