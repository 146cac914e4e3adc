//! Folders for tests, gone when the test ends.

use std::path::{Path, PathBuf};
use std::sync::atomic::{AtomicUsize, Ordering};

/// A folder of its own.
pub(crate) struct Scratch(PathBuf);

impl Scratch {
    /// A new folder with some files in it.
    pub(crate) fn with(files: &[(&str, &str)]) -> Self {
        static MADE: AtomicUsize = AtomicUsize::new(0);
        let name = format!(
            "tubewright-{}-{}",
            std::process::id(),
            MADE.fetch_add(1, Ordering::Relaxed)
        );
        let scratch = Self(std::env::temp_dir().join(name));
        std::fs::create_dir_all(&scratch.0).unwrap();
        for (name, content) in files {
            let file = scratch.0.join(name);
            std::fs::create_dir_all(file.parent().unwrap()).unwrap();
            std::fs::write(file, content).unwrap();
        }
        scratch
    }

    /// Where it is.
    pub(crate) fn path(&self) -> &Path {
        &self.0
    }
}

impl Drop for Scratch {
    fn drop(&mut self) {
        // What cannot be removed is left to the system's own tidying.
        let _left = std::fs::remove_dir_all(&self.0);
    }
}
