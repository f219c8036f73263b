//! Chooses the cheapest parts for precision DC current sources that meet a target accuracy.
//!
//! The rooms, from the ground up: [`quantity`] (units, money, preferred values), [`catalog`] (part
//! records), [`request`] (what is asked), [`circuit`] (operating window and error budget),
//! [`search`] (which designs pass, and which is cheapest under given part costs), [`purchase`]
//! (exact cost, bound, integer program), [`answers`] (questions put to the search), [`report`]
//! (text, JSON, CSV) and [`cli`]. Imports run one way, towards the ground.

pub mod answers;
pub mod catalog;
pub mod circuit;
pub mod cli;
pub mod purchase;
pub mod quantity;
pub mod report;
pub mod request;
pub mod search;
