//! Prediction.
