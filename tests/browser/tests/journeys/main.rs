//! Journeys through the built page, one file for each thing a person comes for.

mod artwork;
mod bad_files;
mod care;
mod circuits;
mod demo;
mod fonts;
mod layout;
mod looks;
mod offline;
mod picture;
mod pieces;
mod shop_book;
mod sign;
mod wiring;
