//! Published limits of levelling, each with its source and how sure we are of it. The job's own specification governs.

/// A class of levelling with a limit on the length of a sight.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Class {
    /// Name at the boundary.
    pub name: &'static str,
    /// Name on the page.
    pub label: &'static str,
    /// Longest sight, metres.
    pub sight: f64,
    /// Greatest difference of the two sights of a setup, metres; `None` where it sets none per setup.
    pub imbalance: Option<f64>,
    /// Where it is printed, and whether it was read there.
    pub source: &'static str,
}

const FGCC: &str =
    "USA, FGCC, Standards and Specifications for Geodetic Control Networks (1984): as recalled, check your copy";
const NATMAP: &str = "Australia, Division of National Mapping, First Order Levelling: as read";

/// Every class.
pub const CLASSES: &[Class] = &[
    Class { name: "fgcc_1_1", label: "FGCC first order, class I", sight: 50.0, imbalance: Some(2.0), source: FGCC },
    Class { name: "fgcc_1_2", label: "FGCC first order, class II", sight: 60.0, imbalance: Some(5.0), source: FGCC },
    Class { name: "fgcc_2_1", label: "FGCC second order, class I", sight: 60.0, imbalance: Some(5.0), source: FGCC },
    Class { name: "fgcc_2_2", label: "FGCC second order, class II", sight: 70.0, imbalance: Some(10.0), source: FGCC },
    Class { name: "fgcc_3", label: "FGCC third order", sight: 90.0, imbalance: Some(10.0), source: FGCC },
    Class { name: "natmap_1", label: "National Mapping, first order", sight: 40.0, imbalance: None, source: NATMAP },
];

/// The class of that name.
pub fn class(name: &str) -> Option<&'static Class> {
    CLASSES.iter().find(|c| c.name == name)
}
