//! The `mainstay` binary: settings, logs, the service, a clean end.

use clap::Parser;
use mainstay::api::{self, AppState};
use mainstay::app::App;
use mainstay::config::{Cli, Command, Serve};
use mainstay::telemetry;
use std::error::Error;
use std::net::SocketAddr;
use std::process::ExitCode;
use std::sync::Arc;
use std::sync::atomic::AtomicBool;
use tokio::net::TcpListener;
use tokio::signal::unix::{SignalKind, signal};

fn main() -> ExitCode {
    let cli = Cli::parse();
    let done = match cli.command {
        Some(Command::Openapi) => {
            print!("{}", api::openapi::text(&api::documented().1));
            Ok(())
        }
        Some(Command::Serve(settings)) => serve(*settings),
        None => serve(cli.serve),
    };
    match done {
        Ok(()) => ExitCode::SUCCESS,
        Err(error) => {
            eprintln!("mainstay: {error}");
            ExitCode::FAILURE
        }
    }
}

fn serve(settings: Serve) -> Result<(), Box<dyn Error>> {
    telemetry::logs(settings.log_json);
    std::fs::create_dir_all(&settings.data)
        .map_err(|error| format!("the data directory {} cannot be made: {error}", settings.data.display()))?;
    let metrics = telemetry::metrics()?;
    let state = AppState {
        app: Arc::new(App::new(settings.limits)?),
        metrics: metrics.clone(),
        draining: Arc::new(AtomicBool::new(false)),
    };
    let runtime = tokio::runtime::Builder::new_multi_thread().enable_all().build()?;
    let done = runtime.block_on(async {
        let listener = TcpListener::bind(settings.listen)
            .await
            .map_err(|error| format!("cannot listen on {}: {error}", settings.listen))?;
        greet(listener.local_addr()?);
        tokio::spawn(telemetry::upkeep(metrics));
        let mut terminate = signal(SignalKind::terminate())?;
        let mut interrupt = signal(SignalKind::interrupt())?;
        let shutdown = async move {
            tokio::select! {
                _ = terminate.recv() => {}
                _ = interrupt.recv() => {}
            }
        };
        let router = api::service(state.clone());
        api::serve::serve(listener, router, state, shutdown).await;
        Ok(())
    });
    // A computation that outlives the drain has nobody left to answer: the process does not wait for it.
    runtime.shutdown_background();
    done
}

/// Says where the service is, what to beware of, and one line to try.
fn greet(address: SocketAddr) {
    println!("Mainstay serves http://{address}/ (page), http://{address}/docs (API)");
    println!(
        "Caution: mains voltage and charged capacitors can kill; results do not replace codes, type tests or a licensed person."
    );
    if !address.ip().is_loopback() {
        println!(
            "Caution: this address is not loopback, and this version has no accounts: everybody who reaches it may use it."
        );
    }
    println!(
        "Try: curl -s http://{address}/v1/operating-point -H 'content-type: application/json' -d '{{\"supply\": {{\"line\": {{\"voltage\": \"24 V\", \"frequency\": \"50 Hz\", \"resistance\": \"0.5 ohm\"}}, \"outputs\": [{{\"rectifier\": {{\"circuit\": \"bridge\", \"diode\": {{\"threshold_voltage\": \"0.8 V\", \"slope_resistance\": \"20 mohm\"}}}}, \"rails\": [{{\"filter\": [{{\"capacitor\": {{\"capacitance\": \"4700 uF\", \"esr\": \"40 mohm\"}}}}], \"load\": {{\"kind\": \"current\", \"current\": \"1 A\"}}}}]}}]}}}}'"
    );
}
