//! Drivers of the three browser engines, without any crate or tool beyond the engines' own drivers.

pub mod bidi;
pub mod child;
pub mod engine;
mod socket;
pub mod sound;
pub mod steps;
pub mod table;
pub mod webdriver;

/// What went wrong, in words.
pub type Result<T, E = String> = std::result::Result<T, E>;

/// Any error in words.
pub fn words(error: impl std::fmt::Display) -> String {
    error.to_string()
}

/// Texts by field name as an HTML form submits them.
pub fn entry(pairs: &[(&str, &str)]) -> String {
    form_urlencoded::Serializer::new(String::new()).extend_pairs(pairs).finish()
}

/// Where tests/run has npm put the packages that tests/package-lock.json names.
pub fn npm_modules() -> Result<std::path::PathBuf> {
    Ok(farstaff_www::target_dir().map_err(words)?.join("npm/node_modules"))
}
