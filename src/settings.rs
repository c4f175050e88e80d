//! The settings of the program, from its command line and environment; nothing else reads the environment.

use std::ffi::OsString;
use std::net::SocketAddr;
use std::num::NonZeroU32;
use std::time::Duration;

use clap::error::{ContextKind, ContextValue};
use clap::{Args, CommandFactory as _, Parser, Subcommand};

use crate::api::layers::LayerSettings;
use crate::setting_values::{
    KeysFile, LogFormat, MetricsListen, Origins, duration, listen, log_filter,
};

/// Every variable of ours starts with this; one that is not known stops the start.
const PREFIX: &str = "BRAKEWRIGHT_";

/// Brakewright: disc brake calculations over HTTP.
#[derive(Debug, Clone, Parser)]
#[command(
    name = "brakewright",
    version,
    after_help = "Every setting is an option, an environment variable, or left at its default."
)]
pub struct CommandLine {
    /// What to do; serving if nothing is said.
    #[command(subcommand)]
    pub command: Option<Command>,
    /// How to do it.
    #[command(flatten)]
    pub settings: Settings,
}

/// What the program can do.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Subcommand)]
pub enum Command {
    /// Serve until told to stop by SIGTERM or SIGINT (the default).
    Serve,
    /// Print the description of the interface, OpenAPI 3.1.
    Openapi,
    /// Ask the service on the configured address whether it is ready; exit code 0 if it is, 1 if not.
    Probe,
}

/// The settings, each with a safe default.
#[derive(Debug, Clone, Args)]
pub struct Settings {
    /// Address and port to listen on; port 0 picks a free one.
    #[arg(long, env = "BRAKEWRIGHT_LISTEN", global = true, value_name = "ADDRESS", default_value = "127.0.0.1:8080", value_parser = listen)]
    pub listen: SocketAddr,
    /// Address and port to show metrics on, at /metrics, for Prometheus; nowhere if empty.
    #[arg(long, env = "BRAKEWRIGHT_METRICS_LISTEN", global = true, value_name = "ADDRESS", default_value = "", value_parser = MetricsListen::parse)]
    pub metrics_listen: MetricsListen,
    /// What to log: a level, or `target=level` pairs separated by commas.
    #[arg(long, env = "BRAKEWRIGHT_LOG", global = true, value_name = "FILTER", default_value = "info", value_parser = log_filter)]
    pub log: String,
    /// How to write the log, on standard error.
    #[arg(long, env = "BRAKEWRIGHT_LOG_FORMAT", global = true, default_value = "text")]
    pub log_format: LogFormat,
    /// Origins whose web pages may call the service, separated by commas; none if empty.
    #[arg(long, env = "BRAKEWRIGHT_ALLOWED_ORIGINS", global = true, value_name = "ORIGINS", default_value = "", value_parser = Origins::parse)]
    pub allowed_origins: Origins,
    /// Largest request body in bytes; a selection may have 16 MiB, a stream 1 MiB a line.
    #[arg(long, env = "BRAKEWRIGHT_MAX_BODY_BYTES", global = true, value_name = "BYTES", default_value = "1048576", value_parser = clap::value_parser!(u32).range(1..))]
    pub max_body_bytes: u32,
    /// Longest time for a request, in seconds (30, 30s) or milliseconds (500ms).
    #[arg(long, env = "BRAKEWRIGHT_REQUEST_TIMEOUT", global = true, value_name = "TIME", default_value = "30s", value_parser = duration)]
    pub request_timeout: Duration,
    /// Most requests in progress at once; more are answered 503.
    #[arg(long, env = "BRAKEWRIGHT_MAX_CONCURRENCY", global = true, value_name = "COUNT", default_value = "1024", value_parser = clap::value_parser!(u32).range(1..=1_000_000))]
    pub max_concurrency: u32,
    /// Requests that each client may send in a minute; 0 for as many as it likes.
    #[arg(long, env = "BRAKEWRIGHT_RATE_LIMIT", global = true, value_name = "COUNT", default_value = "0", value_parser = clap::value_parser!(u32).range(0..=10_000_000))]
    pub rate_limit: u32,
    /// File of API keys: the SHA-256 of one a line, in hexadecimal; the service is open if empty.
    #[arg(long, env = "BRAKEWRIGHT_API_KEYS_FILE", global = true, value_name = "PATH", default_value = "", value_parser = KeysFile::read)]
    pub api_keys_file: KeysFile,
    /// Longest time to finish requests in progress when told to stop, in seconds or milliseconds.
    #[arg(long, env = "BRAKEWRIGHT_DRAIN_TIMEOUT", global = true, value_name = "TIME", default_value = "20s", value_parser = duration)]
    pub drain_timeout: Duration,
}

