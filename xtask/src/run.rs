//! Running other programs: each is shown before it starts, so that a person can run it alone.

use std::ffi::OsStr;
use std::path::Path;
use std::process::Command;

use crate::Outcome;

/// The cargo that runs this command, at the root of the repository.
pub fn cargo() -> Command {
    // Cargo names itself; another one on the path might be of another toolchain.
    let mut command = Command::new(std::env::var_os("CARGO").unwrap_or_else(|| "cargo".into()));
    command.current_dir(crate::paths::root());
    command
}

/// Shows the command, runs it and waits.
pub fn run(command: &mut Command) -> Outcome {
    println!("$ {}", shown(command));
    // Its environment was shown above; in a sentence it would only hide the command.
    let typed = typed(command);
    let status = command
        .status()
        .map_err(|error| cannot_start(&typed, &error))?;
    if status.success() {
        Ok(())
    } else {
        Err(format!("`{typed}` failed: {status}."))
    }
}

/// Runs a command quietly and gives what it prints.
pub fn output(command: &mut Command) -> Result<String, String> {
    let typed = typed(command);
    let output = command
        .output()
        .map_err(|error| cannot_start(&typed, &error))?;
    if !output.status.success() {
        let says = String::from_utf8_lossy(&output.stderr);
        return Err(format!(
            "`{typed}` failed: {}. It says: {}",
            output.status,
            says.trim()
        ));
    }
    String::from_utf8(output.stdout).map_err(|_| format!("`{typed}` printed no readable text."))
}

fn cannot_start(typed: &str, error: &std::io::Error) -> String {
    format!("`{typed}` cannot be started: {error}.")
}

/// A command as it would be typed: what is set in its environment, the program's name, the arguments.
pub fn shown(command: &Command) -> String {
    let set = command
        .get_envs()
        .filter_map(|(name, value)| Some(format!("{}={}", name.to_string_lossy(), quoted(value?))));
    let words = std::iter::once(typed(command));
    set.chain(words).collect::<Vec<_>>().join(" ")
}

/// The same without its environment.
fn typed(command: &Command) -> String {
    let program = Path::new(command.get_program());
    let program = program.file_name().unwrap_or(program.as_os_str());
    let words = std::iter::once(program).chain(command.get_args());
    words.map(quoted).collect::<Vec<_>>().join(" ")
}

fn quoted(word: &OsStr) -> String {
    let word = word.to_string_lossy();
    let plain = |c: char| c.is_alphanumeric() || "-_=./:,+@%".contains(c);
    if !word.is_empty() && word.chars().all(plain) {
        word.into_owned()
    } else {
        format!("'{}'", word.replace('\'', r"'\''"))
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_command_is_shown_as_typed() {
        let mut command = Command::new("/somewhere/bin/cargo");
        command
            .args(["doc", "--no-deps"])
            .env("RUSTDOCFLAGS", "-D warnings");
        assert_eq!(
            shown(&command),
            "RUSTDOCFLAGS='-D warnings' cargo doc --no-deps"
        );
    }

    #[test]
    fn a_failing_command_is_named() {
        let mut command = cargo();
        command.arg("no-such-command-of-cargo").env("SET", "1");
        let said = run(&mut command).unwrap_err();
        assert!(
            said.starts_with("`cargo no-such-command-of-cargo` failed: "),
            "{said}"
        );
    }

    #[test]
    fn a_missing_program_is_named() {
        let said = run(&mut Command::new("no-such-program-anywhere")).unwrap_err();
        assert!(
            said.starts_with("`no-such-program-anywhere` cannot be started: "),
            "{said}"
        );
    }

    #[test]
    fn output_is_what_it_prints() {
        assert!(
            output(cargo().arg("--version"))
                .unwrap()
                .starts_with("cargo ")
        );
        let said = output(cargo().arg("no-such-command-of-cargo")).unwrap_err();
        assert!(said.contains("no such command"), "{said}");
    }
}
