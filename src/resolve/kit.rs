//! Kits: accessories added to a machine together.

use crate::catalog::{Catalogs, Kind};
use crate::description::{AccessoryText, Description, KitText, Written, bytes_of, read_kit};
use crate::problem::Refusal;
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
        let text = read_kit(&format!("{} `{}`", entry.origin, entry.id), &entry.body)?;
        return Ok(kit(entry.id, entry.title, text));
    }
    let path = Path::new(name);
    if !path.exists() {
        let nearest = catalogs.nearest(Kind::Kit, name);
        return Err(KitError::Unknown {
            name: name.to_owned(),
            nearest,
        });
    }
    let bytes = bytes_of(path, name)?;
    let text = read_kit(name, &String::from_utf8_lossy(&bytes))?;
    let title = path
        .file_stem()
        .map_or(name.to_owned(), |s| s.to_string_lossy().into_owned());
    Ok(kit(name.to_owned(), title, text))
}

fn kit(name: String, title: String, text: KitText) -> Kit {
    Kit {
        name,
        title,
        price: text.price.map(|p| p.value),
        accessories: text.accessories,
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
        accessory.path = crate::description::path::index("accessories", first + index);
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
