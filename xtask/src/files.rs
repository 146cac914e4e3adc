//! The files of a folder: which, how large, and what they hash to.

use std::io::Write;
use std::path::Path;

use flate2::Compression;
use flate2::write::GzEncoder;
use sha2::{Digest, Sha256};

use crate::Outcome;

/// Reads a file, or says which could not be read.
pub fn read(file: &Path) -> Result<Vec<u8>, String> {
    std::fs::read(file).map_err(|error| format!("Cannot read {}: {error}.", file.display()))
}

/// Reads a text file, or says which could not be read.
pub fn read_text(file: &Path) -> Result<String, String> {
    std::fs::read_to_string(file)
        .map_err(|error| format!("Cannot read {} as text: {error}.", file.display()))
}

/// Writes a file and the folders it is in.
pub fn write(file: &Path, content: &[u8]) -> Outcome {
    let says = |error| format!("Cannot write {}: {error}.", file.display());
    if let Some(dir) = file.parent() {
        std::fs::create_dir_all(dir).map_err(says)?;
    }
    std::fs::write(file, content).map_err(says)
}

/// Removes a folder with all in it; one that is not there is fine.
pub fn remove(dir: &Path) -> Outcome {
    match std::fs::remove_dir_all(dir) {
        Err(error) if error.kind() != std::io::ErrorKind::NotFound => {
            Err(format!("Cannot remove {}: {error}.", dir.display()))
        }
        _ => Ok(()),
    }
}

/// All files under a folder, by their path from it with `/` between the parts, in order of name.
/// Hidden files, which systems and editors leave behind, are not among them.
pub fn list(dir: &Path) -> Result<Vec<String>, String> {
    fn into(dir: &Path, before: &str, all: &mut Vec<String>) -> Outcome {
        let says = |error| format!("Cannot list {}: {error}.", dir.display());
        for entry in std::fs::read_dir(dir).map_err(says)? {
            let entry = entry.map_err(says)?;
            let Ok(name) = entry.file_name().into_string() else {
                return Err(format!(
                    "{} has a name that is not Unicode; a page cannot link to it.",
                    entry.path().display()
                ));
            };
            if name.starts_with('.') {
                continue;
            }
            let name = format!("{before}{name}");
            if entry.path().is_dir() {
                into(&entry.path(), &format!("{name}/"), all)?;
            } else {
                all.push(name);
            }
        }
        Ok(())
    }
    let mut all = Vec::new();
    into(dir, "", &mut all)?;
    all.sort_unstable();
    Ok(all)
}

/// The SHA-256 of some bytes, in hexadecimal.
pub fn sha256(bytes: &[u8]) -> String {
    format!("{:x}", Sha256::digest(bytes))
}

/// How many bytes some bytes are when sent compressed, as web servers do.
pub fn gzip_size(bytes: &[u8]) -> Result<usize, String> {
    let mut encoder = GzEncoder::new(Vec::new(), Compression::best());
    encoder
        .write_all(bytes)
        .and_then(|()| encoder.finish())
        .map(|packed| packed.len())
        .map_err(|error| format!("Cannot compress: {error}."))
}

/// The sizes of all files of a folder as lines of text, with their sum.
pub fn sizes(dir: &Path) -> Result<String, String> {
    let mut lines = vec![format!("{:>12} {:>12}  file", "bytes", "gzip bytes")];
    let (mut raw_sum, mut gzip_sum) = (0, 0);
    for name in list(dir)? {
        let bytes = read(&dir.join(&name))?;
        let (raw, gzip) = (bytes.len(), gzip_size(&bytes)?);
        lines.push(format!("{raw:>12} {gzip:>12}  {name}"));
        raw_sum += raw;
        gzip_sum += gzip;
    }
    lines.push(format!("{raw_sum:>12} {gzip_sum:>12}  in all"));
    Ok(lines.join("\n"))
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::scratch::Scratch;

    #[test]
    fn all_files_are_listed_in_order() {
        let dir = Scratch::with(&[
            ("b.txt", ""),
            ("a/z.txt", ""),
            ("a/b/c", ""),
            (".hidden", ""),
        ]);
        assert_eq!(list(dir.path()).unwrap(), ["a/b/c", "a/z.txt", "b.txt"]);
        let said = list(&dir.path().join("none")).unwrap_err();
        assert!(
            said.starts_with("Cannot list ") && said.contains("none: "),
            "{said}"
        );
    }

    #[test]
    fn the_hash_is_the_known_one() {
        assert_eq!(
            sha256(b"abc"),
            "ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad"
        );
    }

    #[test]
    fn sizes_add_up() {
        let dir = Scratch::with(&[("a", &"x".repeat(1_000)), ("b", "12345")]);
        let shown = sizes(dir.path()).unwrap();
        let lines: Vec<Vec<&str>> = shown
            .lines()
            .map(|line| line.split_whitespace().collect())
            .collect();
        assert_eq!(lines[1][0], "1000");
        assert!(lines[1][1].parse::<usize>().unwrap() < 100, "{shown}");
        assert_eq!(lines[2][0], "5");
        assert_eq!(lines[3][0], "1005");
        let gzip = |line: usize| lines[line][1].parse::<usize>().unwrap();
        assert_eq!(gzip(3), gzip(1) + gzip(2));
    }

    #[test]
    fn what_cannot_be_written_or_removed_is_named() {
        let dir = Scratch::with(&[("file", "")]);
        let said = write(&dir.path().join("file/under"), b"").unwrap_err();
        assert!(
            said.starts_with("Cannot write ") && said.contains("under"),
            "{said}"
        );
        remove(&dir.path().join("none")).unwrap();
        remove(dir.path()).unwrap();
        assert!(!dir.path().exists());
    }
}
