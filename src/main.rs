//! The program: settings → router → serve → drain.

use std::io::{self, Write as _};
use std::process::ExitCode;
use std::time::Duration;

use brakewright::api::openapi::openapi_json;
use brakewright::settings::{Command, CommandLine, Settings, Stop};
use brakewright::{probe, server, settings};

/// A wrong setting.
const WRONG_SETTING: u8 = 2;

fn main() -> ExitCode {
    match settings::read() {
        Ok(CommandLine { command, settings }) => {
            match run(command.unwrap_or(Command::Serve), &settings) {
                Ok(()) => ExitCode::SUCCESS,
                Err(sentences) => say(&sentences, ExitCode::FAILURE),
            }
        }
        Err(Stop { text, asked_for: true }) => match write!(io::stdout(), "{text}") {
            Ok(()) => ExitCode::SUCCESS,
            Err(_) => ExitCode::FAILURE,
        },
        Err(Stop { text, asked_for: false }) => say(&text, ExitCode::from(WRONG_SETTING)),
    }
}

fn run(command: Command, settings: &Settings) -> Result<(), String> {
    match command {
        Command::Serve => serve(settings),
        Command::Openapi => match write!(io::stdout(), "{}", openapi_json()) {
            // Who reads only the beginning has what was wanted.
            Err(error) if error.kind() != io::ErrorKind::BrokenPipe => {
                Err(format!("error: cannot write the description: {error}\n"))
            }
            _ => Ok(()),
        },
        Command::Probe => probe::probe(settings.listen).map_err(|sentence| sentence + "\n"),
    }
}

fn serve(settings: &Settings) -> Result<(), String> {
    let log = server::start_logging(settings);
    let runtime = tokio::runtime::Builder::new_multi_thread()
        .enable_all()
        .build()
        .map_err(|error| format!("error: cannot start threads: {error}\n"))?;
    let result = runtime.block_on(server::serve(settings, &log));
    // Work that is still going on belongs to nobody any more.
    runtime.shutdown_timeout(Duration::ZERO);
    result
}

/// Says why the program ends, on standard error; if even that fails the code must do.
fn say(text: &str, code: ExitCode) -> ExitCode {
    let _ = write!(io::stderr(), "{text}");
    code
}
