//! The averaged way: the periodic cycle in slowly changing air, with the body's lag carried along.

mod closed;
mod local;
mod march;
mod respond;
mod stretch;

pub(super) use local::Start;
pub(super) use respond::{Memo, Plant, head_side, settled_nodes, why_not};
pub(super) use stretch::advance;
