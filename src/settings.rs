//! The settings of the program, from its command line and environment; nothing else reads the environment.

use std::ffi::OsString;
use std::net::SocketAddr;
use std::time::Duration;

use axum::http::{HeaderValue, Uri};
use clap::error::{ContextKind, ContextValue};
use clap::{Args, CommandFactory as _, Parser, Subcommand, ValueEnum};
use tracing_subscriber::EnvFilter;

use crate::api::layers::LayerSettings;

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
    /// What to log: a level, or `target=level` pairs separated by commas.
    #[arg(long, env = "BRAKEWRIGHT_LOG", global = true, value_name = "FILTER", default_value = "info", value_parser = log_filter)]
    pub log: String,
    /// How to write the log, on standard error.
    #[arg(long, env = "BRAKEWRIGHT_LOG_FORMAT", global = true, default_value = "text")]
    pub log_format: LogFormat,
    /// Origins whose web pages may call the service, separated by commas; none if empty.
    #[arg(long, env = "BRAKEWRIGHT_ALLOWED_ORIGINS", global = true, value_name = "ORIGINS", default_value = "", value_parser = origins)]
    pub allowed_origins: Origins,
    /// Largest request body in bytes.
    #[arg(long, env = "BRAKEWRIGHT_MAX_BODY_BYTES", global = true, value_name = "BYTES", default_value = "1048576", value_parser = clap::value_parser!(u32).range(1..))]
    pub max_body_bytes: u32,
    /// Longest time for a request, in seconds (30, 30s) or milliseconds (500ms).
    #[arg(long, env = "BRAKEWRIGHT_REQUEST_TIMEOUT", global = true, value_name = "TIME", default_value = "30s", value_parser = duration)]
    pub request_timeout: Duration,
    /// Most requests in progress at once; more are answered 503.
    #[arg(long, env = "BRAKEWRIGHT_MAX_CONCURRENCY", global = true, value_name = "COUNT", default_value = "1024", value_parser = clap::value_parser!(u32).range(1..=1_000_000))]
    pub max_concurrency: u32,
    /// Longest time to finish requests in progress when told to stop, in seconds or milliseconds.
    #[arg(long, env = "BRAKEWRIGHT_DRAIN_TIMEOUT", global = true, value_name = "TIME", default_value = "20s", value_parser = duration)]
    pub drain_timeout: Duration,
}

/// How log lines are written.
#[derive(Debug, Clone, Copy, PartialEq, Eq, ValueEnum)]
pub enum LogFormat {
    /// For people.
    Text,
    /// One JSON object a line.
    Json,
}

/// Origins of web pages, checked.
#[derive(Debug, Clone, Default, PartialEq, Eq)]
pub struct Origins(Vec<HeaderValue>);

impl Settings {
    /// The part of the settings that concerns the layers around the routes.
    #[must_use]
    pub fn layers(&self) -> LayerSettings {
        LayerSettings {
            max_body_bytes: usize::try_from(self.max_body_bytes).unwrap_or(usize::MAX),
            request_timeout: self.request_timeout,
            max_concurrency: usize::try_from(self.max_concurrency).unwrap_or(usize::MAX),
            allowed_origins: self.allowed_origins.0.clone(),
        }
    }
}

/// Why the program does not start: help that was asked for, or a wrong setting.
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
/// Help or the version if asked for; else a sentence that names the wrong setting.
pub fn read() -> Result<CommandLine, Stop> {
    let variables = std::env::vars_os().map(|(name, _)| name);
    // First, so that a variable which is not understood is never passed over, whatever else is wrong.
    refuse_unknown(variables)?;
    CommandLine::try_parse().map_err(|error| {
        let origin = variable_at_fault(&error).map_or(String::new(), |variable| {
            format!("\nThe value comes from the environment variable {variable}.\n")
        });
        Stop { text: error.render().to_string() + &origin, asked_for: error.exit_code() == 0 }
    })
}

/// The variable that a refused value comes from, if it was not given as an option.
fn variable_at_fault(error: &clap::Error) -> Option<String> {
    let Some(ContextValue::String(shown)) = error.get(ContextKind::InvalidArg) else { return None };
    let option = shown.split(' ').next()?;
    if std::env::args().any(|argument| argument.split('=').next() == Some(option)) {
        return None;
    }
    let program = CommandLine::command();
    let of_option = |argument: &&clap::Arg| argument.get_long() == option.strip_prefix("--");
    let variable = program.get_arguments().find(of_option)?.get_env()?;
    Some(variable.to_string_lossy().into_owned())
}

/// Refuses variables with our prefix that are no settings: an ignored one could leave a door open.
fn refuse_unknown(variables: impl Iterator<Item = OsString>) -> Result<(), Stop> {
    let program = CommandLine::command();
    let known: Vec<_> = program.get_arguments().filter_map(clap::Arg::get_env).collect();
    for name in variables {
        if name.to_string_lossy().starts_with(PREFIX) && !known.contains(&name.as_os_str()) {
            let name = name.to_string_lossy();
            let text = format!(
                "error: {name} is not a setting of this version; `brakewright --help` lists all\n"
            );
            return Err(Stop { text, asked_for: false });
        }
    }
    Ok(())
}

fn listen(text: &str) -> Result<SocketAddr, String> {
    text.parse().map_err(|_| "must be an IP address and a port, such as 127.0.0.1:8080".to_owned())
}

fn log_filter(text: &str) -> Result<String, String> {
    let refusal = |error| format!("must be a level or `target=level` pairs: {error}");
    EnvFilter::builder().parse(text).map(|_| text.to_owned()).map_err(refusal)
}

fn origins(text: &str) -> Result<Origins, String> {
    let listed = text.split(',').map(str::trim).filter(|origin| !origin.is_empty());
    listed.map(origin).collect::<Result<_, _>>().map(Origins)
}

/// An origin is scheme, host and port; browsers send it without a final slash.
fn origin(text: &str) -> Result<HeaderValue, String> {
    let refusal = || {
        format!("`{text}` must be an origin such as https://example.org or http://localhost:3000")
    };
    let uri: Uri = text.parse().map_err(|_| refusal())?;
    let (Some(scheme @ ("http" | "https")), Some(authority)) = (uri.scheme_str(), uri.authority())
    else {
        return Err(refusal());
    };
    // Compared as text, as browsers do: a path, a user name or capitals would never match.
    let canonical = format!("{scheme}://{}", authority.as_str().to_lowercase());
    if canonical != text || text.contains(['@', '*']) {
        return Err(refusal());
    }
    HeaderValue::try_from(canonical).map_err(|_| refusal())
}

fn duration(text: &str) -> Result<Duration, String> {
    let (number, unit): (&str, fn(u64) -> Duration) = match text.strip_suffix("ms") {
        Some(number) => (number, Duration::from_millis),
        None => (text.strip_suffix('s').unwrap_or(text), Duration::from_secs),
    };
    let number = number.trim().parse().ok().filter(|number| (1..=86_400_000).contains(number));
    number.map(unit).ok_or_else(|| "must be a time above 0, such as 30s or 500ms".to_owned())
}
