//! Value combinations: which nominal values, joined how, come near enough to R*.

use crate::circuit::{Connection, mismatch};
use crate::quantity::Ohms;

/// One element's place in a combination.
#[derive(Clone, Copy, Debug, Default)]
pub struct Slot {
    /// Index of its value in the market's list.
    pub value: u32,
    /// Its share of a change in R.
    pub share: f64,
    /// Volts across it.
    pub volts: f64,
    /// Watts in it.
    pub watts: f64,
}

/// Nominal values joined to a network.
#[derive(Clone, Copy, Debug)]
pub struct Combo {
    /// How they are joined.
    pub connection: Connection,
    /// How many slots are used, 1 to 3.
    pub count: u8,
    /// abs(R*/R − 1) in ppm.
    pub mismatch: f64,
    slots: [Slot; 3],
}

impl Combo {
    /// Its elements, value indices ascending.
    #[must_use]
    pub fn slots(&self) -> &[Slot] {
        &self.slots[..self.count as usize]
    }

    /// Works out shares, volts and watts of values (ohms, ascending by index).
    #[must_use]
    pub fn new(connection: Connection, values: &[(u32, f64)], vref: f64, target_ohms: f64) -> Self {
        let parallel = connection == Connection::Parallel;
        let whole = if parallel {
            1.0 / values.iter().map(|&(_, ohms)| 1.0 / ohms).sum::<f64>()
        } else {
            values.iter().map(|&(_, ohms)| ohms).sum()
        };
        let mut slots = [Slot::default(); 3];
        for (slot, &(value, ohms)) in slots.iter_mut().zip(values) {
            let share = if parallel { whole / ohms } else { ohms / whole };
            let volts = if parallel { vref } else { vref * ohms / whole };
            *slot = Slot { value, share, volts, watts: volts * volts / ohms };
        }
        Self {
            connection,
            count: values.len() as u8,
            mismatch: mismatch(Ohms::new(target_ohms), Ohms::new(whole)).value(),
            slots,
        }
    }
}

/// The values that networks are made of.
pub struct ValueTable<'a> {
    /// All values in ohms, ascending.
    pub ohms: &'a [f64],
    /// Indices of values that some listed type has.
    pub listed: &'a [u32],
    /// Indices of values that only made-to-order types have.
    pub made_only: &'a [u32],
}

/// What the combinations must come to.
#[derive(Clone, Copy, Debug)]
pub struct Goal {
    /// Reference voltage.
    pub vref: f64,
    /// R* in ohms.
    pub target_ohms: f64,
    /// Largest mismatch in ppm.
    pub most_ppm: f64,
    /// Most elements.
    pub elements: u32,
}

impl ValueTable<'_> {
    /// Every combination within the goal, each once: any listed values, or one made-to-order
    /// value (repeated if need be) with listed ones, since a network holds one such value.
    #[must_use]
    pub fn within(&self, goal: Goal) -> Vec<Combo> {
        let mut found = Finder { table: self, goal, found: Vec::new() };
        for (connection, elements) in [
            (Connection::Single, 1..=1),
            (Connection::Series, 2..=goal.elements),
            (Connection::Parallel, 2..=goal.elements),
        ] {
            for count in elements {
                found.all_listed(connection, count as usize);
                for made in 1..=count as usize {
                    found.with_made(connection, count as usize - made, made);
                }
            }
        }
        found.found
    }
}

struct Finder<'t, 'a> {
    table: &'t ValueTable<'a>,
    goal: Goal,
    found: Vec<Combo>,
}

impl Finder<'_, '_> {
    fn ohms(&self, index: u32) -> f64 {
        self.table.ohms[index as usize]
    }

    /// The ends between which R must lie, a hair wider than rounding can matter.
    fn window(&self) -> (f64, f64) {
        let most = self.goal.most_ppm * 1e-6;
        let low = self.goal.target_ohms / (1.0 + most) * (1.0 - 1e-12);
        let high = if most < 1.0 {
            self.goal.target_ohms / (1.0 - most) * (1.0 + 1e-12)
        } else {
            f64::INFINITY
        };
        (low, high)
    }

    /// The ends between which one value, used `times` over, must lie beside the others.
    fn range(&self, connection: Connection, others: &[u32], times: usize) -> Option<(f64, f64)> {
        let (low, high) = self.window();
        let times = times as f64;
        let (low, high) = if connection == Connection::Parallel {
            let taken: f64 = others.iter().map(|&o| 1.0 / self.ohms(o)).sum();
            // The hair again, for the cancellation in the difference.
            let most = 1.0 / low - taken + taken * 1e-14;
            let least = 1.0 / high - taken - taken * 1e-14;
            if most <= 0.0 {
                return None;
            }
            (times / most, if least > 0.0 { times / least } else { f64::INFINITY })
        } else {
            let taken: f64 = others.iter().map(|&o| self.ohms(o)).sum();
            ((low - taken - taken * 1e-14) / times, (high - taken + taken * 1e-14) / times)
        };
        (high > 0.0).then_some((low * (1.0 - 1e-12), high * (1.0 + 1e-12)))
    }

    fn keep(&mut self, connection: Connection, mut chosen: Vec<u32>) {
        chosen.sort_unstable();
        let values: Vec<(u32, f64)> = chosen.iter().map(|&v| (v, self.ohms(v))).collect();
        let combo = Combo::new(connection, &values, self.goal.vref, self.goal.target_ohms);
        if combo.mismatch <= self.goal.most_ppm {
            self.found.push(combo);
        }
    }

