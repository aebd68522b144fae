//! IO: logs and metrics.

use metrics_exporter_prometheus::{Matcher, PrometheusBuilder, PrometheusHandle};
use std::time::Duration;

/// Bounds of the duration buckets in seconds, as OpenTelemetry's HTTP conventions advise.
const BUCKETS: [f64; 14] = [
    0.005, 0.01, 0.025, 0.05, 0.075, 0.1, 0.25, 0.5, 0.75, 1.0, 2.5, 5.0, 7.5, 10.0,
];
/// Seconds between two clean-ups of the recorder, without which its histograms grow.
const UPKEEP_SECONDS: u64 = 5;

/// Sends logs to standard error: text, or JSON. `RUST_LOG` filters them; `info` where it is not set.
pub fn logs(json: bool) {
    let filter = tracing_subscriber::EnvFilter::try_from_default_env()
        .unwrap_or_else(|_| tracing_subscriber::EnvFilter::new("info"));
    let builder = tracing_subscriber::fmt()
        .with_env_filter(filter)
        .with_writer(std::io::stderr);
    // A second start in the same process, as in tests, keeps the first's logs.
    let _ = if json {
        builder.json().try_init()
    } else {
        builder.try_init()
    };
}

/// A recorder for the process's metrics; the handle renders them. One process has one recorder: a second call gets a handle of
/// its own that nothing records to.
///
/// # Errors
/// Where the buckets are not accepted.
pub fn metrics() -> Result<PrometheusHandle, metrics_exporter_prometheus::BuildError> {
    let name = Matcher::Full("http_server_request_duration_seconds".to_owned());
    let recorder = PrometheusBuilder::new()
        .set_buckets_for_metric(name, &BUCKETS)?
        .build_recorder();
    let handle = recorder.handle();
    let _ = metrics::set_global_recorder(recorder);
    Ok(handle)
}

/// Cleans the recorder up for ever.
pub async fn upkeep(handle: PrometheusHandle) {
    let mut ticks = tokio::time::interval(Duration::from_secs(UPKEEP_SECONDS));
    loop {
        ticks.tick().await;
        handle.run_upkeep();
    }
}
