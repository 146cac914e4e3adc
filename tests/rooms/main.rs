//! The rooms of the core from outside, one module for each; what only a room's own code can see is
//! tested beside that code.
//!
//! Figures come from outside references (`tests/reference`, each folder with its provenance) or are
//! worked by hand in the comment above them.

/// Reading and showing figures; every sentence of a text that cannot be read.
mod measure;

/// Spreadsheets and files of the shop: what is read, what is refused, in which words.
mod book;

/// Job files.
mod job;

/// The shipped rule sets at their limits, clause by clause.
mod rules;

/// Strokes of the faces against published lengths; characters without a shape.
mod drawing;

/// SVG files: exact lengths, what is left unread, what is refused.
mod svg;

/// Drawings of general programs: lengths, layers, what is not read, and the glass made of them.
mod drawn;

/// DXF drawings: lengths and places against another library, what is named as not read, refusals.
mod dxf;

/// Outlines of a font and their insets against independent tools and closed forms; damaged fonts.
mod outline;

/// Rows of letters from a font file, and insets of filled artwork, as glass.
mod fonts;

/// Thousands of damaged files and typed lengths: no panic, no hang, bounded output.
mod damaged;

/// Nameplates: what is missing or contradicts itself, and the site.
mod supply;

/// The default model by hand; entries that are not whole.
mod tube;

/// Bench readings: fits against certified and independent figures; every refusal.
mod measured;

/// Rows to pieces of glass, by hand from the shapes of the letters.
mod takeoff;

/// What holds of the glass of any artwork: turned, mirrored, reversed, reordered, scaled, summed.
mod glass;

/// Plain shapes against closed forms; what of them is refused, in which words.
mod shapes;

/// Pieces of glass as a person chooses them, and the shop's limits on them.
mod pieces;

/// Operating points against ngspice and exact solutions; volts to earth.
mod circuit;

/// Faults to earth: what the mid-point carries, what goes unseen, what is said of each output.
mod protection;

/// Leads and jumpers against outside figures, and by hand.
mod wiring;

/// What feeds the supplies, by hand.
mod feed;

/// What is easily got wrong in the codes, clause by clause.
mod traps;

/// The splitter against known optima, brute force and random splits.
mod plan;

/// The first sum, worked by hand.
mod quote;

/// The whole flow on arbitrary jobs and books, and on such as a shop has.
mod workup;
