//! The one door from async to the cores.

use super::AppError;
use std::sync::Arc;
use tokio::sync::Semaphore;

/// Threads for computation, apart from those that serve connections, and places for the requests that use them.
#[derive(Debug)]
pub(super) struct Compute {
    pool: Arc<rayon::ThreadPool>,
    places: Arc<Semaphore>,
}

impl Compute {
    pub(super) fn new(places: usize) -> Result<Self, rayon::ThreadPoolBuildError> {
        let pool = rayon::ThreadPoolBuilder::new()
            .thread_name(|i| format!("compute-{i}"))
            .build()?;
        Ok(Self {
            pool: Arc::new(pool),
            places: Arc::new(Semaphore::new(places.max(1))),
        })
    }

    /// Runs `work` on the cores, once there is a place; parallel iterators inside use all of them.
    pub(super) async fn run<T: Send + 'static>(
        &self,
        work: impl FnOnce() -> T + Send + 'static,
    ) -> Result<T, AppError> {
        let place = Arc::clone(&self.places)
            .acquire_owned()
            .await
            .map_err(|_| AppError::Lost)?;
        let pool = Arc::clone(&self.pool);
        let task = tokio::task::spawn_blocking(move || {
            let _place = place;
            pool.install(work)
        });
        task.await.map_err(|_| AppError::Lost)
    }
}
