//! The list of commands; each is a file of the library beside this one.

use std::process::ExitCode;

use xtask::{Outcome, bench, build, report, serve, test};

const HELP: &str = "\
cargo xtask COMMAND

  build                               compile the page into dist/
  serve [--port N]                    build, then serve the page on this machine
  test [--only STEP]                  check everything, or one step: format, lint, native, docs, build, page, browser
  report JOB [--book BOOK] [--json]   work a job file up, with the demonstration book or another
  bench                               time the core and the page, weigh it
";

fn main() -> ExitCode {
    let arguments: Vec<String> = std::env::args().skip(1).collect();
    let Some((command, rest)) = arguments.split_first() else {
        eprint!("{HELP}");
        return ExitCode::from(2);
    };
    let outcome = match command.as_str() {
        "build" => no_more(rest).and_then(|()| build::build()),
        "serve" => serve::serve(rest),
        "test" => test::test(rest),
        "report" => report::report(rest),
        "bench" => no_more(rest).and_then(|()| bench::bench()),
        "help" | "--help" | "-h" => {
            print!("{HELP}");
            Ok(())
        }
        unknown => {
            eprint!("There is no command “{unknown}”. These there are:\n\n{HELP}");
            return ExitCode::from(2);
        }
    };
    match outcome {
        Ok(()) => ExitCode::SUCCESS,
        Err(says) => {
            eprintln!("{says}");
            ExitCode::FAILURE
        }
    }
}

/// For commands that take no arguments.
fn no_more(rest: &[String]) -> Outcome {
    match rest.first() {
        Some(extra) => Err(format!(
            "This command takes no arguments, but was given “{extra}”."
        )),
        None => Ok(()),
    }
}
