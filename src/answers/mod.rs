//! Questions put to the search, and their answers as plain data.

mod choice;

pub use choice::{
    Cause, Choice, ChosenDesign, ChosenElement, JointReason, OutputAnswer, Reasons, Relaxation,
    Removed, Status, Verdict,
};
