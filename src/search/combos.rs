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

/// What a combination must come to.
#[derive(Clone, Copy, Debug)]
pub struct Goal {
    /// Reference voltage.
    pub vref: f64,
    /// R* in ohms.
    pub target_ohms: f64,
    /// Largest mismatch in ppm; below zero when nothing fits.
    pub most_ppm: f64,
}

impl Goal {
    /// The ends between which R must lie, a hair wider than rounding can matter.
    fn window(&self) -> (f64, f64) {
        let most = self.most_ppm * 1e-6;
        let low = self.target_ohms / (1.0 + most) * (1.0 - 1e-12);
        let high = if most < 1.0 {
            self.target_ohms / (1.0 - most) * (1.0 + 1e-12)
        } else {
            f64::INFINITY
        };
        (low, high)
    }

    /// The largest R of interest, in ohms.
    #[must_use]
    pub fn most_ohms(&self) -> f64 {
        self.window().1
    }

    /// The ends between which one value, used `times` over, must lie beside the others, whose
    /// resistances (or conductances, in parallel) come to `taken`.
    #[must_use]
    pub fn range(&self, connection: Connection, taken: f64, times: u32) -> Option<(f64, f64)> {
        let (low, high) = self.window();
        let times = f64::from(times);
        // The hair again, for the cancellation in the differences.
        let hair = taken * 1e-14;
        let (low, high) = if connection == Connection::Parallel {
            let most = 1.0 / low - taken + hair;
            let least = 1.0 / high - taken - hair;
            if most <= 0.0 {
                return None;
            }
            (times / most, if least > 0.0 { times / least } else { f64::INFINITY })
        } else {
            ((low - taken - hair) / times, (high - taken + hair) / times)
        };
        (high > 0.0).then_some((low * (1.0 - 1e-12), high * (1.0 + 1e-12)))
    }
}

#[cfg(test)]
mod tests {
    use super::*;

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
