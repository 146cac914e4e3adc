//! The commands of the house, run as `cargo xtask COMMAND`; one file each.
//!
//! A library besides the program so that the browser journeys can serve the page with the very
//! server a person uses.

pub mod bench;
pub mod build;
pub mod chromium;
pub mod files;
pub mod paths;
mod programs;
pub mod report;
pub mod run;
pub mod serve;
pub mod test;

#[cfg(test)]
mod scratch;

/// How a command ends: well, or with a sentence saying what, where, and what would be right.
pub type Outcome = Result<(), String>;