impl Settings {
    /// The part of the settings that concerns the layers around the routes.
    #[must_use]
    pub fn layers(&self) -> LayerSettings {
        LayerSettings {
            max_body_bytes: usize::try_from(self.max_body_bytes).unwrap_or(usize::MAX),
            request_timeout: self.request_timeout,
            max_concurrency: usize::try_from(self.max_concurrency).unwrap_or(usize::MAX),
            rate_limit: NonZeroU32::new(self.rate_limit),
            keys: self.api_keys_file.ring().cloned(),
            allowed_origins: self.allowed_origins.list().to_vec(),
        }
    }
}

/// Why the program does not start: help that was asked for, or wrong settings.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Stop {
    /// What to print.
    pub text: String,
    /// Whether this is what the user asked for.
    pub asked_for: bool,
}

/// Reads the command line and the environment.
///
/// # Errors
/// Help or the version if asked for; else a sentence for each wrong setting, which names it.
pub fn read() -> Result<CommandLine, Stop> {
    let variables = std::env::vars_os().map(|(name, _)| name);
    let mut faults: Vec<String> =
        unknown(variables).map(|name| refusal_of_unknown(&name)).collect();
    let given: Vec<OsString> = std::env::args_os().collect();
    let mut arguments = given.clone();
    // The parser stops at the first wrong setting. That one is left at its default to find the next.
    loop {
        let error = match CommandLine::try_parse_from(&arguments) {
            Ok(line) if faults.is_empty() => return Ok(line),
            Ok(_) => break,
            Err(error) => error,
        };
        if error.exit_code() == 0 {
            return Err(Stop { text: error.render().to_string(), asked_for: true });
        }
        let setting = setting_at_fault(&error);
        let fault = sentence(&error, setting.as_ref(), &given);
        if !faults.contains(&fault) {
            faults.push(fault);
        }
        if !setting.is_some_and(|setting| without(&mut arguments, &setting)) {
            break;
        }
    }
    let text = faults.concat() + "\nFor more information, try '--help'.\n";
    Err(Stop { text, asked_for: false })
}

/// Variables with our prefix that are no settings: an ignored one could leave a door open.
fn unknown(variables: impl Iterator<Item = OsString>) -> impl Iterator<Item = String> {
    let program = CommandLine::command();
    let known: Vec<OsString> =
        program.get_arguments().filter_map(clap::Arg::get_env).map(ToOwned::to_owned).collect();
    variables
        .filter(move |name| name.to_string_lossy().starts_with(PREFIX) && !known.contains(name))
        .map(|name| name.to_string_lossy().into_owned())
}

fn refusal_of_unknown(name: &str) -> String {
    format!("error: {name} is not a setting of this version; `brakewright --help` lists all\n")
}

/// A setting as the parser knows it.
struct Setting {
    /// The option, such as `--listen`.
    option: String,
    variable: String,
    default: OsString,
}

/// The setting whose value is refused, if it is one.
fn setting_at_fault(error: &clap::Error) -> Option<Setting> {
    let Some(ContextValue::String(shown)) = error.get(ContextKind::InvalidArg) else { return None };
    let option = shown.split(' ').next()?;
    let program = CommandLine::command();
    let of_option = |argument: &&clap::Arg| argument.get_long() == option.strip_prefix("--");
    let argument = program.get_arguments().find(of_option)?;
    Some(Setting {
        option: option.to_owned(),
        variable: argument.get_env()?.to_string_lossy().into_owned(),
        default: argument.get_default_values().first()?.into(),
    })
}

/// What is wrong, and whether it comes from the environment.
fn sentence(error: &clap::Error, setting: Option<&Setting>, given: &[OsString]) -> String {
    let text = error.render().to_string();
    // What follows the first paragraph is general advice.
    let Some(setting) = setting else { return text };
    let refusal = text.split("\n\n").next().unwrap_or_default().trim_end();
    let as_option = |argument: &OsString| is_option(argument, &setting.option);
    let origin = if given.iter().any(as_option) {
        String::new()
    } else {
        format!("\n  The value comes from the environment variable {}.", setting.variable)
    };
    format!("{refusal}{origin}\n")
}

fn is_option(argument: &OsString, option: &str) -> bool {
    argument.to_string_lossy().split('=').next() == Some(option)
}

/// Leaves a setting at its default, whatever option or variable says otherwise; false if it is so already.
fn without(arguments: &mut Vec<OsString>, setting: &Setting) -> bool {
    let mut default = OsString::from(format!("{}=", setting.option));
    default.push(&setting.default);
    match arguments.iter().filter(|argument| **argument == default).count() {
        0 => {
            remove(arguments, &setting.option);
            arguments.insert(1.min(arguments.len()), default);
        }
        // Before a subcommand it does not keep the subcommand from looking at the variable once more.
        1 => arguments.push(default),
        _ => return false,
    }
    true
}

/// Removes an option with its values.
fn remove(arguments: &mut Vec<OsString>, option: &str) {
    while let Some(place) = arguments.iter().position(|found| is_option(found, option)) {
        let removed = arguments.remove(place);
        let value_follows = !removed.to_string_lossy().contains('=') && place < arguments.len();
        if value_follows {
            arguments.remove(place);
        }
    }
}
