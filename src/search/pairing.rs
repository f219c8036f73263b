//! Which reference suits which amplifier: the limits that look at both (sink current, bypass
//! capacitor, quiescent sum) do not depend on the output.

use rayon::prelude::*;

use crate::circuit::Frame;
use crate::request::Unstated;

use super::market::Market;

/// References of one class suit the same amplifiers.
#[derive(Debug, Default)]
pub struct Pairing {
    /// Class of each reference.
    class: Vec<u32>,
    /// For each class, a flag an amplifier.
    suits: Vec<Vec<bool>>,
    /// `covers[a][b]`: class a suits every amplifier that class b suits.
    covers: Vec<Vec<bool>>,
    /// Class of each amplifier: those that suit the same references.
    amplifier_class: Vec<u32>,
    amplifier_covers: Vec<Vec<bool>>,
    /// Whether everything suits everything.
    pub all: bool,
}

impl Pairing {
    /// Judges every pair of a market, in any frame of its request.
    #[must_use]
    pub fn new(market: &Market<'_>, frame: &Frame<'_>) -> Self {
        let refuse = market.request.rules.unstated == Unstated::Reject;
        let suit = |r: &crate::catalog::Reference, a: &crate::catalog::Amplifier| {
            frame.pair_failures(r, a).is_empty() && !(refuse && frame.pair_unstated(r, a))
        };
        let all =
            market.references.par_iter().all(|r| market.amplifiers.iter().all(|a| suit(r, a)));
        if all {
            return Self { all, ..Self::default() };
        }
        let rows: Vec<Vec<bool>> = market
            .references
            .par_iter()
            .map(|r| market.amplifiers.iter().map(|a| suit(r, a)).collect())
            .collect();
        let columns: Vec<Vec<bool>> =
            (0..market.amplifiers.len()).map(|a| rows.iter().map(|row| row[a]).collect()).collect();
        let (class, suits) = classes(rows);
        let (amplifier_class, columns) = classes(columns);
        Self {
            covers: covers(&suits),
            amplifier_covers: covers(&columns),
            class,
            suits,
            amplifier_class,
            all,
        }
    }

    /// Whether a reference suits an amplifier.
    #[must_use]
    pub fn suit(&self, reference: u32, amplifier: u32) -> bool {
        self.all || self.suits[self.class[reference as usize] as usize][amplifier as usize]
    }

    /// Whether reference `a` suits every amplifier that `b` suits.
    #[must_use]
    pub fn reference_covers(&self, a: u32, b: u32) -> bool {
        self.all || self.covers[self.class[a as usize] as usize][self.class[b as usize] as usize]
    }

    /// Whether amplifier `a` suits every reference that `b` suits.
    #[must_use]
    pub fn amplifier_covers(&self, a: u32, b: u32) -> bool {
        let class = |amplifier: u32| self.amplifier_class[amplifier as usize] as usize;
        self.all || self.amplifier_covers[class(a)][class(b)]
    }
}

/// Groups equal rows; gives each row's class and the distinct rows.
fn classes(rows: Vec<Vec<bool>>) -> (Vec<u32>, Vec<Vec<bool>>) {
    let mut index = std::collections::HashMap::new();
    let mut distinct: Vec<Vec<bool>> = Vec::new();
    let class = rows
        .into_iter()
        .map(|row| {
            *index.entry(row).or_insert_with_key(|row| {
                distinct.push(row.clone());
                distinct.len() as u32 - 1
            })
        })
        .collect();
    (class, distinct)
}

fn covers(rows: &[Vec<bool>]) -> Vec<Vec<bool>> {
    rows.iter()
        .map(|a| rows.iter().map(|b| b.iter().zip(a).all(|(&in_b, &in_a)| in_a || !in_b)).collect())
        .collect()
}
