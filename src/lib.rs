//! # Tubewright, the core
//!
//! From letters and strokes to glass, circuits and supplies of luminous-tube (neon, cold-cathode)
//! signs. One flow: a [`Job`] (this sign) and a [`Book`] (the shop) go into [`workup()`], and a
//! [`Workup`] with every figure and every [`Finding`] comes out.
//!
//! The rooms, in the order of the flow, and what each never does:
//!
//! | room | what it gives | never |
//! |---|---|---|
//! | [`measure`] | lengths, volts, milliamperes: reading what was typed, showing it | knows of signs |
//! | [`job`], [`book`] | the two documents, the only serialisable types | works anything out |
//! | [`rules`] | rule sets and findings | decides what a finding leads to |
//! | [`drawing`] | letter faces, outline fonts and artwork files as strokes | knows of glass or volts |
//! | [`tube`] | volts a column of gas needs | knows of supplies |
//! | [`supply`] | ratings, checked; what a rule set says of them | invents a missing rating |
//! | [`takeoff`] | rows to strokes to pieces of glass | knows of volts |
//! | [`circuit`] | a string of pieces on a supply: operating point, window, volts to earth | chooses a supply |
//! | [`plan`] | splits the pieces into circuits and chooses supplies, with the reasons | measures glass |
//! | [`feed`] | what supplies draw from the mains, branch circuits, volt drop, a year's energy | counts watts as volt-amperes |
//! | [`wiring`] | leads and jumpers: lengths, what they leak, the limits on them | guesses a length or a cable |
//! | [`quote`] | a first sum of glass, electrodes, supplies and labour | touches a figure of the others |
//! | [`workup()`] | the one function, a table of contents of the above | reads a clock, a file or a browser |
//!
//! The core is pure: no clock, no files, no randomness, no browser. Bad input gives findings, not
//! panics.

pub mod measure;

pub mod book;
pub mod job;

pub mod rules;

pub mod drawing;
pub mod supply;
pub mod tube;

pub mod circuit;
pub mod takeoff;

pub mod plan;
pub mod quote;

pub mod feed;
pub mod wiring;

pub mod workup;

pub use book::Book;
pub use job::Job;
pub use rules::{Finding, Grade, Place};
pub use workup::{Workup, workup};
