//! The guide of k: our own rule, held to the one published observation it must bracket.
#![allow(
    clippy::unwrap_used,
    clippy::excessive_precision,
    reason = "a test may panic; references keep their printed digits"
)]

use farstaff::air::guide::{Sky, k};
use farstaff::quantity::Metres;

#[test]
fn brackets_what_was_seen() {
    // Hirt et al., J. Geophys. Res. 115, D21102 (2010), abstract: k from -4 to +16 at about 1.8 m over grass.
    assert!(k(Metres(1.8), Sky::Sunny).low.0 <= -4.0);
    assert!(k(Metres(1.8), Sky::ClearNight).high.0 >= 16.0);
}

#[test]
fn ordered_and_without_a_jump() {
    for sky in [Sky::Sunny, Sky::Overcast, Sky::ClearNight, Sky::Unknown] {
        let mut last = k(Metres(0.4), sky);
        for step in 0..2000 {
            let now = k(Metres(0.4 * libm::exp(f64::from(step) * 0.003)), sky);
            assert!(now.low.0 < now.value.0 && now.value.0 < now.high.0);
            assert!((now.value.0 - last.value.0).abs() < 0.05 && (now.high.0 - last.high.0).abs() < 0.2);
            last = now;
        }
    }
    assert_eq!(k(Metres(1.75), Sky::Sunny).value.0, -2.5);
    assert_eq!(k(Metres(f64::NAN), Sky::Sunny).value.0, -14.0);
}
