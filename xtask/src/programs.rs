//! Programs of others that the tests need: finding them, installing them where this user may, or saying
//! what to install.

use std::path::PathBuf;
use std::process::Command;

use crate::run;

/// Where a program may be.
pub(crate) struct Sought {
    /// The variable by which a person says where it is.
    pub variable: &'static str,
    /// Its names on the path.
    pub names: &'static [&'static str],
    /// Places outside the path that some systems put it in.
    pub places: &'static [&'static str],
}

impl Sought {
    /// Looks for it on this machine.
    pub(crate) fn find_here(&self) -> Result<Option<PathBuf>, String> {
        let path = std::env::var_os("PATH").unwrap_or_default();
        let path: Vec<PathBuf> = std::env::split_paths(&path).collect();
        self.find(std::env::var_os(self.variable).map(PathBuf::from), &path)
    }

    pub(crate) fn find(
        &self,
        named: Option<PathBuf>,
        path: &[PathBuf],
    ) -> Result<Option<PathBuf>, String> {
        if let Some(named) = named {
            if named.is_file() {
                return Ok(Some(named));
            }
            return Err(format!(
                "{} says {}, but there is no such program; correct it or take it away.",
                self.variable,
                named.display()
            ));
        }
        let on_path = self.names.iter().flat_map(|name| {
            path.iter().map(move |dir| {
                dir.join(name)
                    .with_extension(std::env::consts::EXE_EXTENSION)
            })
        });
        let elsewhere = self.places.iter().map(PathBuf::from);
        Ok(on_path.chain(elsewhere).find(|program| program.is_file()))
    }
}

/// Finds what is needed; installs the packages that bring it where this user may, on Debian and its
/// kin.
///
/// # Errors
/// What `missing` says, where it is not there and cannot be installed.
pub(crate) fn ensure<T>(
    called: &str,
    packages: &[&str],
    find: impl Fn() -> Result<Option<T>, String>,
    missing: impl Fn() -> String,
) -> Result<T, String> {
    if let Some(found) = find()? {
        return Ok(found);
    }
    if !(is_root() && run::output(Command::new("apt-get").arg("--version")).is_ok()) {
        return Err(missing());
    }
    println!("Installing {called}.");
    run::run(Command::new("apt-get").arg("update"))?;
    run::run(
        Command::new("apt-get")
            .args(["install", "-y"])
            .args(packages),
    )?;
    find()?.ok_or_else(missing)
}

const NGSPICE: Sought = Sought {
    variable: "NGSPICE",
    names: &["ngspice"],
    places: &[],
};

/// Finds the circuit simulator ngspice; installs it where this user may.
///
/// # Errors
/// A sentence saying what to install.
pub(crate) fn ngspice() -> Result<PathBuf, String> {
    ensure(
        "ngspice",
        &["ngspice"],
        || NGSPICE.find_here(),
        || {
            "The circuit simulator ngspice is missing. Install it: `apt-get install ngspice` on Debian, \
         `dnf install ngspice` on Fedora, `brew install ngspice` on macOS; or set NGSPICE to where it \
         is."
            .to_owned()
        },
    )
}

fn is_root() -> bool {
    run::output(Command::new("id").arg("-u")).is_ok_and(|id| id.trim() == "0")
}
