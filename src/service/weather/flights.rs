//! One question is out only once: whoever asks the same meanwhile waits for the same answer.

use std::collections::HashMap;
use std::sync::{Arc, Mutex, PoisonError};

use futures::FutureExt;
use futures::future::{BoxFuture, Shared};

use super::shelf::Held;
use crate::intake::endpoints::FetchError;

/// What a question came to, for everybody who waited.
pub(super) type Outcome = Result<Arc<Held>, FetchError>;

/// Questions that are out.
#[derive(Debug, Clone, Default)]
pub(super) struct Flights(Arc<Mutex<HashMap<String, Shared<BoxFuture<'static, Outcome>>>>>);

/// Takes a question off the list when its task ends, however it ends.
struct Landing {
    flights: Flights,
    name: String,
}

impl Drop for Landing {
    fn drop(&mut self) {
        self.flights.with(|out| out.remove(&self.name));
    }
}

impl Flights {
    /// The outcome of the question of this name, which `ask` asks if nobody is asking it already. It is asked in a task of
    /// its own: if everybody goes away, the answer is kept nevertheless.
    pub(super) async fn outcome(&self, name: String, ask: impl Future<Output = Outcome> + Send + 'static) -> Outcome {
        let flight = self.with(|out| match out.get(&name) {
            Some(flight) => flight.clone(),
            None => {
                let flight = self.start(name.clone(), ask);
                out.insert(name, flight.clone());
                flight
            }
        });
        flight.await
    }

    fn start(
        &self,
        name: String,
        ask: impl Future<Output = Outcome> + Send + 'static,
    ) -> Shared<BoxFuture<'static, Outcome>> {
        let landing = Landing {
            flights: self.clone(),
            name,
        };
        let task = tokio::spawn(async move {
            let _landing = landing;
            ask.await
        });
        let outcome = task.map(|ended| ended.unwrap_or_else(|broken| Err(FetchError::Wrong(broken.to_string()))));
        outcome.boxed().shared()
    }

    fn with<T>(&self, change: impl FnOnce(&mut HashMap<String, Shared<BoxFuture<'static, Outcome>>>) -> T) -> T {
        // Nothing that can panic runs under this lock.
        change(&mut self.0.lock().unwrap_or_else(PoisonError::into_inner))
    }
}
