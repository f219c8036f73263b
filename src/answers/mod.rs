//! Questions put to the search, and their answers as plain data.

mod choice;
mod choose;
mod design;
mod reasons;

pub use choice::{
    Cause, Choice, ChosenDesign, ChosenElement, JointReason, OutputAnswer, Reasons, Relaxation,
    Removed, Status, Verdict,
};
pub use choose::{ChooseError, Options, Progress, choose};
