//! One build of a fleet: read, resolved, judged, mended.

use super::kits::Kits;
use super::plan::{Entry, Plan};
use super::row::{Outcome, one_line};
use crate::build::Build;
use crate::catalog::Catalogs;
use crate::check::{Judged, judge};
use crate::description::{Description, Written, read_file};
use crate::problem::Refusal;
use crate::quantity::Money;
use crate::resolve::{resolve, with_kit};

/// What mends a build.
#[derive(Clone, Debug, PartialEq)]
pub struct Mend {
    /// In words.
    pub text: String,
    /// What it costs, where that is known.
    pub cost: Option<Money>,
    /// As `--set` takes it.
    pub set: Vec<String>,
}

/// Finds the first remedy of a build that does not keep up.
pub type Mender<'a> = dyn Fn(&Description, &Build, &Judged) -> Option<Mend> + Sync + 'a;

/// What all builds of a fleet share.
pub(super) struct Shop<'a> {
    pub(super) plan: &'a Plan,
    pub(super) catalogs: &'a Catalogs,
    pub(super) kits: Kits,
    pub(super) mender: Option<&'a Mender<'a>>,
}

impl Shop<'_> {
    /// What comes of a row.
    pub(super) fn outcome(&self, entry: &Entry) -> Outcome {
        match self.judged(entry) {
            Ok(outcome) => outcome,
            Err(why) => Outcome::failed(why),
        }
    }

    fn judged(&self, entry: &Entry) -> Result<Outcome, String> {
        if let Some(fault) = &entry.fault {
            return Err(fault.to_string());
        }
        let path = self.plan.folder.join(&*entry.build);
        let (mut description, source) =
            read_file(&path, &entry.set).map_err(|refusal| one_line(&refusal))?;
        if let Some(kit) = &entry.kit {
            description = with_kit(&description, self.kits.find(kit)?);
        }
        if let Some(value) = entry.air {
            description.air = Some(Written {
                value,
                tolerance: None,
                path: "air".to_owned(),
            });
        }
        let build = resolve(&description, self.catalogs)
            .map_err(|problems| one_line(&Refusal::new(source.clone(), problems)))?;
        let judged = judge(&build).map_err(|error| format!("{}: {error}", source.name))?;
        Ok(self.told(&description, &build, &judged))
    }

    fn told(&self, description: &Description, build: &Build, judged: &Judged) -> Outcome {
        let mut outcome = Outcome {
            verdict: Some(judged.verdict()),
            lacks_ah: judged.lacks(),
            ..Outcome::default()
        };
        if let Judged::OnCharge(_, ruling) = judged {
            outcome.shifts_carried = ruling.shifts_carried;
            outcome.settles_soc = ruling.settles.map(|(charge, _)| charge.soc);
        }
        if let (false, Some(mender)) = (judged.keeps_up(), self.mender)
            && let Some(mend) = mender(description, build, judged)
        {
            outcome.remedy = Some(mend.text);
            outcome.cost = mend.cost;
            outcome.set = mend.set;
        }
        outcome
    }
}
