//! What can come in and is wrong: a clear problem document, all faults at once, no panic, memory flat.

mod bounds;
mod load;
mod request;
mod sizes;
mod weather;
