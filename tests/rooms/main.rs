//! The rooms of the core from outside, one module for each; what only a room's own code can see is
//! tested beside that code.
//!
//! Figures come from outside references (`tests/reference`, each folder with its provenance) or are
//! worked by hand in the comment above them.

mod book; // spreadsheets and files of the shop: what is read, what is refused, in which words
mod circuit; // operating points against ngspice and exact solutions; volts to earth
mod drawing; // strokes of the faces against published lengths; characters without a shape
mod job;
mod measure; // reading and showing figures; every sentence of a text that cannot be read
mod plan; // the splitter against known optima, brute force and random splits
mod rules; // the shipped rule sets at their limits, clause by clause
mod supply; // nameplates: what is missing or contradicts itself, and the site
mod tube; // the default model by hand; entries that are not whole // job files
mod workup; // the whole flow on arbitrary jobs and books, and on such as a shop has
