//! Heat and mass transfer.
