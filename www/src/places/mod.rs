//! The places of the page, one file each, and the frame around them.

mod cable_form;
mod chart_fields;
mod circuits;
mod electrode_form;
mod entries;
mod feed;
mod fields;
mod files;
mod findings;
mod frame;
mod glass;
mod layout;
mod leads;
mod measured;
mod outline_fields;
mod piece_fields;
mod price;
mod profile;
mod rows;
mod shape_fields;
mod shop_book;
mod sign;
mod wiring_fields;

pub use circuits::Circuits;
pub use findings::FindingsList;
pub use frame::Frame;
pub use glass::Glass;
pub use price::Price;
pub use rows::Rows;
pub(crate) use rows::{enter_last_row, usual_height, usual_tube};
pub use shop_book::ShopBook;
pub use sign::Sign;
