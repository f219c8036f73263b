//! What a term or limit function answers: a figure, the name of the field that it lacks, or that
//! it does not apply.

use crate::quantity::Ppm;

/// The answer of a term or limit function.
#[derive(Clone, Copy, Debug, PartialEq)]
pub enum Figure<T> {
    /// Worked out.
    Known(T),
    /// Needed, but the record does not state this field.
    NotStated(&'static str),
    /// Does not apply, or would be zero whatever the record stated.
    Absent,
}

/// The size of a term, with a remark that is put into words only when it is shown.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct Size {
    /// In ppm of the output current.
    pub ppm: Ppm,
    /// How it was found, where that is not plain from the formula.
    pub note: Option<Note>,
}

/// A remark on how a term was found.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Note {
    /// No test point is stated: counted from the middle of what the text names.
    FromMiddle {
        /// The field that is not stated.
        field: &'static str,
        /// What the middle is of.
        of: &'static str,
    },
    /// Counted from the middle between the rails, for want of any test point in a record.
    FromMiddleOfRails,
    /// A calibrated condition is not stated and taken as the middle.
    CalibratedAtMiddle {
        /// `calibrated_supply` is not stated.
        supply: bool,
        /// `calibrated_load` is not stated.
        load: bool,
    },
    /// A box tempco read as a slope.
    BoxAsSlope,
    /// A box tempco read as what the box guarantees.
    BoxGuaranteed,
    /// A box tempco that does not cover the ambient, read as a slope.
    BoxTooNarrow,
    /// A driven ring takes the leak.
    Guarded,
}

impl Note {
    /// The remark as one short sentence without a full stop.
    #[must_use]
    pub fn text(self) -> String {
        match self {
            Self::FromMiddle { field, of } => {
                format!("{field} is not stated: counted from the middle of {of}")
            }
            Self::FromMiddleOfRails => "counted from the middle between the rails".to_owned(),
            Self::CalibratedAtMiddle { supply, load } => {
                let what = match (supply, load) {
                    (true, true) => "calibrated_supply and calibrated_load are",
                    (true, false) => "calibrated_supply is",
                    (false, _) => "calibrated_load is",
                };
                format!("{what} not stated: adjusted at the middle of the range")
            }
            Self::BoxAsSlope => "box method, read as a slope".to_owned(),
            Self::BoxGuaranteed => {
                "box method, read as what the box guarantees: tempco over its whole span".to_owned()
            }
            Self::BoxTooNarrow => {
                "box method, read as a slope: tempco_over does not cover the ambient".to_owned()
            }
            Self::Guarded => "the guard ring takes this leak".to_owned(),
        }
    }
}

impl Figure<Size> {
    /// A known size without a remark.
    #[must_use]
    pub const fn known(ppm: Ppm) -> Self {
        Self::Known(Size { ppm, note: None })
    }

    /// The same figure with a remark, where it is known.
    #[must_use]
    pub fn noted(self, note: Option<Note>) -> Self {
        match self {
            Self::Known(size) => Self::Known(Size { note, ..size }),
            other => other,
        }
    }
}

/// A figure that a record may lack: worked out where stated, wanted unless `zero_anyway`.
pub(super) fn stated<Q>(
    figure: Option<Q>,
    field: &'static str,
    zero_anyway: bool,
    size: impl FnOnce(Q) -> Ppm,
) -> Figure<Size> {
    match figure {
        Some(figure) => Figure::known(size(figure)),
        None if zero_anyway => Figure::Absent,
        None => Figure::NotStated(field),
    }
}
