//! Published limits of levelling, each with its source and how sure we are of it. The job's own specification governs.

use crate::levelling::closure::Rule;
use crate::quantity::Tilt;

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

/// A limit on the misclosure of a run.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Closure {
    /// Name at the boundary.
    pub name: &'static str,
    /// Name on the page.
    pub label: &'static str,
    /// Between two marks.
    pub section: Rule,
    /// Of a run that returns to its own mark.
    pub circuit: Rule,
    /// Where it is printed, and whether it was read there.
    pub source: &'static str,
}

const fn per_km(name: &'static str, label: &'static str, section: f64, circuit: f64, source: &'static str) -> Closure {
    let [section, circuit] = [Rule::RootKm(section), Rule::RootKm(circuit)];
    Closure { name, label, section, circuit, source }
}

const GB: &str = "China, GB/T 12898-2009, forward against back run: as read";

/// Every limit on a misclosure; metres for one kilometre or one setup.
pub const CLOSURES: &[Closure] = &[
    Closure {
        name: "site_work",
        label: "site work, 5 mm √setups",
        section: Rule::RootSetups(0.005),
        circuit: Rule::RootSetups(0.005),
        source: "UK site work, 5 mm √setups: common practice, as recalled",
    },
    per_km("fgcc_1_1", "FGCC first order, class I", 0.003, 0.004, FGCC),
    per_km("fgcc_1_2", "FGCC first order, class II", 0.004, 0.005, FGCC),
    per_km("fgcc_2_1", "FGCC second order, class I", 0.006, 0.006, FGCC),
    per_km("fgcc_2_2", "FGCC second order, class II", 0.008, 0.008, FGCC),
    per_km("fgcc_3", "FGCC third order", 0.012, 0.012, FGCC),
    per_km("natmap_1", "National Mapping, first order", 0.004, 0.004, NATMAP),
    per_km("gb_3", "GB/T 12898 third class", 0.012, 0.012, GB),
    per_km("gb_4", "GB/T 12898 fourth class", 0.02, 0.02, GB),
    per_km(
        "en0593_2",
        "US Army EN0593, second order",
        0.0084,
        0.0084,
        "US Army Engineer School, EN0593 Surveying III (2001), second order: as read",
    ),
];

/// The limit on a misclosure of that name.
pub fn closure(name: &str) -> Option<&'static Closure> {
    CLOSURES.iter().find(|c| c.name == name)
}

/// The class of that name.
pub fn class(name: &str) -> Option<&'static Class> {
    CLASSES.iter().find(|c| c.name == name)
}

/// A limit for the collimation error of a level.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Collimation {
    /// Name at the boundary.
    pub name: &'static str,
    /// Name on the page.
    pub label: &'static str,
    /// Greatest rise or fall of the line over distance.
    pub most: Tilt,
    /// Where it is printed, and whether it was read there.
    pub source: &'static str,
}

const ARMY: &str = "US Army, TM 5-6675-329-13&P: as read";

/// Every limit for collimation.
pub const COLLIMATION: &[Collimation] = &[
    Collimation { name: "army", label: "US Army: 2 mm in 30 m", most: Tilt(0.002 / 30.0), source: ARMY },
    Collimation { name: "natmap", label: "National Mapping: 1 mm in 50 m", most: Tilt(0.001 / 50.0), source: NATMAP },
    Collimation { name: "fgcc", label: "FGCC: 0.05 mm/m", most: Tilt(0.000_05), source: FGCC },
    Collimation { name: "fgcc_3", label: "FGCC third order: 0.10 mm/m", most: Tilt(0.000_1), source: FGCC },
];
