//! The control: each family of each rival is left out in turn, and the court must notice, or show
//! that nothing is lost.

use std::rc::Rc;

use model::{FamilyId, FamilyState};
use record::study::Mutant;

use super::duel::Duel;
use super::enumerate::Compared;
use super::{Case, Findings};
use crate::subject::Subject;

/// Duels in which a mutant must show itself where not every plan can be compared.
const DUELS: u64 = 4;
/// Families of a rival that are left out in turn; of more, as many are taken evenly among them.
const MOST_FAMILIES: usize = 16;

impl Case<'_> {
    /// Breaks both rivals, family by family; with how many families were passed over.
    pub(crate) async fn mutants(&self, findings: &Findings) -> (Vec<Mutant>, u32) {
        let parts = match findings.control {
            Some(size) => self.first(size).await,
            None => None,
        };
        let (mut out, mut untried) = (Vec::new(), 0);
        for side in [0, 1] {
            let families = self.rivals[side].model.families();
            let held = |place: &usize| families[*place].state != FamilyState::Out;
            let all: Vec<usize> = (0..families.len()).filter(held).collect();
            let tried = all.len().min(MOST_FAMILIES);
            untried += u32::try_from(all.len() - tried).unwrap_or(u32::MAX);
            for number in 0..tried {
                let place = all[number * all.len() / tried];
                let family = &families[place];
                let letter = &self.rivals[side].letter;
                self.say(&format!("{letter} without {}", family.name));
                let (caught, by) = self.mutant(side, FamilyId::from_index(place), &parts).await;
                let (rival, without) = (letter.clone(), family.name.clone());
                out.push(Mutant { rival, without, caught, by });
            }
        }
        (out, untried)
    }

    async fn mutant(
        &self,
        side: usize,
        family: FamilyId,
        parts: &Option<[Subject; 2]>,
    ) -> (Option<bool>, String) {
        if let Some(parts) = parts {
            let mut broken = parts.clone();
            broken[side].model = Rc::new(broken[side].model.left_out(&[family]));
            match self.with_models(&broken).compared().await {
                Compared::Differ(_) => return (Some(true), "every plan".to_owned()),
                Compared::Same(_) => {
                    return (Some(false), "it has the same plans: no other problem".to_owned());
                }
                Compared::Open(_) => {}
            }
        }
        let mut broken = [self.rivals[0].clone(), self.rivals[1].clone()];
        broken[side].model = Rc::new(broken[side].model.left_out(&[family]));
        let case = self.with_models(&broken);
        for number in 0..DUELS {
            if let Duel::Differ(_) = case.duel(number, 0).await {
                return (Some(true), "a duel".to_owned());
            }
        }
        (None, "no test told it from the other".to_owned())
    }
}
