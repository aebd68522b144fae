//! IO: settings from flags and environment.

use clap::{Args, Parser, Subcommand};
use std::net::SocketAddr;
use std::path::PathBuf;

/// Designs and verifies the mains input stage of a product.
#[derive(Debug, Parser)]
#[command(name = "mainstay", version, about)]
pub struct Cli {
    /// What to do; serving is the default.
    #[command(subcommand)]
    pub command: Option<Command>,
    /// Settings of the service.
    #[command(flatten)]
    pub serve: Serve,
}

/// What the program can do.
#[derive(Debug, Subcommand)]
pub enum Command {
    /// Serve the HTTP API and the page.
    Serve(Box<Serve>),
    /// Print the OpenAPI document.
    Openapi,
}

/// Settings of the service.
#[derive(Args, Clone, Debug)]
pub struct Serve {
    /// Address to listen on. The service has no accounts yet: keep it on loopback or a trusted network.
    #[arg(long, env = "MAINSTAY_LISTEN", default_value = "127.0.0.1:8230")]
    pub listen: SocketAddr,
    /// Directory for what the service keeps. This version keeps nothing; the directory is made and left empty.
    #[arg(long, env = "MAINSTAY_DATA", default_value = "data")]
    pub data: PathBuf,
    /// Logs as JSON, one object a line.
    #[arg(long, env = "MAINSTAY_LOG_JSON")]
    pub log_json: bool,
    /// Bounds on requests and work.
    #[command(flatten)]
    pub limits: Limits,
}

/// Bounds on requests and work. Each has a default that serves a team; each is named in the error that it causes.
#[derive(Args, Clone, Copy, Debug)]
pub struct Limits {
    /// Largest request body in bytes.
    #[arg(long, env = "MAINSTAY_BODY_MAXIMUM", default_value_t = 256 * 1024)]
    pub body_maximum: usize,
    /// Most points of one sweep.
    #[arg(long, env = "MAINSTAY_SWEEP_POINTS_MAXIMUM", default_value_t = 10_000_000)]
    pub sweep_points_maximum: u64,
    /// Most columns of one sweep.
    #[arg(long, env = "MAINSTAY_SWEEP_COLUMNS_MAXIMUM", default_value_t = 256)]
    pub sweep_columns_maximum: usize,
    /// Most points of a waveform.
    #[arg(long, env = "MAINSTAY_WAVEFORM_POINTS_MAXIMUM", default_value_t = 20_000)]
    pub waveform_points_maximum: usize,
    /// Most corners solved one by one; beyond it the signs of the changes choose.
    #[arg(long, env = "MAINSTAY_CORNERS_MAXIMUM", default_value_t = crate::bounds::CORNERS_MAXIMUM)]
    pub corners_maximum: usize,
    /// Most uncertain quantities of one supply.
    #[arg(long, env = "MAINSTAY_BANDS_MAXIMUM", default_value_t = 64)]
    pub bands_maximum: usize,
    /// Requests that compute at the same time; more wait.
    #[arg(long, env = "MAINSTAY_COMPUTE_MAXIMUM", default_value_t = 4)]
    pub compute_maximum: usize,
    /// Requests in hand at the same time; more are refused with 503.
    #[arg(long, env = "MAINSTAY_REQUESTS_MAXIMUM", default_value_t = 256)]
    pub requests_maximum: usize,
    /// Seconds until an answer must begin.
    #[arg(long, env = "MAINSTAY_REQUEST_SECONDS_MAXIMUM", default_value_t = 60)]
    pub request_seconds_maximum: u64,
    /// Open connections; more wait to be accepted.
    #[arg(long, env = "MAINSTAY_CONNECTIONS_MAXIMUM", default_value_t = 1024)]
    pub connections_maximum: usize,
    /// Seconds in which a request's header must have arrived, the silence before it included.
    #[arg(long, env = "MAINSTAY_HEADER_SECONDS_MAXIMUM", default_value_t = 10)]
    pub header_seconds_maximum: u64,
    /// Seconds in which a request's body must have arrived.
    #[arg(long, env = "MAINSTAY_BODY_SECONDS_MAXIMUM", default_value_t = 15)]
    pub body_seconds_maximum: u64,
    /// Seconds that a client may take nothing of its answer before the connection is closed.
    #[arg(long, env = "MAINSTAY_STALL_SECONDS_MAXIMUM", default_value_t = 30)]
    pub stall_seconds_maximum: u64,
    /// Seconds that requests in hand have to finish after SIGTERM or SIGINT.
    #[arg(long, env = "MAINSTAY_DRAIN_SECONDS_MAXIMUM", default_value_t = 8)]
    pub drain_seconds_maximum: u64,
}

impl Default for Limits {
    fn default() -> Self {
        let cli = Cli::parse_from(["mainstay"]);
        cli.serve.limits
    }
}
