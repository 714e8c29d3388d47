//! One build of a fleet: read, resolved, judged, mended.

use super::kits::Kits;
use super::plan::{Entry, Plan};
use super::row::{Outcome, one_line};
use crate::catalog::Catalogs;
use crate::check::{Judged, judge};
use crate::description::read_file;
use crate::problem::Refusal;
use crate::remedy::{Asked, Prices, first_remedy};
use crate::resolve::{misfit, resolve, with_kit};

/// What all builds of a fleet share.
pub(super) struct Shop<'a> {
    pub(super) plan: &'a Plan,
    pub(super) catalogs: &'a Catalogs,
    pub(super) kits: Kits,
    /// Remedies are looked for with these prices; none are without.
    pub(super) prices: Option<&'a Prices>,
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
        if let Some(air) = entry.air {
            description.set_air(air);
        }
        let own = description.accessories.len();
        let kit = entry.kit.as_ref().map(|kit| self.kits.find(kit));
        let (description, build) = match kit.transpose()? {
            None => {
                let build = resolve(&description, self.catalogs)
                    .map_err(|problems| one_line(&Refusal::new(source.clone(), problems)))?;
                (description, build)
            }
            Some(kit) => {
                let both = with_kit(&description, kit);
                let build = resolve(&both, self.catalogs).map_err(|problems| {
                    one_line(&misfit(&description, &source, kit, self.catalogs, problems))
                })?;
                (both, build)
            }
        };
        let judged = judge(&build).map_err(|error| format!("{}: {error}", source.name))?;
        let asked = Asked {
            own,
            ..Asked::new(&description, &build, self.catalogs)
        };
        Ok(self.told(&asked, &judged))
    }

    fn told(&self, asked: &Asked<'_>, judged: &Judged) -> Outcome {
        let mut outcome = Outcome {
            verdict: judged.is_judged().then(|| judged.verdict()),
            lacks_ah: judged.lacks(),
            ..Outcome::default()
        };
        if let Judged::OnCharge(_, ruling) = judged {
            outcome.shifts_carried = ruling.shifts_carried;
            outcome.settles_soc = ruling.settles.map(|(charge, _)| charge.soc);
        }
        // Without a battery there is no charge to mend.
        if let (false, Some(prices)) = (judged.keeps_up(), self.prices)
            && let Ok(found) = first_remedy(asked, prices)
        {
            outcome.binds = found.binds;
            if let Some(first) = found.answers.into_iter().next() {
                outcome.remedy = Some(first.changes.join("; "));
                outcome.cost = first.cost;
                outcome.set = first.set;
                outcome.parts = first.parts;
            }
        }
        outcome
    }
}
