//! What the orders of a pair on several instances come to: proved by a theorem it needs no instances;
//! else it holds as far as it was seen, and how often it was certified is told.

use record::study::{Order, OrderLevel, Relation, Report};

use crate::number::{count, of};

/// The order of each pair that was looked at on several instances and is no theorem.
#[must_use]
pub fn over_instances(studies: &[(String, Report)]) -> Vec<Report> {
    let mut pairs: Vec<Vec<(&String, &Order)>> = Vec::new();
    for (instance, report) in studies {
        let Report::Order(order) = report else { continue };
        let order = order.as_ref();
        let known = pairs.iter_mut().find(|pair| pair[0].1.rivals == order.rivals);
        match known {
            Some(pair) => pair.push((instance, order)),
            None => pairs.push(vec![(instance, order)]),
        }
    }
    let several = pairs.into_iter().filter(|pair| pair.len() > 1);
    several.filter_map(|pair| over(&pair)).map(|order| Report::Order(Box::new(order))).collect()
}

/// How often each relation was found.
#[derive(Debug, Default)]
struct Tally {
    stronger: u64,
    weaker: u64,
    same: u64,
    apart: u64,
    certified: u64,
}

impl Tally {
    fn of(pair: &[(&String, &Order)]) -> Self {
        let mut tally = Self::default();
        for (_, order) in pair {
            tally.certified += u64::from(order.level == OrderLevel::Certified);
            match order.relation {
                Relation::NeverWeaker => tally.stronger += 1,
                Relation::NeverStronger => tally.weaker += 1,
                Relation::Equal => tally.same += 1,
                Relation::Incomparable => tally.apart += 1,
                Relation::Undecided => {}
            }
        }
        tally
    }

    fn relation(&self) -> Relation {
        match (self.stronger, self.weaker, self.same) {
            _ if self.apart > 0 => Relation::Incomparable,
            (0, 0, 0) => Relation::Undecided,
            (0, 0, _) => Relation::Equal,
            (_, 0, _) => Relation::NeverWeaker,
            (0, _, _) => Relation::NeverStronger,
            _ => Relation::Incomparable,
        }
    }

    fn words(&self, [a, b]: &[String; 2], of_all: u64) -> String {
        let mut parts = Vec::new();
        let mut part = |times: u64, words: String| {
            if times > 0 {
                parts.push(format!("{words} on {}", count(times)));
            }
        };
        part(self.stronger, format!("{a} stronger"));
        part(self.weaker, format!("{b} stronger"));
        part(self.same, "the same".to_owned());
        part(self.apart, "neither within the other".to_owned());
        let certified = match self.certified {
            0 => String::new(),
            times => format!("; certified on {}", count(times)),
        };
        format!("{} of {}{certified}", parts.join(", "), of(of_all, "instance"))
    }
}

fn over(pair: &[(&String, &Order)]) -> Option<Order> {
    if pair.iter().any(|(_, order)| order.level == OrderLevel::Theorem) {
        return None;
    }
    let rivals = pair[0].1.rivals.clone();
    let tally = Tally::of(pair);
    let relation = tally.relation();
    let level = match relation {
        Relation::Undecided => OrderLevel::Undecided,
        _ => OrderLevel::Observed,
    };
    Some(Order {
        source: tally.words(&rivals, pair.len() as u64),
        rivals,
        relation,
        level,
        over: pair.iter().map(|(name, order)| ((*name).clone(), order.bounds)).collect(),
        ..Order::default()
    })
}

#[cfg(test)]
mod tests {
    use super::*;

    fn order(relation: Relation, level: OrderLevel) -> Report {
        let rivals = ["A".to_owned(), "B".to_owned()];
        let bounds = [Some(2.0), Some(1.0)];
        Report::Order(Box::new(Order { rivals, relation, level, bounds, ..Order::default() }))
    }

    fn come_to(orders: &[Report]) -> Option<(Relation, OrderLevel, String)> {
        let days = ["Monday", "Tuesday", "Wednesday"];
        let named = days.iter().zip(orders).map(|(day, order)| ((*day).to_owned(), order.clone()));
        match over_instances(&named.collect::<Vec<_>>()).pop() {
            Some(Report::Order(order)) => Some((order.relation, order.level, order.source)),
            _ => None,
        }
    }

    #[test]
    fn what_was_seen_on_three_days_is_observed_on_three_instances() {
        use OrderLevel::{Certified, Observed, Theorem};
        use Relation::{Equal, Incomparable, NeverStronger, NeverWeaker};
        let seen = order(NeverWeaker, Observed);
        let all = [seen.clone(), order(NeverWeaker, Certified), order(Equal, Observed)];
        let words = "A stronger on 2, the same on 1 of 3 instances; certified on 1";
        assert_eq!(come_to(&all), Some((NeverWeaker, Observed, words.to_owned())));
        // One day the other way round: neither is always as strong.
        let both = [seen.clone(), order(NeverStronger, Observed)];
        assert_eq!(come_to(&both).map(|found| found.0), Some(Incomparable));
        // A theorem holds on every instance, and one instance is told of by itself.
        assert_eq!(come_to(&[seen.clone(), order(NeverWeaker, Theorem)]), None);
        assert_eq!(come_to(&[seen]), None);
    }
}
