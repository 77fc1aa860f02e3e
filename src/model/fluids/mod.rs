//! Working fluids and evaporants.
