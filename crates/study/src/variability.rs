//! How much a search varies when nothing but the order of rows and columns changes, and a bound
//! with the root of a round trip.
//!
//! Ties are broken by number, so a model in another order is searched otherwise, though it is the
//! same model (performance variability: Danna 2008; Lodi, Tramontani 2013). Orders are paired: the
//! same names stand in the same order in every rival. A rival that is ahead must be so by more
//! than either varies alone. Which element is the root changes the bound of some formulations and
//! not of others: each is tried.

use std::rc::Rc;

use instance::Datum;
use record::study::{RivalVariability, Run, Variability, VariabilityPair};

use crate::desk::{Desk, Solved};
use crate::plan::Plan;
use crate::statistics::{count, interval, resampled, shifted_geometric_mean};
use crate::subject::{Ground, Source, Subject};

/// The shift of the geometric mean.
const SHIFT: f64 = 1_000.0;
/// Work within a tenth of each other is a tie.
const TIE: f64 = 0.9;
/// Families of round trips, which are the same whichever stop they begin at.
const TRIPS: [&str; 2] = ["atsp", "tsp"];
/// Roots that are tried at most.
const MOST_ROOTS: usize = 60;

/// Searches each rival on each instance in several orders, and bounds it with each root of the first.
pub async fn variability(desk: Rc<Desk>, grounds: Vec<Ground>, plan: Plan) -> Variability {
    let mut out = Variability { nodes: plan.nodes, orders: plan.orders, ..Variability::default() };
    out.instances = u32::try_from(grounds.len()).unwrap_or(u32::MAX);
    let first = grounds.first().map_or(&[][..], |ground| &ground.subjects);
    if let Some((name, used)) = first.iter().find_map(root) {
        (out.root, out.root_used) = (name, used);
        let stops = first.iter().filter_map(|subject| subject.source.as_ref());
        let stops = stops.map(|source| source.instance.stops().len()).max();
        out.elements = stops.and_then(|stops| u32::try_from(stops).ok()).unwrap_or(u32::MAX);
    }
    for (place, ground) in grounds.iter().enumerate() {
        for subject in &ground.subjects {
            let mut rival = of_rival(&desk, subject, &plan).await;
            rival.instance.clone_from(&ground.title);
            if place == 0 {
                rival.roots = roots(&desk, subject).await;
            }
            out.rivals.push(rival);
        }
    }
    out.pairs = pairs(&out.rivals, plan.seed);
    out
}

/// One rival on one instance in every order.
async fn of_rival(desk: &Desk, subject: &Subject, plan: &Plan) -> RivalVariability {
    let mut rival = RivalVariability {
        rival: subject.letter.clone(),
        title: subject.title.clone(),
        ..RivalVariability::default()
    };
    desk.say(format!("{}: as it is written", rival.rival));
    let most = plan.work.unwrap_or(u64::MAX);
    rival.written = run(&desk.solve_within(&subject.model, plan.search(), most).await);
    for order in 1..=plan.orders {
        desk.say(format!("{}: order {order} of {}", rival.rival, plan.orders));
        let seed = plan.seed.wrapping_mul(1_000_003).wrapping_add(u64::from(order));
        let (model, _) = subject.model.reordered(|name| key(seed, name));
        let solved = desk.solve_within(&Rc::new(model), plan.search(), most).await;
        rival.runs.push(run(&solved));
    }
    rival.work = spread(&rival);
    rival
}

/// FNV-1a (Fowler, Noll, Vo 1991) over the seed and the name, with a last mixing of bits.
fn key(seed: u64, name: &str) -> u64 {
    let bytes = seed.to_le_bytes().into_iter().chain(name.bytes());
    let hash = bytes.fold(0xcbf2_9ce4_8422_2325_u64, |hash, byte| {
        (hash ^ u64::from(byte)).wrapping_mul(0x0000_0100_0000_01b3)
    });
    let hash = (hash ^ (hash >> 33)).wrapping_mul(0xff51_afd7_ed55_8ccd);
    hash ^ (hash >> 33)
}

fn run(solved: &Solved) -> Run {
    Run {
        nodes: solved.nodes,
        work: solved.work,
        solved: solved.is_settled(),
        incumbent: solved.incumbent,
    }
}

fn work(run: &Run) -> f64 {
    // Exact up to 2⁵³; more is not reached within the limits.
    #[allow(clippy::cast_precision_loss, reason = "counts of work are far below 2^53")]
    let work = run.work as f64;
    work
}

fn all(rival: &RivalVariability) -> impl Iterator<Item = &Run> {
    std::iter::once(&rival.written).chain(&rival.runs)
}

/// The least, the mean and the most work.
fn spread(rival: &RivalVariability) -> (f64, f64, f64) {
    let mut works: Vec<f64> = all(rival).map(work).collect();
    works.sort_by(f64::total_cmp);
    let mean = shifted_geometric_mean(&works, SHIFT);
    (works.first().copied().unwrap_or(0.0), mean, works.last().copied().unwrap_or(0.0))
}

