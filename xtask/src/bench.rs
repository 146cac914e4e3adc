//! `cargo xtask bench`: how long the core takes, and how much the page weighs.

use crate::{Outcome, files, paths, run};

/// The command.
///
/// # Errors
/// When the benches do not run, or the built page cannot be read.
pub fn bench() -> Outcome {
    println!("Timing the core.");
    run::run(run::cargo().args(["bench", "--package", "tubewright"]))?;
    let dist = paths::dist();
    if dist.is_dir() {
        println!("The built page weighs:");
        println!("{}", files::sizes(&dist)?);
    } else {
        println!("The page is not built, so its size is not known; `cargo xtask build` builds it.");
    }
    Ok(())
}
