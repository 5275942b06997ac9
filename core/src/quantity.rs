//! Quantities and their units: the only place where units exist.

pub mod number;
pub mod show;
pub mod unit;

/// A length in metres.
#[derive(Debug, Clone, Copy, PartialEq, PartialOrd)]
pub struct Metres(pub f64);

/// A coefficient of refraction k: radius of the earth divided by the radius of the ray.
#[derive(Debug, Clone, Copy, PartialEq, PartialOrd)]
pub struct Coefficient(pub f64);

/// A small tilt of a line as rise over distance, e.g. the collimation error of a level; positive upwards.
#[derive(Debug, Clone, Copy, PartialEq, PartialOrd)]
pub struct Tilt(pub f64);

/// An angle in radians.
#[derive(Debug, Clone, Copy, PartialEq, PartialOrd)]
pub struct Angle(pub f64);