    fn between(&self, among: &[u32], low: f64, high: f64) -> std::ops::Range<usize> {
        let start = among.partition_point(|&v| self.ohms(v) < low);
        let end = among.partition_point(|&v| self.ohms(v) <= high);
        start..end.max(start)
    }

    fn all_listed(&mut self, connection: Connection, count: usize) {
        let listed = self.table.listed;
        for (last_start, mut chosen) in ascending(listed, count - 1) {
            let Some((low, high)) = self.range(connection, &chosen, 1) else { continue };
            let range = self.between(listed, low, high);
            for &last in &listed[range.start.max(last_start)..range.end.max(last_start)] {
                chosen.push(last);
                self.keep(connection, chosen.clone());
                chosen.pop();
            }
        }
    }

    fn with_made(&mut self, connection: Connection, others: usize, times: usize) {
        let made = self.table.made_only;
        if made.is_empty() {
            return;
        }
        for (_, chosen) in ascending(self.table.listed, others) {
            let Some((low, high)) = self.range(connection, &chosen, times) else { continue };
            for &value in &made[self.between(made, low, high)] {
                let mut all = chosen.clone();
                all.extend(std::iter::repeat_n(value, times));
                self.keep(connection, all);
            }
        }
    }
}

/// Every ascending choice with repetition of `count` (0 to 2) members, with the position from
/// which a further member would go on.
fn ascending(among: &[u32], count: usize) -> Box<dyn Iterator<Item = (usize, Vec<u32>)> + '_> {
    match count {
        0 => Box::new(std::iter::once((0, Vec::new()))),
        1 => Box::new((0..among.len()).map(|i| (i, vec![among[i]]))),
        _ => Box::new(
            (0..among.len())
                .flat_map(move |i| (i..among.len()).map(move |j| (j, vec![among[i], among[j]]))),
        ),
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    /// Every combination by trying all.
    fn plainly(ohms: &[f64], made_from: usize, goal: Goal) -> Vec<(Connection, Vec<u32>)> {
        let mut all = Vec::new();
        let n = ohms.len() as u32;
        let mut try_one = |connection, values: Vec<u32>| {
            let made: std::collections::BTreeSet<_> =
                values.iter().filter(|&&v| v as usize >= made_from).collect();
            let each = values.iter().map(|&v| ohms[v as usize]);
            let whole: f64 = if connection == Connection::Parallel {
                1.0 / each.map(|r| 1.0 / r).sum::<f64>()
            } else {
                each.sum()
            };
            let mismatch = (goal.target_ohms / whole - 1.0).abs() * 1e6;
            if made.len() <= 1 && mismatch <= goal.most_ppm {
                all.push((connection, values));
            }
        };
        for a in 0..n {
            try_one(Connection::Single, vec![a]);
            for b in a..n {
                for connection in [Connection::Series, Connection::Parallel] {
                    try_one(connection, vec![a, b]);
                    for c in b..n {
                        try_one(connection, vec![a, b, c]);
                    }
                }
            }
        }
        all.sort();
        all
    }

    #[test]
    fn finds_what_trying_all_finds() {
        let ohms: Vec<f64> =
            [10.0, 12.0, 15.0, 18.0, 22.0, 27.0, 33.0, 39.0, 47.0, 56.0, 68.0, 82.0].to_vec();
        for made_from in [12, 9, 6, 0] {
            for (target_ohms, most_ppm) in
                [(33.0, 20_000.0), (66.0, 50_000.0), (9.1, 100_000.0), (40.0, 0.0), (30.0, 2e6)]
            {
                let goal = Goal { vref: 5.0, target_ohms, most_ppm, elements: 3 };
                let listed: Vec<u32> = (0..made_from as u32).collect();
                let made_only: Vec<u32> = (made_from as u32..12).collect();
                let table = ValueTable { ohms: &ohms, listed: &listed, made_only: &made_only };
                let mut found: Vec<_> = table
                    .within(goal)
                    .iter()
                    .map(|c| (c.connection, c.slots().iter().map(|s| s.value).collect::<Vec<_>>()))
                    .collect();
                found.sort();
                assert_eq!(found, plainly(&ohms, made_from, goal));
            }
        }
    }

    #[test]
    fn shares_and_powers_by_hand() {
        // 1 kΩ and 3 kΩ in series on 4 V carry 1 mA: 1 V and 3 V, 1 mW and 3 mW.
        let combo = Combo::new(Connection::Series, &[(0, 1e3), (1, 3e3)], 4.0, 4e3);
        let [one, three] = combo.slots() else { panic!("two slots") };
        assert!((one.share - 0.25).abs() < 1e-15 && (three.share - 0.75).abs() < 1e-15);
        assert!((one.volts - 1.0).abs() < 1e-12 && (three.watts - 3e-3).abs() < 1e-15);
        assert_eq!(combo.mismatch, 0.0);
        // In parallel they are 750 Ω; the smaller one carries three quarters.
        let combo = Combo::new(Connection::Parallel, &[(0, 1e3), (1, 3e3)], 4.0, 750.0);
        assert!((combo.slots()[0].share - 0.75).abs() < 1e-12);
        assert!((combo.slots()[1].watts - 16.0 / 3e3).abs() < 1e-12);
    }
}
