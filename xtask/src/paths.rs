//! Where things are in the repository.

use std::path::{Path, PathBuf};

/// The root of the repository.
pub fn root() -> PathBuf {
    let here = Path::new(env!("CARGO_MANIFEST_DIR"));
    here.parent().unwrap_or(here).to_owned()
}

/// The page crate.
pub fn www() -> PathBuf {
    root().join("www")
}

/// The built page.
pub fn dist() -> PathBuf {
    root().join("dist")
}

/// The demonstration book and jobs.
pub fn demo() -> PathBuf {
    root().join("catalog-demo")
}

#[cfg(test)]
mod tests {
    #[test]
    fn the_root_holds_the_workspace() {
        let manifest = std::fs::read_to_string(super::root().join("Cargo.toml")).unwrap();
        assert!(manifest.contains("[workspace]"));
    }
}
