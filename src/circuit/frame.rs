//! A frame: one output with reference voltage, lift and adjustment chosen, and what follows from
//! these alone.

use crate::catalog::Adjustment;
use crate::quantity::Volts;
use crate::request::{Output, Request};

use super::design::LiftStack;
use super::limits::LimitId;

/// One output with its reference voltage, lift and adjustment chosen. Every term and limit is a
/// function of a frame and one part.
#[derive(Clone, Debug)]
pub struct Frame<'a> {
    pub(super) request: &'a Request,
    pub(super) output: &'a Output,
    pub(super) vref: Volts,
    pub(super) lift: Option<LiftStack<'a>>,
    pub(super) adjustment: Option<&'a Adjustment>,
}

impl<'a> Frame<'a> {
    /// Works out what follows from the choice of reference voltage, lift and adjustment.
    ///
    /// # Errors
    /// `LimitId::LiftCurrent` when the lift's curve does not reach the output's current.
    pub fn new(
        request: &'a Request,
        output: &'a Output,
        vref: Volts,
        lift: Option<LiftStack<'a>>,
        adjustment: Option<&'a Adjustment>,
    ) -> Result<Self, LimitId> {
        Ok(Self { request, output, vref, lift, adjustment })
    }
}
