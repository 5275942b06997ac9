//! The air: what k may be.

pub mod guide;
