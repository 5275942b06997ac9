//! What a levelling sight loses to the earth's curve, the air and the level, and whether that may be borne.
//!
//! Conventions, held everywhere:
//! - SI inside: metres, radians. Units exist only in [`quantity`].
//! - k is the earth's radius divided by the radius of the ray, positive when the ray bends with the earth. Any real k is
//!   legal; at k = 1 the ray follows the earth, above 1 it bends more than the earth does.
//! - An error is positive when the staff *reads too much*: the point is then higher than booked.
//! - Doubt is a 95 % half-width, kept apart from bias.

pub mod air;
pub mod constants;
pub mod doubt;
pub mod earth;
pub mod horizon;
pub mod levelling;
pub mod limits;
pub mod line;
mod order;
pub mod pairs;
pub mod place;
pub mod quantity;
pub mod question;
mod questions;
pub mod ray;
pub mod sight;
