//! A build and what is needed to make others of it.

use crate::build::Build;
use crate::catalog::{Catalogs, Kind, Parted, Read};
use crate::description::Description;
use crate::resolve::resolve;
use std::sync::Arc;

/// A build as read, and where parts are found.
#[derive(Clone, Copy, Debug)]
pub struct Asked<'a> {
    /// What the user wrote.
    pub description: &'a Description,
    /// The build made of it, with its air and start as they are to be.
    pub build: &'a Build,
    /// Where parts are found.
    pub catalogs: &'a Catalogs,
    /// Accessories that stand in the file; those after them came with a kit, and no `--set` reaches
    /// them.
    pub own: usize,
}

impl<'a> Asked<'a> {
    /// A build all of which stands in its file.
    #[must_use]
    pub fn new(
        description: &'a Description,
        build: &'a Build,
        catalogs: &'a Catalogs,
    ) -> Asked<'a> {
        Asked {
            description,
            build,
            catalogs,
            own: description.accessories.len(),
        }
    }
}

impl Asked<'_> {
    /// The build of a changed description, in the same air and with the same start; none where the
    /// change does not fit the build.
    #[must_use]
    pub fn resolved(&self, description: &Description) -> Option<Build> {
        let mut build = resolve(description, self.catalogs).ok()?;
        build.air = self.build.air.clone();
        build.start = self.build.start;
        Some(build)
    }

    /// Whether a path leads into the file: not to an accessory of a kit.
    pub(crate) fn in_file(&self, path: &str) -> bool {
        let mut of_kit = self.description.accessories.iter().skip(self.own);
        !of_kit.any(|a| path.starts_with(&a.path))
    }

    /// The parts of a kind, read, in the order of their catalogs. Entries that do not read are left out.
    pub(crate) fn parts<T: Parted>(&self, kind: Kind) -> Vec<Arc<Read<T>>> {
        let entries = self.catalogs.entries(kind).into_iter();
        entries
            .filter_map(|entry| self.catalogs.part::<T>(&entry.id)?.ok())
            .collect()
    }
}
