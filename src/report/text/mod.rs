//! Text for people: the answer first, then what stands behind it.

mod budget;
mod check;
mod design;
mod family;
mod faults;
mod figures;
mod grid;
mod headline;
mod infeasible;
mod limits;
mod notes;
mod page;
mod purchase;
mod single;

pub use check::check;
pub use faults::faults;

use super::Screen;
use crate::answers::Choice;
use page::Page;

/// The answer to `choose`.
///
/// One output is shown in full. Of a family, a table shows all outputs, and each of them is then
/// shown in short; the JSON and CSV have everything.
#[must_use]
pub fn choice(choice: &Choice, screen: Screen) -> String {
    let mut page = Page::new(screen);
    headline::write(&mut page, choice);
    match choice.outputs.as_slice() {
        [only] => single::write(&mut page, only),
        outputs => family::write(&mut page, outputs),
    }
    infeasible::write_joint(&mut page, &choice.joint_reasons);
    if let Some(bill) = &choice.purchase {
        purchase::write(&mut page, choice, bill);
    }
    headline::write_proof(&mut page, choice);
    notes::write(&mut page, choice);
    page.finish()
}

/// A term's or limit's name as words.
fn words(name: &str) -> String {
    name.replace('_', " ")
}
