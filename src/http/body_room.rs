//! Room in memory for request bodies: each holds what it has sent so far; when all is taken, the next piece is refused.

use std::error::Error;
use std::sync::{Arc, Mutex, PoisonError};

use axum::BoxError;
use axum::body::{Body, Bytes};
use axum::extract::Request;
use futures::StreamExt;
use tokio::sync::{OwnedSemaphorePermit, Semaphore};

/// Room for all bodies together, counted in KiB.
#[derive(Debug, Clone)]
pub struct BodyRoom(Arc<Semaphore>);

/// What one body takes; free again when dropped together with the body.
#[derive(Debug, Clone, Default)]
pub struct Held(Arc<Mutex<Vec<OwnedSemaphorePermit>>>);

/// There is no room for the next piece of a body.
#[derive(Debug, thiserror::Error)]
#[error("the memory for request bodies is taken")]
pub struct NoRoom;

impl BodyRoom {
    /// Room for so many bytes.
    pub fn new(bytes: usize) -> Self {
        Self(Arc::new(Semaphore::new(kib(bytes) as usize)))
    }

    /// Counts the pieces of a request's body as they come; a piece without room is the error [`NoRoom`].
    pub fn meter(&self, request: Request) -> (Request, Held) {
        let held = Held::default();
        let (room, taken) = (Arc::clone(&self.0), held.clone());
        let metered = request.map(|body| {
            let pieces = body
                .into_data_stream()
                .map(move |piece| count(&room, &taken, piece.map_err(BoxError::from)?));
            Body::from_stream(pieces)
        });
        (metered, held)
    }
}

fn count(room: &Arc<Semaphore>, taken: &Held, piece: Bytes) -> Result<Bytes, BoxError> {
    let permit = Arc::clone(room)
        .try_acquire_many_owned(kib(piece.len()))
        .map_err(|_| NoRoom)?;
    taken.0.lock().unwrap_or_else(PoisonError::into_inner).push(permit);
    Ok(piece)
}

/// Whole KiB, at least one.
fn kib(bytes: usize) -> u32 {
    u32::try_from(bytes.div_ceil(1024)).unwrap_or(u32::MAX).max(1)
}

/// Whether an error, or one below it, is of this kind.
pub fn is_caused_by<E: Error + 'static>(error: &(dyn Error + 'static)) -> bool {
    error.is::<E>() || error.source().is_some_and(is_caused_by::<E>)
}

#[cfg(test)]
mod tests {
    use super::*;

    fn read(request: Request) -> Result<Bytes, axum::Error> {
        futures::executor::block_on(axum::body::to_bytes(request.into_body(), usize::MAX))
    }

    #[test]
    fn room_is_taken_piece_by_piece_and_given_back() {
        let room = BodyRoom::new(10 * 1024);
        let body = || Request::new(Body::from(vec![0; 6 * 1024]));
        let (first, held) = room.meter(body());
        assert_eq!(read(first).unwrap().len(), 6 * 1024);
        let refused = read(room.meter(body()).0).unwrap_err();
        assert!(is_caused_by::<NoRoom>(&refused), "{refused:?}");
        drop(held);
        assert!(read(room.meter(body()).0).is_ok());
    }
}
