//! Replays the example requests against a running service and tells what differs from the answers in their files.
//!
//! ```sh
//! cargo run --example replay -- --base-url http://127.0.0.1:8080 --tolerance 1e-9
//! ```
//!
//! Exits with 0 if every answer is the expected one, with 1 if one differs or does not come, with 2 if there is nothing
//! to replay. Another version of the service is told, but is no difference by itself. The client speaks plain HTTP; for
//! HTTPS give `reqwest` one of its TLS features.

mod replay;

use std::error::Error;
use std::io::Write as _;
use std::path::PathBuf;
use std::process::ExitCode;

use clap::Parser;
use replay::{Deployment, cases, is_as_expected, table};

/// Replays example requests against a running service and tells what differs.
#[derive(Debug, Parser)]
struct Arguments {
    /// Where the service is.
    #[arg(long, default_value = "http://127.0.0.1:8080")]
    base_url: String,
    /// Share of the larger number by which two numbers may differ; 0: they must be equal.
    #[arg(long, default_value_t = 0.0)]
    tolerance: f64,
    /// A key, if the service asks for one; better given by the environment.
    #[arg(long, env = "REPLAY_KEY", hide_env_values = true)]
    key: Option<String>,
    /// A case, or a folder with cases below it; the folder that a case lies in is its endpoint.
    #[arg(default_value = concat!(env!("CARGO_MANIFEST_DIR"), "/examples/requests"))]
    places: Vec<PathBuf>,
}

#[tokio::main(flavor = "current_thread")]
async fn main() -> Result<ExitCode, Box<dyn Error>> {
    let arguments = Arguments::parse();
    let found: Result<Vec<_>, _> = arguments.places.iter().map(|place| cases(place)).collect();
    let all = match found {
        Ok(found) => found.concat(),
        Err(error) => {
            writeln!(std::io::stderr(), "{error}")?;
            return Ok(ExitCode::from(2));
        }
    };
    let deployment = Deployment::new(&arguments.base_url, arguments.key, arguments.tolerance)?;
    let mut rows = Vec::with_capacity(all.len());
    for case in &all {
        rows.push(deployment.replay(case).await);
    }
    std::io::stdout().write_all(table(&rows)?.as_bytes())?;
    Ok(if is_as_expected(&rows) { ExitCode::SUCCESS } else { ExitCode::FAILURE })
}
