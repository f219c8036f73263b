//! A plain exhaustive search, written from the rules alone. It shares nothing with the program but
//! the types of a catalogue and a request.

pub mod answer;
pub mod ask;
pub mod compare;
mod corners;
pub mod designs;
pub mod dice;
pub mod family;
pub mod generate;
mod handworked;
mod made;
pub mod money;
pub mod physics;
mod rules;
mod terms;
mod window;
