//! The demo: an invented shop book and invented jobs, inside the page so that it needs no network.

use tubewright::{Book, Job, book, job};

use crate::document::Document;

const BOOK: &str = include_str!("../../../catalog-demo/book.json");
const JOBS: [&str; 3] = [
    include_str!("../../../catalog-demo/window-word.json"),
    include_str!("../../../catalog-demo/shop-front.json"),
    include_str!("../../../catalog-demo/long-script.json"),
];
/// The job the page opens on.
const FIRST: usize = 1;

/// The invented shop book. The files are read in a test; here a bad one would give an empty book.
pub fn book() -> Book {
    book::read(BOOK).unwrap_or_default()
}

/// The invented jobs.
pub fn jobs() -> Vec<Job> {
    JOBS.iter()
        .filter_map(|text| job::read(text).ok())
        .collect()
}

/// What the page opens on when nothing was kept.
pub fn document() -> Document {
    Document::new(jobs().into_iter().nth(FIRST).unwrap_or_default(), book())
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn every_demo_file_is_read() {
        assert_eq!(jobs().len(), JOBS.len(), "all jobs");
        assert!(book().supplies.len() >= 20, "supplies to choose from");
        assert!(
            book().name.contains("invented"),
            "and it says it is invented"
        );
        for job in jobs() {
            assert!(
                job.note.to_lowercase().contains("invented"),
                "{} says so too",
                job.name
            );
        }
    }
}
