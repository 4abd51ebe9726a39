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

impl Case<'_> {
    /// Breaks both rivals, family by family.
    pub(crate) async fn mutants(&self, findings: &Findings) -> Vec<Mutant> {
        let parts = match findings.control {
            Some(size) => self.first(size).await,
            None => None,
        };
        let mut out = Vec::new();
        for side in [0, 1] {
            let families = self.rivals[side].model.families();
            for (place, family) in families.iter().enumerate() {
                if family.state == FamilyState::Out {
                    continue;
                }
                let letter = &self.rivals[side].letter;
                self.say(&format!("{letter} without {}", family.name));
                let (caught, by) = self.mutant(side, FamilyId::from_index(place), &parts).await;
                let (rival, without) = (letter.clone(), family.name.clone());
                out.push(Mutant { rival, without, caught, by });
            }
        }
        out
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
