//! Places on the processor: so many runs at once, so many waiting, the rest is sent away.

use std::sync::Arc;
use std::sync::atomic::{AtomicBool, AtomicUsize, Ordering};

use tokio::sync::{OwnedSemaphorePermit, Semaphore};

use super::PredictError;

/// Places for runs on the blocking threads; cheap to clone.
#[derive(Debug, Clone)]
pub struct Places {
    free: Arc<Semaphore>,
    waiting: Arc<AtomicUsize>,
    most_waiting: usize,
}

/// True once nobody waits for the run's result any more.
#[derive(Debug, Clone, Default)]
pub struct Abandoned(Arc<AtomicBool>);

impl Abandoned {
    /// Whether the run should stop.
    pub fn is_set(&self) -> bool {
        self.0.load(Ordering::Relaxed)
    }
}

/// Sets the flag when the future that holds it is dropped.
struct AbandonOnDrop(Abandoned);

impl Drop for AbandonOnDrop {
    fn drop(&mut self) {
        self.0.0.store(true, Ordering::Relaxed);
    }
}

/// Counts a waiting run for as long as it lives.
struct Waiting(Arc<AtomicUsize>);

impl Drop for Waiting {
    fn drop(&mut self) {
        self.0.fetch_sub(1, Ordering::Relaxed);
    }
}

impl Places {
    /// `parallel` runs at once (at least one), `waiting` in the queue.
    pub fn new(parallel: usize, waiting: usize) -> Self {
        Self {
            free: Arc::new(Semaphore::new(parallel.max(1))),
            waiting: Arc::default(),
            most_waiting: waiting,
        }
    }

    /// Runs blocking work in a place; if the returned future is dropped, the work is told through [`Abandoned`].
    ///
    /// # Errors
    /// [`PredictError::Busy`] when the queue is full, [`PredictError::Broken`] when the work panics.
    pub async fn run<T: Send + 'static>(
        &self,
        work: impl FnOnce(&Abandoned) -> Result<T, PredictError> + Send + 'static,
    ) -> Result<T, PredictError> {
        let permit = self.place().await?;
        let abandoned = Abandoned::default();
        let _guard = AbandonOnDrop(abandoned.clone());
        let span = tracing::Span::current();
        let task = tokio::task::spawn_blocking(move || {
            // The place is free again when the work is over, not when its caller has gone.
            let _permit = permit;
            span.in_scope(|| work(&abandoned))
        });
        task.await
            .unwrap_or_else(|error| Err(PredictError::Broken(error.to_string())))
    }

    async fn place(&self) -> Result<OwnedSemaphorePermit, PredictError> {
        if let Ok(permit) = Arc::clone(&self.free).try_acquire_owned() {
            return Ok(permit);
        }
        let _waiting = self.queue()?;
        let permit = Arc::clone(&self.free).acquire_owned().await;
        permit.map_err(|_| PredictError::Stopped)
    }

    fn queue(&self) -> Result<Waiting, PredictError> {
        let room = |waiting: usize| (waiting < self.most_waiting).then_some(waiting + 1);
        match self.waiting.fetch_update(Ordering::Relaxed, Ordering::Relaxed, room) {
            Ok(_) => Ok(Waiting(Arc::clone(&self.waiting))),
            Err(waiting) => Err(PredictError::Busy { waiting }),
        }
    }

    /// How many wait.
    pub fn waiting(&self) -> usize {
        self.waiting.load(Ordering::Relaxed)
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use std::sync::mpsc;

    /// Work that waits for a word, and a way to give it.
    fn held(places: &Places) -> (mpsc::Sender<()>, tokio::task::JoinHandle<Result<bool, PredictError>>) {
        let (go, wait) = mpsc::channel();
        let places = places.clone();
        let run = tokio::spawn(async move {
            places
                .run(move |abandoned| {
                    wait.recv()
                        .map(|()| abandoned.is_set())
                        .map_err(|_| PredictError::Stopped)
                })
                .await
        });
        (go, run)
    }

    #[tokio::test]
    async fn runs_beyond_places_and_queue_are_sent_away() {
        let places = Places::new(1, 1);
        let (first, first_run) = held(&places);
        while places.free.available_permits() > 0 {
            tokio::task::yield_now().await;
        }
        let (second, second_run) = held(&places);
        while places.waiting() == 0 {
            tokio::task::yield_now().await;
        }
        let third = places.run(|_| Ok(())).await;
        assert!(matches!(third, Err(PredictError::Busy { waiting: 1 })), "{third:?}");
        first.send(()).unwrap();
        second.send(()).unwrap();
        assert!(!first_run.await.unwrap().unwrap() && !second_run.await.unwrap().unwrap());
        assert_eq!(places.waiting(), 0);
    }

    #[tokio::test]
    async fn an_abandoned_run_is_told_and_keeps_its_place_until_it_ends() {
        let places = Places::new(1, 0);
        let (seen, was_seen) = mpsc::channel();
        let (go, wait) = mpsc::channel::<()>();
        let work = places.run(move |abandoned| {
            let _ = wait.recv();
            seen.send(abandoned.is_set()).map_err(|_| PredictError::Stopped)
        });
        let gone = tokio::time::timeout(std::time::Duration::from_millis(1), work).await;
        assert!(gone.is_err());
        assert!(matches!(places.run(|_| Ok(())).await, Err(PredictError::Busy { .. })));
        go.send(()).unwrap();
        assert!(was_seen.recv().unwrap());
    }

    #[tokio::test]
    async fn a_panic_is_an_error_and_frees_the_place() {
        let places = Places::new(1, 0);
        let broken: Result<(), _> = places.run(|_| panic!("inner words")).await;
        assert!(matches!(broken, Err(PredictError::Broken(_))));
        places.run(|_| Ok(())).await.unwrap();
    }
}
