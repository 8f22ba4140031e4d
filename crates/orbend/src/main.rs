//! The command line. Data goes to standard output, talk to standard error;
//! exit codes are decided here.

mod arguments;
mod commands;
mod failure;
mod geometry;
mod outputs;
mod write;

use std::process::ExitCode;

use clap::{CommandFactory, FromArgMatches};
use orbend_hamiltonian::ParameterSet;

use arguments::{Arguments, Command};
use failure::Failure;

fn main() -> ExitCode {
    let arguments = match parse() {
        Ok(arguments) => arguments,
        Err(error) => {
            // Help and version are answers; everything else is a bad request.
            let code = if error.use_stderr() { 2 } else { 0 };
            let _ = error.print();
            return ExitCode::from(code);
        }
    };
    match run(&arguments) {
        Ok(()) => ExitCode::SUCCESS,
        Err(failure) => {
            use std::io::Write;
            let _ = writeln!(std::io::stderr(), "orbend: {failure}");
            ExitCode::from(failure.code())
        }
    }
}

fn parse() -> Result<Arguments, clap::Error> {
    let mut command = Arguments::command();
    // The long form names the values in use; they are read only when asked for.
    if std::env::args_os().any(|word| word == "--version") {
        let set = ParameterSet::default();
        let text = format!(
            "{}\nparameter set {}\n{}",
            env!("CARGO_PKG_VERSION"),
            set.name(),
            set.fingerprint()
        );
        // Kept for the rest of the run, which ends with printing it.
        command = command.long_version(&*text.leak());
    }
    Arguments::from_arg_matches(&command.try_get_matches()?)
}

fn run(arguments: &Arguments) -> Result<(), Failure> {
    match &arguments.command {
        Command::Levels(arguments) => commands::levels::run(arguments),
        Command::Sweep(arguments) => commands::sweep::run(arguments),
        Command::Shape(arguments) => commands::shape::run(arguments),
        Command::Plan(arguments) => commands::plan::run(arguments),
        Command::Params(arguments) => commands::params::run(arguments),
        Command::Completions { shell } => {
            let mut script = Vec::new();
            clap_complete::generate(*shell, &mut Arguments::command(), "orbend", &mut script);
            write::write_stdout(&script)
        }
        Command::Man => {
            let mut page = Vec::new();
            clap_mangen::Man::new(Arguments::command())
                .render(&mut page)
                .map_err(|error| Failure::running(error.to_string()))?;
            write::write_stdout(&page)
        }
    }
}