fn pairs(rivals: &[RivalVariability], seed: u64) -> Vec<VariabilityPair> {
    let mut letters: Vec<&String> = Vec::new();
    for rival in rivals {
        if !letters.contains(&&rival.rival) {
            letters.push(&rival.rival);
        }
    }
    let mut out = Vec::new();
    for (place, a) in letters.iter().enumerate() {
        for b in &letters[place + 1..] {
            out.extend(pair([a, b], rivals, seed));
        }
    }
    out
}

/// Two rivals on every instance that both are a model on; `None` where there is none.
fn pair([a, b]: [&String; 2], rivals: &[RivalVariability], seed: u64) -> Option<VariabilityPair> {
    let shifted = |run: &Run| libm::log(work(run) + SHIFT);
    let of = |letter: &String| -> Vec<&RivalVariability> {
        rivals.iter().filter(|rival| rival.rival == *letter).collect()
    };
    let others = of(b);
    let both: Vec<(&RivalVariability, &RivalVariability)> = of(a)
        .into_iter()
        .filter_map(|a| Some((a, *others.iter().find(|b| b.instance == a.instance)?)))
        .collect();
    let ratios = |(a, b): &(&RivalVariability, &RivalVariability)| -> Vec<f64> {
        all(a).zip(all(b)).map(|(a, b)| shifted(b) - shifted(a)).collect()
    };
    let by_instance: Vec<Vec<f64>> = both.iter().map(ratios).collect();
    let logs: Vec<f64> = by_instance.iter().flatten().copied().collect();
    let least = libm::log(TIE);
    let number = |of: &dyn Fn(f64) -> bool| {
        u32::try_from(logs.iter().filter(|log| of(**log)).count()).unwrap_or(u32::MAX)
    };
    let mean = |logs: &[&f64]| {
        (!logs.is_empty()).then(|| libm::exp(logs.iter().copied().sum::<f64>() / count(logs.len())))
    };
    let ratio = mean(&logs.iter().collect::<Vec<_>>()).unwrap_or(1.0);
    // Orders of one instance are not independent: of several, instances are drawn.
    let groups: Vec<Vec<f64>> = if by_instance.len() > 1 {
        by_instance
    } else {
        logs.iter().map(|&log| vec![log]).collect()
    };
    // Each alone: how far its slowest run is from its quickest.
    let own = |rival: &RivalVariability| (rival.work.2 + SHIFT) / (rival.work.0 + SHIFT);
    let alone = both.iter().flat_map(|(a, b)| [own(a), own(b)]);
    let noise = alone.fold(1.0, |most, own| if own > most { own } else { most });
    let away = if ratio > 1.0 { ratio } else { 1.0 / ratio };
    (!both.is_empty()).then(|| VariabilityPair {
        rivals: [a.clone(), b.clone()],
        wins: number(&|log| log > -least),
        ties: number(&|log| log.abs() <= -least),
        losses: number(&|log| log < least),
        ratio,
        interval: interval(resampled(&groups, seed, mean)).unwrap_or((ratio, ratio)),
        beyond_noise: away > noise,
    })
}

/// The one stop that the instance names, with the name of the datum: the root of a round trip. Only
/// where it is a matter of habit: supplied by the reader, or the depot of a shipped round trip.
pub(crate) fn root(subject: &Subject) -> Option<(String, String)> {
    let instance = &subject.source.as_ref()?.instance;
    let mut elements = instance.data().filter_map(|(name, datum)| match datum {
        Datum::Element(used) => Some((name, used)),
        _ => None,
    });
    let (name, used) = elements.next().filter(|_| elements.next().is_none())?;
    let trip = subject.entry.as_ref().is_some_and(|entry| TRIPS.contains(&entry.family.as_str()));
    let free = instance.assumed.contains(name) || trip;
    (free && instance.stops().contains(used)).then(|| (name.to_owned(), used.clone()))
}

/// The bound of the relaxation with each element as the root, the one that is used first.
async fn roots(desk: &Desk, subject: &Subject) -> Vec<(String, Option<f64>)> {
    let (Some((name, used)), Some(source)) = (root(subject), &subject.source) else {
        return Vec::new();
    };
    let mut out = Vec::new();
    let others = source.instance.stops().iter().filter(|stop| **stop != used);
    for element in std::iter::once(&used).chain(others.take(MOST_ROOTS - 1)) {
        desk.say(format!("{}: with {element} as the root", subject.letter));
        let Some(model) = with_root(desk, source, &name, element).await else { continue };
        out.push((element.clone(), desk.relax(&Rc::new(model)).await.bound));
    }
    out
}

async fn with_root(
    desk: &Desk,
    source: &Source,
    name: &str,
    element: &str,
) -> Option<model::Model> {
    let mut instance = (*source.instance).clone();
    instance.set(name, Datum::Element(element.to_owned()));
    source.model_on(desk, &instance, &source.bind).await
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn one_order_has_one_key_and_another_order_another() {
        assert_eq!(key(1, "x[Ash → Birch]"), key(1, "x[Ash → Birch]"));
        assert_ne!(key(1, "x[Ash → Birch]"), key(2, "x[Ash → Birch]"));
        assert_ne!(key(1, "x[a]") > key(1, "x[b]"), key(9, "x[a]") > key(9, "x[b]"));
    }
}
