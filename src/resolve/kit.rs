//! Kits: accessories added to a machine together.

use super::resolve;
use crate::catalog::{Catalogs, Kind};
use crate::description::{AccessoryText, Description, Written, path};
use crate::description::{bytes_of, open_text, read_kit};
use crate::problem::{Problems, Refusal, Source};
use crate::quantity::Money;
use std::fmt;
use std::path::Path;

/// Accessories added to a machine together, and what they cost fitted.
#[derive(Clone, Debug)]
pub struct Kit {
    /// What it is called: its id, or its file's name.
    pub name: String,
    /// What it is, in words.
    pub title: String,
    /// Price of it all; none where the kit names none.
    pub price: Option<Money>,
    /// What it adds.
    pub accessories: Vec<AccessoryText>,
    /// Its own text, on which is shown where it does not fit a build.
    source: Source,
}

/// Why there is no such kit.
#[derive(Clone, Debug)]
pub enum KitError {
    /// Neither an id of the catalogs nor a file.
    Unknown {
        /// As given.
        name: String,
        /// The nearest id.
        nearest: Option<String>,
    },
    /// A kit that does not read; boxed, as it carries the text it is shown on.
    Refused(Box<Refusal>),
}

impl fmt::Display for KitError {
    fn fmt(&self, f: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            KitError::Unknown {
                name,
                nearest: Some(id),
            } => {
                write!(
                    f,
                    "no kit `{name}`, neither in the catalogs nor as a file: did you mean `{id}`?"
                )
            }
            KitError::Unknown {
                name,
                nearest: None,
            } => {
                write!(f, "no kit `{name}`, neither in the catalogs nor as a file")
            }
            KitError::Refused(refusal) => refusal.fmt(f),
        }
    }
}

impl std::error::Error for KitError {}

impl From<Refusal> for KitError {
    fn from(refusal: Refusal) -> KitError {
        KitError::Refused(Box::new(refusal))
    }
}

/// The kit of an id in the catalogs or, where there is none, of a YAML file (`accessories:`, and if wanted `price:`).
///
/// # Errors
/// [`KitError`]: nothing of that name, or a kit that does not read.
pub fn find_kit(catalogs: &Catalogs, name: &str) -> Result<Kit, KitError> {
    if let Some(entry) = catalogs.find(Kind::Kit, name) {
        let name = format!("{} `{}`", entry.origin, entry.id);
        return kit(entry.id, entry.title, &name, &entry.body);
    }
    let file = Path::new(name);
    if !file.exists() {
        let nearest = catalogs.nearest(Kind::Kit, name);
        return Err(KitError::Unknown {
            name: name.to_owned(),
            nearest,
        });
    }
    let bytes = bytes_of(file, name)?;
    let title = file
        .file_stem()
        .map_or(name.to_owned(), |s| s.to_string_lossy().into_owned());
    let text = String::from_utf8_lossy(&bytes);
    kit(name.to_owned(), title, name, &text)
}

/// A kit read from its text, which messages call `shown`.
fn kit(id: String, title: String, shown: &str, text: &str) -> Result<Kit, KitError> {
    let kit = read_kit(shown, text)?;
    let (source, _) = open_text(shown, text.as_bytes())?;
    Ok(Kit {
        name: id,
        title,
        price: kit.price.map(|p| p.value),
        accessories: kit.accessories,
        source,
    })
}

/// What is said where a build with a kit does not resolve: what is wrong with the build alone, in its file, or else how the
/// kit does not fit it, in the kit's.
#[must_use]
pub fn misfit(
    alone: &Description,
    source: &Source,
    kit: &Kit,
    catalogs: &Catalogs,
    problems: Problems,
) -> Refusal {
    if let Err(own) = resolve(alone, catalogs) {
        return Refusal::new(source.clone(), own);
    }
    let mut in_kit = Problems::default();
    for problem in problems.iter() {
        let mut problem = problem.clone();
        problem.path = kit.path_of(&problem.path, alone.accessories.len());
        in_kit.push(problem);
    }
    Refusal::new(kit.source.clone(), in_kit)
}

impl Kit {
    /// The place in the kit's own text of a place in a build that had `before` accessories of its own.
    fn path_of(&self, place: &str, before: usize) -> String {
        let own = (0..self.accessories.len()).find_map(|index| {
            let rest = place.strip_prefix(&path::index("accessories", before + index))?;
            Some(path::index("accessories", index) + rest)
        });
        // what is written in an entry has kept its place there
        own.filter(|_| self.source.places.find(place).is_none())
            .unwrap_or_else(|| place.to_owned())
    }
}

/// The description with a kit's accessories after its own. A name that the machine has already is numbered.
#[must_use]
pub fn with_kit(description: &Description, kit: &Kit) -> Description {
    let mut with = description.clone();
    let first = with.accessories.len();
    let mut renamed: Vec<(String, String)> = Vec::new();
    for (index, accessory) in kit.accessories.iter().enumerate() {
        let mut accessory = accessory.clone();
        accessory.path = path::index("accessories", first + index);
        if let Some(name) = &mut accessory.name {
            let free = free_name(&with.accessories, &name.value);
            if free != name.value {
                renamed.push((std::mem::replace(&mut name.value, free.clone()), free));
            }
        }
        with.accessories.push(accessory);
    }
    for accessory in with.accessories.iter_mut().skip(first) {
        for other in accessory.together.iter_mut().chain(&mut accessory.apart) {
            follow(other, &renamed);
        }
    }
    with
}

/// A name that none of the accessories has: the wanted one, or that with a number.
fn free_name(accessories: &[AccessoryText], wanted: &str) -> String {
    let taken = |name: &str| {
        accessories
            .iter()
            .any(|a| a.name.as_ref().is_some_and(|n| n.value == name))
    };
    let mut name = wanted.to_owned();
    let mut number = 1;
    while taken(&name) {
        number += 1;
        name = format!("{wanted} ({number})");
    }
    name
}

/// A kit's accessory names another of the kit: the new name of that one.
fn follow(name: &mut Written<String>, renamed: &[(String, String)]) {
    if let Some((_, new)) = renamed.iter().find(|(old, _)| *old == name.value) {
        name.value.clone_from(new);
    }
}
