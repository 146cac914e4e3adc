//! `cargo run --release --no-default-features --bin long -- KIND SECONDS [FIRST]`: damaged copies of
//! the corpus, one after the other, from case FIRST on. Says how many there were, or which one broke
//! a promise.

use std::panic::{AssertUnwindSafe, catch_unwind};
use std::path::Path;
use std::time::{Duration, Instant};

use tubewright_fuzz::{mutate, targets};

/// A case that takes longer is told: nothing of this size should.
const SLOW: Duration = Duration::from_secs(2);

fn main() -> Result<(), String> {
    let arguments: Vec<String> = std::env::args().skip(1).collect();
    let [kind, seconds, rest @ ..] = &arguments[..] else {
        return Err("Expected KIND SECONDS [FIRST].".to_owned());
    };
    let seconds = seconds.parse().map_err(|_| "SECONDS is no number.")?;
    let first: u64 = rest.first().map_or(Ok(0), |first| {
        first.parse().map_err(|_| "FIRST is no number.")
    })?;
    let (_, target) = targets::TARGETS
        .into_iter()
        .find(|(name, _)| name == kind)
        .ok_or("KIND is svg, dxf, font or length.")?;
    let seeds = seeds(kind)?;
    let began = Instant::now();
    let (mut number, mut slowest, mut broken) = (first, Duration::ZERO, 0);
    while began.elapsed() < Duration::from_secs(seconds) {
        let bytes = mutate::case(kind, &seeds, number);
        let case = Instant::now();
        let kept = || {
            let file = format!("{kind}-{number}");
            std::fs::write(&file, &bytes).map_err(|why| format!("{file}: {why}"))?;
            Ok::<_, String>(file)
        };
        if catch_unwind(AssertUnwindSafe(|| target(&bytes))).is_err() {
            broken += 1;
            println!("Case {number} broke; it is in {}.", kept()?);
        }
        let took = case.elapsed();
        if took > SLOW {
            println!(
                "Case {number} took {:.1} s; it is in {}.",
                took.as_secs_f64(),
                kept()?
            );
        }
        slowest = slowest.max(took);
        number += 1;
    }
    println!(
        "{kind}: {} cases from {} seeds in {:.0} s, {broken} broken, the slowest took {:.3} s.",
        number - first,
        seeds.len(),
        began.elapsed().as_secs_f64(),
        slowest.as_secs_f64()
    );
    if broken > 0 {
        return Err(format!("{broken} cases broke."));
    }
    Ok(())
}

/// The files of the corpus and the reference files of a kind, in the order of their names.
fn seeds(kind: &str) -> Result<Vec<Vec<u8>>, String> {
    let root = Path::new(env!("CARGO_MANIFEST_DIR")).join("..");
    let mut paths = Vec::new();
    for folder in mutate::folders(kind) {
        let folder = root.join(folder);
        let files =
            std::fs::read_dir(&folder).map_err(|why| format!("{}: {why}", folder.display()))?;
        paths.extend(files.flatten().map(|file| file.path()));
    }
    paths.retain(|path| mutate::is_seed(kind, &path.to_string_lossy()));
    paths.sort();
    let mut all = Vec::new();
    for path in paths {
        let bytes = std::fs::read(&path).map_err(|why| format!("{}: {why}", path.display()))?;
        all.extend(mutate::seeds_in(kind, bytes));
    }
    Ok(all)
}
